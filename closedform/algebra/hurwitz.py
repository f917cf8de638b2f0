"""Whether all roots of a polynomial have negative real parts, told by signs of its coefficients.

For a monic polynomial s^n + a_1 s^(n-1) + … + a_n with real coefficients that is so exactly
when the Hurwitz determinants D_1, …, D_n are all positive, where D_k is the leading k x k
minor of the matrix with the entry a_(2j - i) in row i and column j (a_0 = 1, others 0).  If
every a_k is positive, D_(n-1), D_(n-3), … decide alone.

Sources: E. J. Routh, A Treatise on the Stability of a Given State of Motion, 1877;
A. Hurwitz, Mathematische Annalen 46, 1895; A. Liénard and M. H. Chipart, Journal de
mathématiques pures et appliquées, 1914; F. R. Gantmacher, The Theory of Matrices, 1959,
volume 2, chapter XV.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Literal

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.factor_structure import FactorStructure, structure_of_factor
from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.sign_argument import Constant, SignArgument, named

__all__ = [
    "HurwitzTest",
    "Manner",
    "hurwitz_determinant",
    "hurwitz_test",
    "hurwitz_tests",
    "sign_oracle",
]

Manner = Literal["decays", "rests", "oscillates", "grows", "persists", "undecided"]
"""What the terms of a factor's roots do as time goes on.

decays      every root has a negative real part
rests       the root is 0
oscillates  all roots are imaginary, in simple pairs other than 0
grows       some root has a positive real part
persists    some root has no negative real part; it is not told which of the three above
undecided   the signs are not known
"""

SignOf = Callable[[Scalar], SignArgument]


@dataclass(frozen=True)
class HurwitzTest:
    """How the roots of one factor of a characteristic polynomial lie, and why.

    Shapes:  `polynomial` are the n + 1 coefficients, highest first and 1; `multiplicity` is
    the power of the factor.  `coefficients` are the signs of a_1, …, a_n.  `determinants`
    are (k, sign of D_k) for those that were asked for, k falling: only for n >= 3, where
    every coefficient is known to be positive.  `structure` is given in their place where
    the structure of the matrix says how the roots lie.
    `derived` is the same test of p + p', for an even p of degree 4 or more: all roots of p are
    imaginary, and simple, where those of p + p' decay (Hermite and Biehler; Gantmacher,
    chapter XV).
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
        """What would have to be positive for the roots to decay, and is not known to be."""
        asked = (*self.coefficients, *(argument for _, argument in self.determinants))
        return tuple(a for a in asked if a.values != {1}) if self.manner == "undecided" else ()


def sign_oracle(field: BaseField, domain: ParameterDomain | None) -> SignOf:
    """Return what tells signs: the domain of the parameters, or the field of numbers itself."""
    if domain is not None:
        return domain.sign_of

    def of_number(element: Scalar) -> SignArgument:
        return SignArgument(element, named(frozenset({field.sign(element)})), Constant())

    return of_number


def hurwitz_tests(
    field: BaseField, matrix: FieldMatrix, domain: ParameterDomain | None
) -> tuple[HurwitzTest, ...]:
    """Return a test for each irreducible factor of det(sI - A), those of low degree first.

    `matrix` A is square, over the field; `domain` is None for numbers.
    Exact:   numbers are compared in their field; signs of functions of parameters have
             arguments that hold on all of the domain.
    """
    found: dict[Polynomial, int] = {}
    for coefficients, multiplicity in matrix.charpoly_factor_list():
        p = field.polynomial(coefficients).monic()
        found[p] = found.get(p, 0) + multiplicity
    tests = [_of_factor(field, matrix, p, m, domain) for p, m in found.items()]
    return tuple(sorted(tests, key=lambda test: (len(test.polynomial), str(test.polynomial))))


