"""Periods and what joins them: the states at their ends, and the divisors of sums over them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import isqrt

from flint import acb, acb_poly, arb, ctx

from closedform.algebra.field import Polynomial
from closedform.algebra.hurwitz import hurwitz_test, sign_oracle
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.notation import enclose as enclose_formula
from closedform.notation import plain, read_signal_formula
from closedform.notation.errors import FormulaError, UndeclaredNameError
from closedform.notation.expression import Expression
from closedform.response.driven.period_formulas import PeriodicSolution, PeriodStretch
from closedform.verification.comparison import AGREED, Finding, Pair, check_of, compared, is_narrow
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.periods import Periods
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import Enclose
from closedform.verification.record import Check

__all__ = ["periodic_checks"]

_ENDS = "states at the ends of periods"
_DIVISORS = "divisors of sums over periods"
_BITS = 256


def periodic_checks(setting: Setting, written: PeriodicSolution) -> tuple[Check, ...]:
    """Return what is said of inputs that repeat besides their formulas in each period.

    `setting` is one period by itself.
    """
    return (_ends_check(setting, written), _divisors_check(setting, written))


# --- the ends of periods ---------------------------------------------------------------------


@dataclass(frozen=True)
class _End:
    """A formula of a state at the end or start of a period, `blow` less than the state there.

    `n` counts the periods that are over, None for the steady one.
    """

    formula: Expression
    row: int
    n: int | None
    local: int | None
    blow: int | None


def _ends_check(setting: Setting, written: PeriodicSolution) -> Check:
    """The states that are said to be left, carried on and steady; and how periods join."""
    if not setting.grounds:
        return Check(_ENDS, "not attempted", "no point of this case was found to put in")
    most = 2 * setting.states + 3
    most = most if written.count is None else min(most, written.count)
    known = setting.names | {written.number, written.local}
    try:
        ends = dict(_ends(setting, written, most, known))
    except UndeclaredNameError as error:
        return Check(_ENDS, "refuted", f"{error.name} has no definition")
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(_ENDS, "not attempted", f"a formula was not read back: {error}")
    findings = (_end_finding(setting, written, g, ends) for g in setting.grounds)
    return check_of(
        _ENDS,
        findings,
        f"those that are written agree {AGREED} with the model carried on from period to period "
        f"by exponentials in ball arithmetic, at the ends of the first {most}; the formulas of "
        "each period begin and end with them, moved by B times what strikes there"
        + ("" if written.begins is None else "; so do those of the steady period"),
    )


def _ends(
    setting: Setting, written: PeriodicSolution, most: int, names: frozenset[str]
) -> Iterator[tuple[str, _End]]:
    def read(formula: Expression) -> Expression:
        return read_signal_formula(plain(formula), time=setting.model.time, constants=names)

    def states(
        told: str, formulas: Sequence[Expression], periods: Sequence[int | None]
    ) -> Iterator[tuple[str, _End]]:
        for row, formula in enumerate(formulas):
            for n in periods:
                yield f"{told} {n or ''}, row {row + 1}", _End(read(formula), row, n, None, None)

    def joined(
        told: str, stretches: Sequence[PeriodStretch], periods: Sequence[int | None]
    ) -> Iterator[tuple[str, _End]]:
        for row in range(setting.states):
            first, last = (read(stretches[place].rows[row]) for place in (0, -1))
            for n in periods:
                place = f"{told} {n or ''}, row {row + 1}"
                yield f"start of {place}", _End(first, row, n, 0, 0)
                yield f"end of {place}", _End(last, row, n, setting.last, setting.last)

    counted = range(1, most + 1)
    yield from states("what a period leaves", written.left, [1])
    yield from states("what is carried on after period", written.carried, counted)
    yield from joined("period", written.stretches, counted)
    if written.begins is not None:
        yield from states("what a steady period begins with", written.begins, [None])
    if written.steady is not None:
        yield from joined("the steady period", written.steady, [None])


def _end_finding(
    setting: Setting, written: PeriodicSolution, ground: Ground, ends: Mapping[str, _End]
) -> Finding:
    periods = Periods(setting, ground)

    def expected(end: _End, enclose: Enclose) -> arb:
        """The state before or after the period, with what strikes at its start or end."""
        if end.n is None:
            value = periods.steady(enclose)[end.row]
        else:
            begun = end.n - 1 if end.local == 0 else end.n
            value = periods.after(begun, enclose)[end.row]
        if end.blow is None:
            return value
        ((own,), *_) = setting.blow(end.blow).to_list()[end.row :]
        struck = enclose(own)
        return value + struck if end.local == 0 else value - struck

    def evaluate(names: Sequence[str]) -> Iterator[Pair]:
        enclose, balls = ground.enclose(), ground.balls()
        for name in names:
            end = ends[name]
            local = periods.length(enclose) if end.local else arb(0)
            values = {**balls, written.local: local, written.number: arb(end.n or 0)}
            yield enclose_formula(end.formula, values), expected(end, enclose)

    return compared(ends, evaluate, where=ground.told)


# --- divisors ----------------------------------------------------------------------------------


def _divisors_check(setting: Setting, written: PeriodicSolution) -> Check:
    """No 1 - e^(lambda T) vanishes, but where that is said.

    It vanishes only where lambda T is a multiple of 2 pi i; see F. Lindemann, Ueber die Zahl
    pi, 1882, for algebraic numbers, and for ratios that hold pi or parameters the exact ones.
    """
    told = [
        read_signal_formula(plain(f), time=setting.model.time, constants=setting.names)
        for f in written.provided
    ]
    said = False
    for p in _factors(setting):
        outcome = _of_factor(setting, p)
        if outcome == "refuted":
            shown = " + ".join(map(str, p.to_list()))
            return Check(_DIVISORS, "refuted", f"a root may be 0: coefficients {shown}")
        if outcome == "meets" and not written.meets:
            return Check(_DIVISORS, "refuted", "a pair that meets the period is not told")
        if outcome == "open":
            said = True
            check = _said(setting, p, told)
            if check.outcome != "enclosed":
                return check
    how = (
        "every eigenvalue is 0, or e to it times the period is not 1: its real part is not 0, "
        "or by the exact ratio of its angle to 2 pi"
    )
    if said:
        how += "; what is left open are the divisors that are named, in numbers"
    return Check(_DIVISORS, "enclosed" if said else "proved", how)


def _factors(setting: Setting) -> list[Polynomial]:
    """The irreducible factors of det(sI - A), the equations of the case put in."""
    rows = setting.model.reduction.matrix.to_list()
    matrix = setting.field.matrix([[setting.put(e) for e in row] for row in rows])
    found: dict[Polynomial, None] = {}
    for coefficients, _ in matrix.charpoly_factor_list():
        found[setting.field.polynomial(coefficients).monic()] = None
    return list(found)


def _of_factor(setting: Setting, p: Polynomial) -> str:
    """What is known of the roots of a factor: settled, meets, open or refuted."""
    field, last = setting.field, p.nth(0)
    if p.degree() == 1 and setting.vanishes(last):
        return "settled"
    if 0 in setting.signs_of(last):
        return "refuted"
    if p.degree() == 1:
        return "settled"
    case = setting.solution.case
    decays = hurwitz_test(field, p, sign_oracle(field, None if case is None else case.domain))
    if decays.manner == "decays":
        return "settled"
    if not isinstance(field, ParameterField):
        return "settled"  # an algebraic angle is no multiple of 2 pi
    if p.degree() > 2:
        return "settled" if not any(map(field.symbols_in, p.to_list())) else "open"
    period = setting.instants[-1] - setting.instants[0]
    square = (p.nth(0) - p.nth(1) ** 2 / field.domain.convert(4)) * period**2
    if field.names_in(square):
        return "open"
    if PI not in field.parameters:
        return "settled"
    turns = field.constant(square / (2 * field.symbol(PI)) ** 2)
    return "meets" if turns is not None and _is_square(turns) else "settled"


def _is_square(value: Fraction) -> bool:
    return value > 0 and value.denominator == 1 and isqrt(int(value)) ** 2 == value


def _said(setting: Setting, p: Polynomial, told: Sequence[Expression]) -> Check:
    """For a pair that may be undamped some F is named, and |1 - e^(lambda T)|^2 = F or 4 F^2.

    A pair is damped throughout the case where the sum of its roots is nowhere 0; of a factor
    of higher degree the points tell.
    """
    undamped = p.degree() == 2 and 0 in setting.signs_of(p.nth(1))
    if p.degree() == 2 and not undamped:
        return Check(_DIVISORS, "enclosed", "")
    for ground in setting.grounds:
        with ctx.workprec(_BITS):
            gaps = _gaps(setting, p, ground, damped_too=undamped)
            if gaps is None:
                how = f"the roots of a factor are not told apart{ground.told}"
                return Check(_DIVISORS, "not attempted", how)
            balls = ground.balls()
            values = [enclose_formula(formula, balls) for formula in told]
            squares = [*values, *(4 * v * v for v in values)]
            if not all(map(is_narrow, (*gaps, *values))):
                return Check(_DIVISORS, "not attempted", f"a divisor is not settled{ground.told}")
            if not all(any(gap.overlaps(square) for square in squares) for gap in gaps):
                return Check(_DIVISORS, "refuted", f"a divisor is not named{ground.told}")
    return Check(_DIVISORS, "enclosed", "")


def _gaps(setting: Setting, p: Polynomial, ground: Ground, *, damped_too: bool) -> list[arb] | None:
    """|1 - e^(lambda T)|^2 for the roots above the real axis; None where these are not found."""
    enclose = ground.enclose()
    period = enclose(setting.instants[-1]) - enclose(setting.instants[0])
    coefficients = [acb(enclose(c)) for c in reversed(p.to_list())]
    if p.degree() == 2:
        c, b, _ = coefficients
        half = (b * b / 4 - c).sqrt()
        roots = [-b / 2 + half, -b / 2 - half]
    else:
        try:
            roots = acb_poly(coefficients).roots()
        except ValueError:  # they do not converge where two of them meet
            return None
    found = []
    for root in roots:
        damped = root.real > 0 or root.real < 0
        if root.imag > 0 and (damped_too or not damped):
            gap = acb(1) - (root * period).exp()
            found.append(gap.real**2 + gap.imag**2)
    return found
