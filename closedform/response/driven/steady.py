"""The steady state: what is left of the solution of a stable model when the rest has decayed."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from math import factorial
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.algebra.sign_argument import SignArgument
from closedform.algebra.waves import Wave
from closedform.model.driven.generator import Tone
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import Expression
from closedform.response.driven.composition import interval_formula
from closedform.response.driven.functions import DrivenFunctions, Interval, Summand
from closedform.response.driven.particular import Drive

__all__ = [
    "RowKind",
    "SteadyState",
    "ToneFate",
    "stays",
    "steady_state",
    "waves_for_ever",
    "waves_of_row",
]

RowKind = Literal["zero", "constant", "oscillating", "growing"]
"""oscillating: a mean value and sinusoids.  growing: powers of the time, or e^(at), a >= 0."""

Rows = tuple[tuple[Expression, ...], ...]
SignOf = Callable[[Scalar], SignArgument]


@dataclass(frozen=True)
class ToneFate:
    """Whether the waves of a tone stay (its rate is not negative) or decay (it is).

    The tone has the equations of the case put in; `rate` is the sign of its rate.
    """

    tone: Tone
    rate: SignArgument
    stays: bool


@dataclass(frozen=True)
class SteadyState:
    """The last interval of a solution as steady part + transient part.

    `steady` are the waves that do not decay, `transient` is all else in that interval; it
    tends to 0.  Both are summands over the columns of the solution's functions, and add up to
    the last interval.  `steady_formulas` and `transient_formulas` have one formula for each
    row of the model, `kinds` says what each steady one is.  `tones` are the tones of the
    inputs that are on for ever, each with its fate.
    """

    steady: tuple[Summand, ...]
    transient: tuple[Summand, ...]
    steady_formulas: tuple[Expression, ...]
    transient_formulas: tuple[Expression, ...]
    kinds: tuple[RowKind, ...]
    tones: tuple[ToneFate, ...]


def stays(sign_of: SignOf) -> Callable[[Tone], bool | None]:
    """Return what tells whether the waves of a tone do not decay; None where it is not known."""

    def fate(tone: Tone) -> bool | None:
        values = sign_of(tone.rate).values
        if values <= {0, 1}:
            return True
        return False if values == {-1} else None

    return fate


def steady_state(
    model: DrivenModel,
    functions: DrivenFunctions,
    columns: Rows,
    drive: Drive,
    sign_of: SignOf,
) -> SteadyState | None:
    """Return the steady state of a solution, or None where nothing is called so.

    That is where the model is not known to be stable, where of a wave that stays on it is not
    known whether it decays, and where an input repeats: that is put together elsewhere.
    `columns` are the formulas of the functions' columns, `drive` holds the tones in the case
    and `sign_of` tells signs there.
    """
    if functions.steady is None or functions.transient is None:
        return None
    rows = range(len(model.rows))
    kinds = tuple(_kind(waves_of_row(drive, functions, functions.steady, row)) for row in rows)
    keys = {(wave.rate, wave.frequency) for _, wave in waves_for_ever(model)}
    known = stays(sign_of)
    fates = []
    tones = model.generator.tones if model.generator is not None else ()
    given = [tone for of_input in tones for tone in of_input]
    for stated, tone in zip(given, drive.tones, strict=True):
        on = {(stated.rate, stated.frequency), (stated.rate, -stated.frequency)} & keys
        fate = ToneFate(tone, sign_of(tone.rate), bool(known(tone)))
        if on and fate not in fates:
            fates.append(fate)

    def formulas(summands: tuple[Summand, ...]) -> tuple[Expression, ...]:
        interval = Interval(functions.intervals[-1].start, None, summands)
        return tuple(interval_formula(model.field, columns, r, interval, model.time) for r in rows)

    return SteadyState(
        functions.steady,
        functions.transient,
        formulas(functions.steady),
        formulas(functions.transient),
        kinds,
        tuple(fates),
    )


def waves_for_ever(model: DrivenModel) -> Iterator[tuple[int, Wave]]:
    """Yield the waves that are never switched off, each with the place of its input."""
    for place, given in enumerate(model.inputs):
        for burst in given.signal.bursts:
            if burst.end is None:
                for wave in burst.waves:
                    yield place, wave


def waves_of_row(
    drive: Drive, functions: DrivenFunctions, summands: Sequence[Summand], row: int
) -> tuple[Wave, ...]:
    """Return one row of a sum of responses to the inputs as waves over the field, none zero.

    At a pair of roots a ± iw of p it is e^(at) [R_1 cos(wt) + (R_0 + a R_1) sin(wt)/w], with
    R = R_0 + R_1 lambda; at one root e^(at) R.

    Raises:  ValueError for terms that do not belong to the inputs, or have other constants.
    """
    zero = drive.field.domain.zero
    found: list[Wave] = []
    for summand in summands:
        for term in functions.columns.terms:
            entries = [residue.entry(row, summand.place) for residue in term.residues]
            if all(vanishes_under(c, drive.relation) for e in entries for c in e.to_list()):
                continue
            tone = drive.tone_of(term.factor.p)
            if tone is None or not summand.constant.is_one:
                raise ValueError("only responses to the inputs are sums of waves")
            rate, origin = tone.rate, summand.origin
            for j, entry in enumerate(entries):
                scale = drive.field.domain.convert(factorial(j))
                low, high = entry.nth(0) / scale, entry.nth(1) / scale
                if term.factor.degree == 1:
                    found.append(Wave(low, j, rate, "one", zero, origin))
                    continue
                sine = (low + rate * high) / tone.frequency
                found.append(Wave(high, j, rate, "cos", tone.frequency, origin))
                found.append(Wave(sine, j, rate, "sin", tone.frequency, origin))
    return tuple(w for w in found if not vanishes_under(w.amount, drive.relation))


def _kind(waves: Sequence[Wave]) -> RowKind:
    if any(wave.power or wave.rate for wave in waves):
        return "growing"
    if any(wave.frequency for wave in waves):
        return "oscillating"
    return "constant" if waves else "zero"
