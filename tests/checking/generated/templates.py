"""Derivations with parameters, and with steps: customary formulas, each in several forms.

The reference is mpmath's exponential of the matrix in numbers, with the input as a part of the
state, for two choices of the parameters.
"""

from __future__ import annotations

from tests.checking.generated.lags import charging, decay_chain, fading, repair, stepped
from tests.checking.generated.oscillators import critical, damped, mass, shaken

__all__ = ["TEMPLATES"]

TEMPLATES = (
    damped,
    mass,
    charging,
    decay_chain,
    critical,
    repair,
    shaken,
    fading,
    stepped,
)
