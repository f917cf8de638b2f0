"""What is said about a model with parameters on a terminal: its cases and what was left out."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import VerificationRecord

__all__ = ["all_checks", "case_lines", "parameters_line", "uncovered_lines"]

MOST_CASES = 12


def parameters_line(response: ParametricResponse) -> str:
    """Return how many parameters there are, and their names."""
    names = [parameter.name for parameter in response.model.parameters]
    if not names:
        return "none but the number pi"
    return f"{len(names)}: {', '.join(names)}"


def case_lines(response: ParametricResponse) -> list[str]:
    """Return a line for each case, its number and its condition; one for an only case."""
    cases = response.cases
    if len(cases) == 1 and not cases[0].conditions:
        return ["1, for all values"]
    shown = cases[:MOST_CASES] if len(cases) > MOST_CASES + 1 else cases
    lines = [f"{number}: {case.condition}" for number, case in enumerate(shown, start=1)]
    return lines + _rest(len(cases) - len(shown))


def uncovered_lines(response: ParametricResponse) -> list[str]:
    """Return a line for each part of the domain that has no solution."""
    texts = [" and ".join(map(str, parts)) for parts in response.not_covered]
    shown = texts[:MOST_CASES] if len(texts) > MOST_CASES + 1 else texts
    return [*shown, *_rest(len(texts) - len(shown))]


def all_checks(records: CaseRecords) -> VerificationRecord:
    """Return every check, those about the cases together first."""
    parts: Sequence[VerificationRecord] = (records.whole, *records.cases)
    return VerificationRecord(tuple(check for record in parts for check in record.checks))


def _rest(count: int) -> list[str]:
    return [f"… and {count} more"] if count else []
