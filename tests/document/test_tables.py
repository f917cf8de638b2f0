from __future__ import annotations

import pytest

from closedform.document.tables import decimal_tables
from tests.document.making import T, scalar


def test_decimals_are_aligned_at_the_point() -> None:
    (table,) = decimal_tables([T, scalar("x", t=T)], [["0", "-1.5"], ["10", "2e-3"], ["1", "—"]])
    assert table.columns == "r@{}lr@{}l"
    assert table.rows == (
        "$0$ &  & $-1$ & $.5$",
        r"$10$ &  & $2$ & $ \times 10^{-3}$",
        r"$1$ &  & \multicolumn{2}{c}{---}",
    )


def test_a_wide_table_is_cut_and_every_part_has_the_times() -> None:
    header = [T, *(scalar(f"x{k}", t=T) for k in range(10))]
    tables = decimal_tables(header, [["0.5", *["-1.234567890123e-12"] * 10]])
    assert len(tables) > 2
    assert all(table.head.startswith(r"\multicolumn{2}{c}{$t$}") for table in tables)
    assert sum(table.columns.count("l") - 1 for table in tables) == 10


def test_a_row_of_another_length_is_refused() -> None:
    with pytest.raises(ValueError, match="one cell for each column"):
        decimal_tables([T], [["1", "2"]])
