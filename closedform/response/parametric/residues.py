"""Named amounts at roots that are known numbers: real and imaginary parts of r(lambda)/p'(lambda).

For an entry R of a modal term, a real root gives R/p' e^(lambda t), and a pair alpha ± i omega
twice Re(R/p') e^(alpha t) cos(omega t) less twice Im(R/p') e^(alpha t) sin(omega t).  R is a
sum of elements of the field of parameters times polynomials in lambda whose coefficients are
numbers: the parts of these at a root are real numbers, and go by names.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from functools import reduce
from operator import mul

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.known_roots import KnownRoot, over_numbers
from closedform.algebra.lowest_terms import fraction
from closedform.algebra.parameter_field import PI, ParameterField, ParameterPolynomial
from closedform.algebra.parts import vanishing_parts
from closedform.response.parametric.modes import Mode, Residue
from closedform.response.parametric.quantities import Letters, Part

__all__ = ["amount_of", "with_residues"]

Share = tuple[Scalar, Polynomial]
"""An element of the field of parameters, and a polynomial in lambda with numbers in it."""


def with_residues(
    field: ParameterField,
    modes: Sequence[Mode],
    functions: Sequence[ExponentialMatrix | None],
    letters: Letters,
) -> tuple[Mode, ...]:
    """Return the modes with names for all amounts that the functions need, at known roots.

    What is beside them, the transition matrix, is written with the amounts of the powers of
    lambda, which are few.
    """
    made, count = [], 0
    for place, mode in enumerate(modes):
        if mode.regime.kind != "known roots":
            made.append(mode)
            continue
        numerators = dict.fromkeys(
            numerator
            for function in functions
            if function is not None
            for residue in function.terms[place].residues
            for i in range(function.shape[0])
            for k in range(function.shape[1])
            for _, numerator in _shares(field, residue.entry(i, k))
        )
        numerators |= dict.fromkeys(_power(field, k) for k in range(mode.factor.degree))
        residues = []
        stated = {n: _stated(field, modes, mode, n) for n in numerators}
        for numerator in numerators:
            for root in mode.regime.roots:
                for part, vanishes in _parts(field, mode, root, numerator):
                    count += not vanishes
                    name = None if vanishes else letters.take("C", count)
                    residues.append(Residue(root.which, part, numerator, name, *stated[numerator]))
        made.append(replace(mode, residues=tuple(residues)))
    return tuple(made)


def _stated(
    field: ParameterField, modes: Sequence[Mode], mode: Mode, numerator: Polynomial
) -> tuple[Polynomial, Polynomial]:
    """A numerator over p', or over c' of the whole characteristic polynomial c = p g if shorter.

    At a root of p, c' is p' g, and R/p' is (R g)/c'.
    """
    one = field.polynomial([field.domain.one])
    others = [m.factor.p**m.factor.multiplicity for m in modes if m is not mode]
    beside = reduce(mul, others, one)
    if mode.factor.multiplicity > 1 or any(field.names_in(c) for c in beside.to_list()):
        return numerator, one
    above = (numerator * beside).rem(mode.factor.p)
    return (above, beside) if _length(above) < _length(numerator) else (numerator, one)


def _length(polynomial: Polynomial) -> int:
    """The terms above and below in all coefficients."""
    return sum(len(c.numer) + len(c.denom) - 1 for c in polynomial.to_list() if c)


def _parts(
    field: ParameterField, mode: Mode, root: KnownRoot, numerator: Polynomial
) -> Iterator[tuple[Part, bool]]:
    """The parts of an amount that are written at a root, and whether they are zero."""
    if root.is_real:
        yield "real", False
        return
    base, (p, r) = over_numbers(field, mode.factor.p, numerator)
    no_real, no_imaginary = vanishing_parts(base, p, root.which, r)
    yield "real", no_real
    yield "imaginary", no_imaginary


def amount_of(
    field: ParameterField,
    writing: ParameterField,
    mode: Mode,
    root: KnownRoot,
    part: Part,
    entry: Polynomial,
) -> Scalar:
    """Return what e^(lambda t) entry(lambda)/p'(lambda) contributes, over the writing field.

    At a pair, the part "real" is that of the cosine, "imaginary" that of the sine.
    """
    names = mode.named_residues
    shares = list(_shares(field, entry))
    if not all((root.which, part, numerator) in names for _, numerator in shares):
        shares = [(c, _power(field, k)) for k, c in enumerate(reversed(entry.to_list())) if c]
    weighted = [(c, names[root.which, part, numerator]) for c, numerator in shares]
    return _combined(field, writing, [(c, name) for c, name in weighted if name is not None])


def _combined(
    field: ParameterField, writing: ParameterField, weighted: Sequence[tuple[Scalar, str]]
) -> Scalar:
    """The sum of weights times names, over one denominator."""
    if not weighted:
        return writing.domain.zero
    places = [writing.parameters.index(name) for name in field.parameters]
    ring = writing.domain.field.ring

    def lifted(polynomial: ParameterPolynomial, name: str | None) -> ParameterPolynomial:
        terms = {}
        for monomial, coefficient in polynomial.iterterms():
            exponents = [0] * len(writing.parameters)
            for place, exponent in zip(places, monomial, strict=True):
                exponents[place] = exponent
            if name is not None:
                exponents[writing.parameters.index(name)] = 1
            terms[tuple(exponents)] = coefficient
        return ring.from_dict(terms)

    below = reduce(lambda a, b: a.lcm(b), (c.denom for c, _ in weighted))
    parts = (lifted(c.numer * below.quo(c.denom), name) for c, name in weighted)
    return fraction(writing, [sum(parts, ring.zero)], [lifted(below, None)])


def _power(field: ParameterField, exponent: int) -> Polynomial:
    return field.polynomial([field.domain.one, *[field.domain.zero] * exponent])


def _shares(field: ParameterField, entry: Polynomial) -> Iterator[Share]:
    """A polynomial in lambda as a sum of shares, one for each product of parameters in it.

    The leading coefficient of each of the polynomials is positive.
    """
    coefficients = entry.to_list()
    if entry.is_zero:
        return
    ring = field.domain.field.ring
    below = reduce(lambda a, b: a.lcm(b), (c.denom for c in coefficients if c), ring.one)
    divisor = field.of_polynomial(below)
    if field.names_in(divisor):
        coefficients = [c * divisor for c in coefficients]
    else:
        divisor = field.domain.one
    gathered: dict[tuple[int, ...], list[Scalar]] = {}
    for place, c in enumerate(coefficients):
        for monomial, number in c.numer.iterterms():
            free, pi = _apart(field, monomial)
            row = gathered.setdefault(free, [field.domain.zero] * len(coefficients))
            row[place] += field.of_polynomial(ring.from_dict({pi: number})) / c.denom
    for monomial, row in gathered.items():
        numerator = field.polynomial(row)
        weight = field.of_polynomial(ring.from_dict({monomial: ring.domain.one})) / divisor
        turn = field.number_sign(numerator.LC())
        if turn is not None and turn < 0:
            numerator, weight = -numerator, -weight
        yield weight, numerator


def _apart(
    field: ParameterField, monomial: tuple[int, ...]
) -> tuple[tuple[int, ...], tuple[int, ...]]:
    """The parameters of a monomial, and the power of pi in it."""
    pairs = list(zip(field.parameters, monomial, strict=True))
    return tuple(0 if n == PI else e for n, e in pairs), tuple(
        e if n == PI else 0 for n, e in pairs
    )
