"""How far a line is from the truth, in words: which entry, how much, and when."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from flint import acb, arb, ctx

from closedform.algebra.elementary import NotElementaryError
from closedform.algebra.enclosure import decimal_order, exact_decimal
from closedform.checking.balls.enclosing import NoValueError, Quantities
from closedform.checking.digits import Difference, largest_difference
from closedform.checking.errors import NotJudgedError
from closedform.checking.slips.measuring import size
from closedform.checking.slips.trial import BITS, Trial
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.spread import spread
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Symbol, Written, walk

__all__ = ["residual_text"]

SHOWN_DIGITS = 4
SAMPLED = (Fraction(0), Fraction(1, 2), Fraction(1), Fraction(2), Fraction(5))
MOST_TOLD = 4
OUTSIDE = (NotJudgedError, NoValueError, NotElementaryError, ArithmeticError)
Pairs = Sequence[tuple[Written, Written]]


def residual_text(trial: Trial) -> str:
    """Return the largest difference of a member from its true value; empty where there is none.

    >>> residual_text(trial)  # doctest: +SKIP
    'entry (1, 2): 0.3679 too large at t = 1'
    """
    if trial.true is None or not trial.points:
        return ""
    try:
        pairs = _pairs(trial)
        found = _largest(trial, pairs)
    except OUTSIDE:
        return ""
    return "" if found is None else _told(trial, pairs, found)


def _pairs(trial: Trial) -> Pairs:
    opened = trial.setting.opened(trial.tree)
    if not isinstance(trial.true, ExactMatrix):
        assert trial.true is not None  # noqa: S101  asked for before
        return ((opened, written_back(trial.true)),)
    rows = spread(opened, trial.ground.size)
    if rows is None:
        return ()
    return tuple(
        (one, written_back(other))
        for row, truth in zip(rows, trial.true.rows, strict=True)
        for one, other in zip(row, truth, strict=True)
    )


def _largest(trial: Trial, pairs: Pairs) -> Difference | None:
    if not pairs:
        return None
    ground = trial.ground
    timed = any(Symbol(ground.truth.time) in walk(tree) for pair in pairs for tree in pair)
    instants = _instants(trial) if timed else (Fraction(0),)
    names = Quantities(enclosures=lambda: {**trial.names, **ground.sampled()})
    return largest_difference(pairs, ground.truth.time, instants, names)


def _instants(trial: Trial) -> list[Fraction]:
    """Return round instants of the order of the slowest time constant."""
    with ctx.workprec(BITS):
        values = trial.ground.sampled()
        rates = [size(v.enclosure(acb(0), values)) for v in trial.ground.eigenvalues]
        rates = [rate for rate in rates if rate > arb(1) / 10**9]
        slowest = min(rates, default=arb(1), key=lambda rate: rate)
        man, exp = (1 / slowest).mid().man_exp()
    constant = Fraction(int(man)) * Fraction(2) ** int(exp)
    unit = Fraction(10) ** decimal_order(constant) if constant > 0 else Fraction(1)
    start = trial.ground.stretches[0].start.as_fraction() or Fraction(0)
    return [start + share * unit for share in SAMPLED]


LARGEST_SHOWN = 4000
"""Binary exponents beyond which no decimals are worked out."""


def _told(trial: Trial, pairs: Pairs, found: Difference) -> str:
    where = ""
    if isinstance(trial.true, ExactMatrix):
        width = trial.true.shape[1]
        where = f"entry ({found.pair // width + 1}, {found.pair % width + 1}): "
    amount = found.difference
    if amount.imag.contains(0):
        far = _shown(abs(amount.real))
        how = f"{far} too {'large' if amount.real > 0 else 'small'}"
    else:
        how = f"{_shown(abs(amount))} off"
    used = {n.name for tree in pairs[found.pair] for n in walk(tree) if isinstance(n, Symbol)}
    time = trial.ground.truth.time
    at = f"{time} = {exact_decimal(found.instant, SHOWN_DIGITS)}" if time in used else ""
    values = trial.ground.truth.values or {}
    named = sorted(used & set(trial.ground.truth.parameters))
    known = [f"{name} = {_shown(trial.names[name].real)}" for name in named if name in trial.names]
    if len(known) <= MOST_TOLD and (values or trial.ground.truth.samples):
        at = ", ".join([part for part in (at, *known) if part])
    return f"{where}{how} at {at}" if at else f"{where}{how}"


def _shown(value: arb) -> str:
    man, exp = value.mid().man_exp()
    if abs(int(exp)) > LARGEST_SHOWN:
        return "very much" if int(exp) > 0 else "very little"
    return exact_decimal(Fraction(int(man)) * Fraction(2) ** int(exp), SHOWN_DIGITS)
