"""A write-up is read back before it is issued: faults in printers and templates do not pass."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from closedform import load, write_up
from closedform.derivation.step import Matrix
from closedform.document import beside, breaking, display, latex, matrices, tables
from closedform.document.reading.back import read_back
from closedform.document.reading.errors import DocumentRefutedError
from closedform.document.render import DEPTHS, rendered
from closedform.document.templating import templates_folder
from closedform.document.writeup import made_from
from closedform.errors import RefutedError
from closedform.model import DrivenModel, Model, ParametricModel
from closedform.notation.latex import formula
from closedform.notation.latex.box import Box, Style
from tests.document.driven_samples import DRIVEN_SAMPLES
from tests.document.parametric_samples import PARAMETRIC_SAMPLES
from tests.document.samples import SAMPLES

STARTERS = sorted(Path(str(templates_folder() / "starters")).glob("*.toml"))


def starter(name: str) -> DrivenModel | Model | ParametricModel:
    return load(STARTERS[0].with_name(f"{name}.toml"))


@pytest.mark.parametrize("number", range(len(STARTERS)), ids=lambda k: STARTERS[k].stem)
def test_every_write_up_of_a_starter_is_read_back(number: int) -> None:
    """In full, and at the lesser depths by turns: nearly all of these is printed in full too."""
    derivation = made_from(load(STARTERS[number]), 6).derivation
    *lesser, full = DEPTHS
    assert full == "full"
    for depth in (full, lesser[number % len(lesser)]):
        shown = rendered(derivation, depth=depth)
        assert shown.printed.displays
        read_back(shown.text, shown.printed, shown.time)


@pytest.mark.parametrize("name", [*SAMPLES, *PARAMETRIC_SAMPLES, *DRIVEN_SAMPLES])
def test_every_sample_is_read_back_in_full(name: str) -> None:
    sample = {**SAMPLES, **PARAMETRIC_SAMPLES, **DRIVEN_SAMPLES}[name]()
    shown = rendered(sample, depth="full")
    read_back(shown.text, shown.printed, shown.time)


# --- faults of the printers --------------------------------------------------------------------


def dropped_sign(box: Box, _style: Style) -> Box:
    return box


def swapped_rows(matrix: Matrix, *, tight: bool = False) -> Box:
    return MATRIX_BOX(Matrix(matrix.rows[::-1], matrix.front), tight=tight)


def lost_row(rows: list[str], labels: list[str]) -> str:
    return ALIGNED(rows[:-1], labels[:-1]) if len(rows) > 1 else ALIGNED(rows, labels)


def changed_digit(text: str) -> tuple[str, str, str]:
    sign, whole, part = SPLIT(text)
    return sign, whole, part.replace("6", "9")


def lost_digit(text: str) -> tuple[str, str, str]:
    sign, whole, part = SPLIT(text)
    return sign, whole, part[:-1]


def lost_front(_front: Any) -> Box:
    return Box("", 0.0)


MATRIX_BOX, ALIGNED, SPLIT = matrices.matrix_box, display._aligned, latex.split_decimal
FAULTS: dict[str, tuple[str, list[tuple[Any, str]], Callable[..., Any]]] = {
    "a sign is dropped": ("two_tanks", [(formula, "_minus")], dropped_sign),
    "rows change places": (
        "three_equal_tanks",
        [(display, "matrix_box"), ("closedform.document.symbols", "matrix_box")],
        swapped_rows,
    ),
    "a row of a broken formula is lost": ("switched_ladder", [(display, "_aligned")], lost_row),
    "a digit changes": ("three_equal_tanks", [(tables, "split_decimal")], changed_digit),
    "a decimal in a sentence changes": (
        "three_mass_chain",
        [(latex, "split_decimal")],
        lost_digit,
    ),
    "a factor before a matrix is lost": (
        "three_equal_tanks",
        [(matrices, "front_box")],
        lost_front,
    ),
}


@pytest.mark.parametrize("fault", FAULTS)
def test_a_fault_of_a_printer_is_refused(
    fault: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    name, places, wrong = FAULTS[fault]
    model = starter(name)
    for module, attribute in places:
        if isinstance(module, str):
            monkeypatch.setattr(f"{module}.{attribute}", wrong)
        else:
            monkeypatch.setattr(module, attribute, wrong)
    with pytest.raises(DocumentRefutedError) as caught:
        write_up(model, into=tmp_path / "new", depth="full")
    assert isinstance(caught.value, RefutedError)
    assert caught.value.line > 1
    assert not (tmp_path / "new").exists()


def test_a_bracket_lost_where_a_line_is_broken_is_refused(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(breaking, "bracketed", lambda box: box)
    model = starter("three_compartments")
    with pytest.raises(DocumentRefutedError, match="exp A"):
        write_up(model, into=tmp_path / "new", depth="full")


def test_statements_beside_each_other_are_read_one_by_one(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    whole = beside.displayed_beside

    def shorter(statements: Any) -> Any:
        return whole(statements[:-1] if len(statements) > 1 else statements)

    monkeypatch.setattr("closedform.document.printed.displayed_beside", shorter)
    model = starter("two_tanks")
    with pytest.raises(DocumentRefutedError, match="missing"):
        write_up(model, into=tmp_path / "new")


# --- faults of templates -----------------------------------------------------------------------


TEMPLATES = {
    "a display of its own": (
        "\\begin{equation*}\n  a = b\n\\end{equation*}",
        "nothing was to be printed|not those of the statement|accounts for it|not what was proved",
    ),
    "a formula put together": ('$<< "x" ~ 1 >>$', "nothing accounts for it"),
    "a display that is left out": ("<% set _ = display(step.statements[0]) %>", "missing|not what"),
    "a display that is changed": (
        '<< (display(step.statements[0])|string).replace("=", "<") >>',
        "relation signs",
    ),
}


@pytest.mark.parametrize("fault", TEMPLATES)
def test_what_no_object_accounts_for_is_refused(fault: str, tmp_path: Path) -> None:
    text, said = TEMPLATES[fault]
    part = tmp_path / "own" / "steps" / "cautions.tex.j2"
    part.parent.mkdir(parents=True)
    whole = "<% set step = steps[0] %>\n" + text
    part.write_text(whole, encoding="utf-8")
    model = starter("two_tanks")
    with pytest.raises(DocumentRefutedError, match=said) as caught:
        write_up(model, into=tmp_path / "new", template=tmp_path / "own")
    assert caught.value.template == str(tmp_path / "own")
    assert str(tmp_path / "own") in str(caught.value)
    assert not (tmp_path / "new").exists()


def test_a_template_may_say_what_it_likes_between_dollar_signs(tmp_path: Path) -> None:
    part = tmp_path / "own" / "steps" / "cautions.tex.j2"
    part.parent.mkdir(parents=True)
    part.write_text("As $f = m a$ says, << steps[0].statements[0]|math >>.\n", encoding="utf-8")
    model = starter("two_tanks")
    (written, *_) = write_up(model, into=tmp_path / "new", template=tmp_path / "own").files
    assert "$f = m a$" in written.read_text(encoding="utf-8")
