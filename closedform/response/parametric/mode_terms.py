"""The real functions that the roots of a factor contribute in one regime, with parameters.

For an entry R of a modal term, sum over p(lambda) = 0 of R(lambda) e^(lambda t)/p'(lambda),
times t^j/j!, each regime says how it is written with exponentials, sines and cosines.
Coefficients are elements of the writing field W: rational functions of the parameters and
of the names of the quantities.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction
from functools import reduce
from math import factorial
from operator import mul

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.lowest_terms import fraction, sum_at
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.expression import operations
from closedform.notation.rational_formula import rational_formula
from closedform.response.parametric.modes import NAMED_REAL, Mode, squares_of
from closedform.response.parametric.residues import amount_of
from closedform.response.parametric.terms import Kernel, Term

__all__ = ["terms_of"]

KERNELS: dict[str, tuple[Kernel, Kernel]] = {
    "circular": ("cos", "sin"),
    "hyperbolic": ("cosh", "sinh"),
}
"""The even and the odd function of a pair of roots."""


def terms_of(
    field: ParameterField,
    writing: ParameterField,
    modes: Sequence[Mode],
    function: ExponentialMatrix,
    row: int,
    column: int,
) -> list[Term]:
    """Return one entry of a matrix of functions as terms over the writing field."""
    found: list[Term] = []
    for mode, term in zip(modes, function.terms, strict=True):
        entries = [residue.entry(row, column) for residue in term.residues]
        if all(entry.is_zero for entry in entries):
            continue
        for power, entry in enumerate(entries):
            if entry.is_zero:
                continue
            weight = writing.scalar(Fraction(1, factorial(power)))
            parts = _terms(field, writing, mode, entry)
            if len(entries) == 1 and any(m.regime.kind in NAMED_REAL for m in modes):
                other = _over_differences(field, writing, modes, mode, entry)
                parts = min(parts, other, key=lambda terms: _length(writing, terms))
            found += [
                replace(
                    part,
                    amount=part.amount * weight if power > 1 else part.amount,
                    power=part.power + power,
                )
                for part in parts
            ]
    return [part for part in found if part.amount]


def _length(writing: ParameterField, terms: Sequence[Term]) -> int:
    return sum(operations(rational_formula(writing, t.amount)) for t in terms if t.amount)


def _over_differences(
    field: ParameterField,
    writing: ParameterField,
    modes: Sequence[Mode],
    mode: Mode,
    entry: Polynomial,
) -> list[Term]:
    """N(lambda)/c'(lambda) with c' written as the product of the differences of all roots.

    Of a simple factor p with c = p g, R(lambda)/p'(lambda) is N(lambda)/(p' g)(lambda),
    where N = R g in L; g is a product over the other roots, those with a name among them.
    """
    if mode.regime.kind not in NAMED_REAL and mode.regime.kind != "single":
        return _terms(field, writing, mode, entry)
    p, numerator = mode.factor.p, entry
    others = [m for m in modes if m.factor.p != p]
    for other in others:
        numerator = (numerator * other.factor.p**other.factor.index).rem(p)
    terms = _terms(field, writing, mode, numerator)
    divided = []
    for term in terms:
        values = [_value_at(field, writing, other, term.rate) for other in others]
        above = [term.amount.numer, *(value.denom for value in values)]
        below = [term.amount.denom, *(value.numer for value in values)]
        divided.append(replace(term, amount=fraction(writing, above, below)))
    return divided


def _value_at(field: ParameterField, writing: ParameterField, mode: Mode, root: Scalar) -> Scalar:
    """q(root)^index for the factor q of a mode, by its roots where they have names."""
    if mode.regime.kind in NAMED_REAL:
        sign = -1 if mode.regime.kind == "decaying" else 1
        value = reduce(mul, (root - sign * writing.symbol(name) for name in mode.names))
    else:
        coefficients = [field.into(writing, c) for c in reversed(mode.factor.polynomial)]
        value = sum_at(writing, coefficients, root)
    return value**mode.factor.index


def _terms(
    field: ParameterField, writing: ParameterField, mode: Mode, entry: Polynomial
) -> list[Term]:
    roots = mode.factor.roots
    r = [field.into(writing, entry.nth(k)) for k in range(mode.factor.degree)]
    centre = field.into(writing, roots.centre)
    names = [writing.symbol(name) for name in mode.names]
    match mode.regime.kind:
        case "single":
            return [Term(r[0], 0, centre, None, None)]
        case "circular" | "hyperbolic":
            w = names[0] if names else field.into(writing, mode.frequency)
            even, odd = KERNELS[mode.regime.kind]
            return [
                Term(r[1], 0, centre, even, w),
                Term(sum_at(writing, r, centre, [w]), 0, centre, odd, w),
            ]
        case "double":
            return [
                Term(r[1], 0, centre, None, None),
                Term(r[0] + centre * r[1], 1, centre, None, None),
            ]
        case "decaying":
            return _real_terms(writing, r, [-x for x in names])
        case "real roots":
            return _real_terms(writing, r, names)
        case "root and pair":
            root, sigma, omega = names
            g = root - sigma
            amount = sum_at(writing, r, root, [g**2 + omega**2])
            return [
                Term(amount, 0, root, None, None),
                *_pair_terms(r, sigma, omega, _over_difference(g, omega)),
            ]
        case "known roots":
            return _known_terms(field, writing, mode, entry)
        case "quartet":
            _, sigma, omega = names
            moved = [field.into(writing, c) for c in _moved(entry, roots.centre, 4)]
            return [
                replace(part, rate=part.rate + centre)
                for s in (sigma, -sigma)
                for part in _pair_terms(moved, s, omega, _over_quartet(s, omega))
            ]
        case _:
            moved = [
                field.into(writing, c) for c in _moved(entry, roots.centre, mode.factor.degree)
            ]
            squares = [field.into(writing, c) for c in squares_of(mode.factor).to_list()]
            return _square_terms(writing, mode, moved, squares, centre, names)


def _moved(entry: Polynomial, centre: Scalar, length: int) -> list[Scalar]:
    """The coefficients of R(a + x) in x, lowest first."""
    moved = entry.shift(centre)
    return [moved.nth(k) for k in range(length)]


def _real_terms(
    writing: ParameterField, r: Sequence[Scalar], roots: Sequence[Scalar]
) -> list[Term]:
    """R(l_i)/prod (l_i - l_j) e^(l_i t); the fastest is last, as they are read."""
    terms = []
    for i, root in enumerate(roots):
        differences = [root - other for j, other in enumerate(roots) if j != i]
        amount = sum_at(writing, r, root, differences)
        terms.append(Term(amount, 0, root, None, None))
    return terms


def _known_terms(
    field: ParameterField, writing: ParameterField, mode: Mode, entry: Polynomial
) -> list[Term]:
    """The amounts are named numbers, times what is left of the parameters in the entry."""
    centre = field.into(writing, mode.factor.roots.centre)
    terms = []
    for root, name, frequency in mode.named_roots:
        rate = centre if name is None else writing.symbol(name)
        even = amount_of(field, writing, mode, root, "real", entry)
        if frequency is None:
            terms.append(Term(even, 0, rate))
            continue
        odd = amount_of(field, writing, mode, root, "imaginary", entry)
        omega = writing.symbol(frequency)
        terms += [Term(even, 0, rate, "cos", omega), Term(odd, 0, rate, "sin", omega)]
    return terms


PairFactor = tuple[Scalar, Scalar]


def _over_difference(g: Scalar, omega: Scalar) -> PairFactor:
    """1/(x - g) = -(g + x)/(g^2 + omega^2) where x^2 = -omega^2."""
    size = g**2 + omega**2
    return -g / size, -1 / size


def _over_quartet(sigma: Scalar, omega: Scalar) -> PairFactor:
    """1/(4 sigma (sigma + x)) = (sigma - x)/(4 sigma (sigma^2 + omega^2))."""
    size = 4 * sigma * (sigma**2 + omega**2)
    return sigma / size, -1 / size


def _pair_terms(r: Sequence[Scalar], rate: Scalar, omega: Scalar, factor: PairFactor) -> list[Term]:
    """R(rate + x) times `factor`, over 2x, at both x = ± i omega.

    With U + V x for the product, the sum is e^(rate t) [V cos(omega t) + U sin(omega t)/omega].
    """
    u = v = rate - rate
    for c in reversed(r):  # Horner's rule for R(rate + x), with x^2 = -omega^2
        u, v = u * rate - v * omega**2 + c, u + v * rate
    e, f = factor
    u, v = u * e - v * f * omega**2, u * f + v * e
    return [Term(v, 0, rate, "cos", omega), Term(u / omega, 0, rate, "sin", omega)]


def _square_terms(
    writing: ParameterField,
    mode: Mode,
    moved: Sequence[Scalar],
    squares: Sequence[Scalar],
    centre: Scalar,
    names: Sequence[Scalar],
) -> list[Term]:
    """With x = lambda - a and mu = x^2: R = R_e(mu) + x R_o(mu), and p' = 2 x q'(mu)."""
    signs = mode.regime.signs
    mus = [w**2 if s == "hyperbolic" else -(w**2) for w, s in zip(names, signs, strict=True)]
    terms = []
    for k, (mu, w, sign) in enumerate(zip(mus, names, signs, strict=True)):
        slopes = [mu - other for j, other in enumerate(mus) if j != k]
        even = sum_at(writing, moved[1::2], mu, slopes)
        odd = sum_at(writing, [_odd(writing, moved[0::2], mu, squares)], mu, [*slopes, w])
        even_kernel, odd_kernel = KERNELS[sign]
        terms.append(Term(even, 0, centre, even_kernel, w))
        terms.append(Term(odd, 0, centre, odd_kernel, w))
    return terms


def _odd(
    writing: ParameterField, coefficients: Sequence[Scalar], mu: Scalar, squares: Sequence[Scalar]
) -> Scalar:
    """R_e(mu), or the same as mu times a polynomial, with q(mu) = 0; whichever is shorter."""
    plain = sum_at(writing, coefficients, mu)
    if not coefficients[0] or not squares[-1]:
        return plain
    scale = coefficients[0] / squares[-1]
    changed = [c - scale * q for c, q in zip(coefficients, reversed(squares[1:]), strict=True)]
    turned = sum_at(writing, [*changed, -scale], mu)
    return min(plain, turned, key=lambda e: operations(rational_formula(writing, e)))
