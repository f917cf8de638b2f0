"""What is said about a finished write-up on a terminal."""

from __future__ import annotations

import textwrap
from collections import Counter
from collections.abc import Callable, Sequence
from fractions import Fraction
from pathlib import Path

from flint import arb

from closedform.algebra.enclosure import certified_decimal
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.cli.cases import all_checks, case_lines, parameters_line, uncovered_lines
from closedform.cli.driven import behaviour_lines, listed, of_inputs, of_matrix, stated_lines
from closedform.cli.screen import Line
from closedform.document.writeup import WriteUp
from closedform.notation.expression import Expression, Name, Negation, Number, Quotient, Sum
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula
from closedform.response.driven.response import DrivenResponse
from closedform.response.modes import Mode
from closedform.response.names import Radical, RootPart
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import ClosedForms, Response
from closedform.response.sampling import constant_decimal, surd_decimal
from closedform.verification.record import VerificationRecord

__all__ = ["summary"]

LABEL = 17
MOST_ROWS = 12
MOST_DIGITS = 12
ROWS = ("eigenvalues", "of the inputs")
"""The labels of lines that are laid out in columns already."""


def summary(result: WriteUp, files: Sequence[Path], *, digits: int, width: int) -> list[Line]:
    """Return the lines that tell what was found, what was proved and what was written.

    No line is longer than `width`, except that a path is never broken.
    """
    lines: list[Line] = [
        ((title, "bold"),) for title in textwrap.wrap(result.response.model.title, width) or [""]
    ]
    entries = [
        *_found(result, digits, width),
        ("written", [str(file) for file in files]),
    ]
    for label, texts in entries:
        for k, text in enumerate(texts):
            lines.append(((f"  {'' if k else label:{LABEL - 2}}", "dim"), (text, "")))
    return [*lines, ()]


def _found(result: WriteUp, digits: int, width: int) -> list[tuple[str, list[str]]]:
    """Return labelled lines: what was found, and what was proved of it."""
    response, record = result.response, result.verification
    most = min(digits, MOST_DIGITS)
    if isinstance(response, DrivenResponse):
        found = _of_driven(response, most, width - LABEL)
    else:
        found = [("states", [listed(response.model.states)])]
    if isinstance(response, ParametricResponse):
        found += _of_cases(response)
    elif isinstance(response, Response):
        found.append((ROWS[0], eigenvalues(response, most, width - LABEL)))
        found.append(("form", form(response)))
    checks = record if isinstance(record, VerificationRecord) else all_checks(record)
    found += [(label, [text]) for label, text in proofs(checks)]
    return [
        (label, texts if label in ROWS else [w for t in texts for w in _wrapped(t, width)])
        for label, texts in found
    ]


def _of_cases(response: ParametricResponse) -> list[tuple[str, list[str]]]:
    return [
        ("parameters", [parameters_line(response)]),
        ("cases", case_lines(response)),
        ("not covered", uncovered_lines(response)),
    ]


def _of_driven(response: DrivenResponse, digits: int, width: int) -> list[tuple[str, list[str]]]:
    found = stated_lines(response.model)
    stacked = response.stacked
    if isinstance(stacked, ParametricResponse):
        found += _of_cases(stacked)
    else:
        for label, told in zip(ROWS, (of_matrix(response), of_inputs(response)), strict=True):
            found.append((label, eigenvalues(stacked, digits, width, told)))
    return found + behaviour_lines(response)


def _repetition(factor: Factor) -> str:
    if factor.multiplicity == 1:
        return ""
    index = f", index {factor.index}" if factor.index > 1 else ""
    return f"multiplicity {factor.multiplicity}{index}"


def eigenvalues(
    response: Response,
    digits: int,
    width: int,
    told: Callable[[Factor], str | None] = _repetition,
) -> list[str]:
    """Return a row for each eigenvalue or pair: decimals, exact form or name, repetition.

    `told` says how often those of a factor occur, None for a factor to be left out.
    An exact form for which a row has no room is left out: it stands in the document.
    """
    forms = response.closed_forms
    found = [
        (*row, repetition)
        for factor, modes in zip(response.spectrum.factors, forms.modes, strict=True)
        for repetition in (told(factor),)
        if repetition is not None
        for mode in modes
        for row in _values(mode, forms, digits)
    ]
    if not found:
        return []
    shown = found[:MOST_ROWS] if len(found) > MOST_ROWS + 1 else found
    left = max(len(decimal) for decimal, _, _ in shown)
    right = max(len(repetition) for _, _, repetition in shown)
    room = width - left - right - 4
    shown = [(d, exact if len(exact) <= room else "", r) for d, exact, r in shown]
    middle = max(len(exact) for _, exact, _ in shown)
    gap = middle + 2 if middle else 0
    rows = [f"{d:{left}}  {exact:{gap}}{r}".rstrip() for d, exact, r in shown]
    if len(shown) < len(found):
        rows.append(f"… and {len(found) - len(shown)} more")
    return rows


