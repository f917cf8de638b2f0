"""The steady state: what is left of the solution of a stable model when the rest has decayed."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.sign_argument import SignArgument
from closedform.model.driven.generator import Tone
from closedform.notation.expression import Expression
from closedform.response.driven.functions import Summand

__all__ = ["RowKind", "SteadyState", "ToneFate"]

RowKind = Literal["zero", "constant", "oscillating", "growing"]
"""oscillating: a mean value and sinusoids.  growing: powers of the time or e^(at), a > 0."""


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