def hurwitz_test(field: BaseField, p: Polynomial, sign_of: SignOf) -> HurwitzTest:
    """Return how the roots of a monic polynomial of degree 1 or more lie, as its signs tell.

    "decays" is said where every sign that is asked for is told, and is positive; where it is
    told that one of them is not, some root has no negative real part.
    """
    coefficients = tuple(p.to_list())
    n = len(coefficients) - 1
    signs = tuple(sign_of(c) for c in coefficients[1:])
    test = HurwitzTest(coefficients, 1, "undecided", signs)
    if n % 2 == 0 and not any(coefficients[1::2]):
        return _of_even(field, p, test, sign_of)
    if any(a.values == {-1} for a in signs):
        return replace(test, manner="grows")
    if n == 1 and signs[0].values == {0}:
        return replace(test, manner="rests")
    if any(a.values <= {-1, 0} for a in signs):
        return replace(test, manner="persists")
    if not all(a.values == {1} for a in signs):
        return test
    determinants = []
    for k in range(n - 1, 1, -2):
        argument = sign_of(hurwitz_determinant(field, coefficients, k))
        determinants.append((k, argument))
        if argument.values <= {-1, 0}:
            manner: Manner = "grows" if argument.values == {-1} else "persists"
            return replace(test, manner=manner, determinants=((k, argument),))
    known = all(argument.values == {1} for _, argument in determinants)
    return replace(
        test, manner="decays" if known else "undecided", determinants=tuple(determinants)
    )


def hurwitz_determinant(field: BaseField, coefficients: tuple[Scalar, ...], k: int) -> Scalar:
    """Return D_k of a polynomial with these coefficients, highest first; k >= 1."""
    zero, n = field.domain.zero, len(coefficients) - 1
    rows = [
        [coefficients[2 * j - i] if 0 <= 2 * j - i <= n else zero for j in range(1, k + 1)]
        for i in range(1, k + 1)
    ]
    return field.matrix(rows).charpoly()[-1] * field.domain.convert((-1) ** k)


def _of_even(field: BaseField, p: Polynomial, test: HurwitzTest, sign_of: SignOf) -> HurwitzTest:
    """s^2 + c, and other polynomials in s^2: their roots lie in pairs ± r."""
    signs = test.coefficients[1::2]
    if any(a.values == {-1} for a in signs):
        return replace(test, manner="grows")
    if not all(a.values == {1} for a in signs):
        return replace(test, manner="persists")
    if p.degree() == 2:
        return replace(test, manner="oscillates")
    derived = hurwitz_test(field, p + p.diff(), sign_of)
    manner: Manner = "oscillates" if derived.manner == "decays" else "persists"
    return replace(test, manner=manner, derived=derived)


def _of_factor(
    field: BaseField,
    matrix: FieldMatrix,
    p: Polynomial,
    multiplicity: int,
    domain: ParameterDomain | None,
) -> HurwitzTest:
    if domain is None:
        return replace(_of_numbers(field, p), multiplicity=multiplicity)
    if p.degree() >= 3:
        structure = structure_of_factor(domain.field, matrix, p, domain)
        manner = None if structure is None else _by_structure(structure)
        if manner is not None:
            coefficients = tuple(p.to_list())
            signs = tuple(domain.sign_of(c) for c in coefficients[1:])
            return HurwitzTest(coefficients, multiplicity, manner, signs, structure=structure)
    return replace(hurwitz_test(field, p, domain.sign_of), multiplicity=multiplicity)


def _by_structure(structure: FactorStructure) -> Manner | None:
    if structure.squared:
        simple = structure.simple is not None and not structure.simple.exceptions
        return "oscillates" if structure.negative and simple else None
    return "decays" if structure.decays else None


def _of_numbers(field: BaseField, p: Polynomial) -> HurwitzTest:
    """An irreducible p is even, or s, if it has an imaginary root: then -s is a root with s."""
    test = hurwitz_test(field, p, sign_oracle(field, None))
    return replace(test, manner="grows") if test.manner == "persists" else test