def form(response: Response) -> list[str]:
    """Return what kind of canonical form was found, in a phrase or a few."""
    blocks: Counter[int] = Counter()
    real_blocks: Counter[int] = Counter()
    turning, named = False, []
    for factor, modes in zip(response.spectrum.factors, response.closed_forms.modes, strict=True):
        for size in factor.blocks:
            blocks[size] += factor.degree
            for mode in modes:
                if mode.kind == "circular":
                    real_blocks[2 * size] += 1
                else:
                    real_blocks[size] += 1 if mode.kind == "real" else 2
        turning |= any(mode.kind == "circular" for mode in modes)
        if _has_named_roots(response.closed_forms, modes):
            named.append(factor.degree)
    texts = ["diagonalisable" if set(blocks) == {1} else f"Jordan form: {_sizes(blocks)}"]
    if turning:
        texts.append(f"real form: {_sizes(real_blocks)}")
    if named:
        noun = "a polynomial" if len(named) == 1 else "polynomials"
        texts.append(f"named roots of {noun} of degree {', '.join(map(str, named))}")
    return texts


def proofs(record: VerificationRecord) -> list[tuple[str, str]]:
    """Return labelled texts: what was proved, what enclosed, and what not attempted, and why."""
    counts = Counter(check.outcome for check in record.checks)
    proved = _counted(counts["proved"], "identity", "identities")
    found = [("proved", f"{proved}, by exact arithmetic")]
    if counts["enclosed"]:
        compared = _counted(counts["enclosed"], "comparison", "comparisons")
        found.append(("enclosed", f"{compared}, by certified numbers"))
    return found + [
        (check.outcome, f"{check.item}: {check.how}")
        for check in record.checks
        if check.outcome not in ("proved", "enclosed")
    ]


def _values(mode: Mode, forms: ClosedForms, digits: int) -> list[tuple[str, str]]:
    """Return decimals and exact form (if the decimals are not exact) of a mode's eigenvalues."""
    rate, exact_rate = _number(mode.rate, forms, digits)
    if mode.frequency is None:
        return [(rate, "" if _is(rate, mode.rate) else plain(exact_rate))]
    frequency, exact_frequency = _number(mode.frequency, forms, digits)
    moved = not (isinstance(mode.rate, SurdSum) and mode.rate.is_zero)
    if mode.kind == "hyperbolic":
        front = (exact_rate,) if moved else ()
        offsets = (exact_frequency, Negation(exact_frequency))
        return [
            (_shifted(mode, sign, digits), plain(Sum((*front, offset))))
            for sign, offset in zip((1, -1), offsets, strict=True)
        ]
    turn = plain(exact_frequency)
    fraction = isinstance(exact_frequency, Number) and "/" in turn
    if fraction or isinstance(exact_frequency, Sum | Quotient):
        turn = f"({turn})"  # otherwise the i would seem to stand below the line
    exact = f"{plain(exact_rate) if moved else ''} ± {turn} i".strip()
    known = _is(rate, mode.rate) and _is(frequency, mode.frequency)
    return [(f"{rate if moved else ''} ± {frequency} i".strip(), "" if known else exact)]


def _number(value: SurdSum | str, forms: ClosedForms, digits: int) -> tuple[str, Expression]:
    """Return the decimals of a number, and its exact form, or its name if it has none."""
    if isinstance(value, SurdSum):
        return surd_decimal(value, digits), surd_formula(value)
    constant = next(c for c in forms.constants if c.name == value)
    exact = constant.definition
    formula = exact.formula if isinstance(exact, Radical) else Name(value)
    return constant_decimal(constant, digits), formula


def _shifted(mode: Mode, sign: int, digits: int) -> str:
    """Return the decimals of a + kappa or a - kappa; the ball of the first is at `which`."""
    roots = mode.factor.roots

    def upper() -> arb:
        return roots.enclosures()[mode.which - 1].real

    def lower() -> arb:
        return 2 * roots.field.enclose(roots.centre) - upper()

    return certified_decimal(upper if sign > 0 else lower, digits)


def _is(decimal: str, value: SurdSum | str) -> bool:
    """Whether a decimal is the number exactly."""
    return (
        isinstance(value, SurdSum)
        and value.is_rational
        and Fraction(decimal) == value.as_fraction()
    )


def _has_named_roots(forms: ClosedForms, modes: Sequence[Mode]) -> bool:
    named = {c.name for c in forms.constants if isinstance(c.definition, RootPart)}
    return any(value in named for mode in modes for value in (mode.rate, mode.frequency))


def _sizes(counts: Counter[int]) -> str:
    (size, count), *smaller = sorted(counts.items(), reverse=True)
    first = f"{_counted(count, 'block', 'blocks')} of size {size}"
    return ", ".join([first, *(f"{count} of size {size}" for size, count in smaller)])


def _counted(count: int, one: str, more: str) -> str:
    return f"{count} {one if count == 1 else more}"


def _wrapped(text: str, width: int) -> list[str]:
    return textwrap.wrap(text, max(width - LABEL, LABEL)) or [""]
