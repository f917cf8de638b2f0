"""Whether all roots of a polynomial have negative real parts, told by signs of its coefficients.

For a monic polynomial s^n + a_1 s^(n-1) + … + a_n with real coefficients that is so exactly
when the Hurwitz determinants D_1, …, D_n are all positive, where D_k is the leading k x k
minor of the matrix with the entries a_(2j - i) (a_0 = 1, others 0).  If every a_k is positive,
D_(n-1), D_(n-3), … decide alone.

Sources: E. J. Routh, A Treatise on the Stability of a Given State of Motion, 1877;
A. Hurwitz, Mathematische Annalen 46, 1895; A. Liénard and M. H. Chipart, Journal de
mathématiques pures et appliquées, 1914; F. R. Gantmacher, The Theory of Matrices, 1959,
volume 2, chapter XV.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.factor_structure import FactorStructure
from closedform.algebra.field import Scalar
from closedform.algebra.sign_argument import SignArgument

__all__ = ["HurwitzTest", "Manner"]

Manner = Literal["decays", "rests", "oscillates", "grows", "persists", "undecided"]
"""What the terms of a factor's roots do as time goes on.

decays      every root has a negative real part
rests       the root is 0
oscillates  all roots are imaginary, in pairs other than 0
grows       some root has a positive real part
persists    some root has no negative real part; it is not told which of the three above
undecided   the signs are not known
"""


@dataclass(frozen=True)
class HurwitzTest:
    """How the roots of one factor of a characteristic polynomial lie, and why.

    Shapes:  `polynomial` are the n + 1 coefficients, highest first and 1; `multiplicity` is
    the power of the factor.  `coefficients` are the signs of a_1, …, a_n.  `determinants`
    are (k, sign of D_k) for those that were asked for, k rising: only where every
    coefficient is known to be positive, and n >= 3.  `structure` is given in their place
    where the structure of the matrix says that the roots decay.
    `derived` is the same test of p + p', for an even p, whose roots are all imaginary if
    those of p + p' decay (Hermite and Biehler; Gantmacher, chapter XV).
    """

    polynomial: tuple[Scalar, ...]
    multiplicity: int
    manner: Manner
    coefficients: tuple[SignArgument, ...]
    determinants: tuple[tuple[int, SignArgument], ...] = ()
    structure: FactorStructure | None = None
    derived: HurwitzTest | None = None

    @property
    def open(self) -> tuple[SignArgument, ...]:
        """The signs that would have to be positive for the roots to decay, and are not known."""
        asked = (*self.coefficients, *(argument for _, argument in self.determinants))
        return tuple(a for a in asked if a.values != {1}) if self.manner == "undecided" else ()
