"""Named amounts at roots that are known numbers: real and imaginary parts of r(lambda)/p'(lambda).

For an entry R of a modal term, a real root gives R/p' e^(lambda t), and a pair alpha ± i omega
twice Re(R/p') e^(alpha t) cos(omega t) less twice Im(R/p') e^(alpha t) sin(omega t).  R is a
sum of elements of the field of parameters times polynomials in lambda whose coefficients are
numbers: the parts of these at a root are real numbers, and go by names.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from functools import reduce
from operator import mul

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.known_roots import KnownRoot, has_known_roots, over_numbers
from closedform.algebra.lowest_terms import fraction
from closedform.algebra.parameter_field import PI, ParameterField, ParameterPolynomial
from closedform.algebra.parts import vanishing_parts
from closedform.response.parametric.modes import Mode, Residue, value_at_pair
from closedform.response.parametric.quantities import Letters, Part

__all__ = ["amount_of", "with_residues"]


@dataclass(frozen=True)
class _Share:
    """weight · numerator(lambda), over the product of the other factors where `over` says so.

    The weight is an element of the field of parameters; the numerator has numbers in it.
    """

    weight: Scalar
    numerator: Polynomial
    over: bool = False


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
    for place, given in enumerate(modes):
        if given.regime.kind != "known roots":
            made.append(given)
            continue
        mode = replace(given, others=_others(field, modes, given))
        numerators = dict.fromkeys(
            share.numerator
            for function in functions
            if function is not None
            for residue in function.terms[place].residues
            for i in range(function.shape[0])
            for k in range(function.shape[1])
            for share in _shares(field, mode, residue.entry(i, k))
        )
        numerators |= dict.fromkeys(_power(field, k) for k in range(mode.factor.degree))
        residues = []
        stated = {n: _stated(field, mode, n) for n in numerators}
        for numerator in numerators:
            for root in mode.regime.roots:
                for part, vanishes in _parts(field, mode, root, numerator):
                    count += not vanishes
                    name = None if vanishes else letters.take("C", count)
                    residues.append(Residue(root.which, part, numerator, name, *stated[numerator]))
        made.append(replace(mode, residues=tuple(residues)))
    return tuple(made)


def _others(field: ParameterField, modes: Sequence[Mode], mode: Mode) -> Polynomial | None:
    """The product g of all other factors: c = p g.  None where p is repeated."""
    if mode.factor.multiplicity > 1:
        return None
    one = field.polynomial([field.domain.one])
    others = (m.factor.p**m.factor.multiplicity for m in modes if m.factor != mode.factor)
    return reduce(mul, others, one)


def _stated(
    field: ParameterField, mode: Mode, numerator: Polynomial
) -> tuple[Polynomial, Polynomial]:
    """A numerator over p', or over c' of the whole characteristic polynomial c = p g if shorter.

    At a root of p, c' is p' g, and R/p' is (R g)/c'.
    """
    if mode.others is not None and has_known_roots(field, mode.others):
        above = (numerator * mode.others).rem(mode.factor.p)
        if _length(above) < _length(numerator):
            return above, mode.others
    return numerator, field.polynomial([field.domain.one])


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
    shares = list(_shares(field, mode, entry))
    if not all((root.which, "real", share.numerator) in names for share in shares):
        powers = enumerate(reversed(entry.to_list()))
        shares = [_Share(c, _power(field, k)) for k, c in powers if c]

    def total(part: Part, *, over: bool) -> Scalar:
        weighted = (
            (s.weight, names[root.which, part, s.numerator]) for s in shares if s.over == over
        )
        return _combined(field, writing, [(c, name) for c, name in weighted if name is not None])

    plain = total(part, over=False)
    if mode.others is None or not any(share.over for share in shares):
        return plain
    _, rate, frequency = next(named for named in mode.named_roots if named[0] == root)
    centre = field.into(writing, mode.factor.roots.centre)
    place = centre if rate is None else writing.symbol(rate)
    coefficients = [field.into(writing, c) for c in mode.others.to_list()]
    if frequency is None:
        value, _ = value_at_pair(writing, coefficients, place, writing.domain.zero)
        return plain + total("real", over=True) / value
    u, v = value_at_pair(writing, coefficients, place, writing.symbol(frequency))
    even, odd = total("real", over=True), total("imaginary", over=True)
    above = even * u - odd * v if part == "real" else even * v + odd * u
    return plain + above / (u**2 + v**2)


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


def _shares(field: ParameterField, mode: Mode, entry: Polynomial) -> Iterator[_Share]:
    """A polynomial in lambda as a sum of shares.

    It is taken apart by the parameters that it does not divide by.  What is left to one of
    these may be a polynomial in numbers; or it becomes a short one when it is multiplied by
    the other factors, which have those parameters in them; else it is taken apart too.
    """
    for weight, part in _by_products(field, entry, _names_below(field, entry)):
        if has_known_roots(field, part):
            yield _turned(field, weight, part, over=False)
            continue
        over = False
        if mode.others is not None:
            above = (part * mode.others).rem(mode.factor.p)
            over = _length(above) < _length(part)
        for inner, numerator in _over_common(field, above if over else part):
            yield _turned(field, weight * inner, numerator, over=over)


def _turned(field: ParameterField, weight: Scalar, numerator: Polynomial, *, over: bool) -> _Share:
    """A share whose numerator has a positive leading coefficient."""
    if field.sign(numerator.LC()) < 0:
        return _Share(-weight, -numerator, over)
    return _Share(weight, numerator, over)


def _names_below(field: ParameterField, entry: Polynomial) -> frozenset[str]:
    below = (field.names_in(field.of_polynomial(c.denom)) for c in entry.to_list() if c)
    return frozenset().union(*below)


def _over_common(field: ParameterField, entry: Polynomial) -> Iterator[tuple[Scalar, Polynomial]]:
    """A polynomial in lambda over one denominator, by the products of parameters above."""
    coefficients = entry.to_list()
    below = reduce(lambda a, b: a.lcm(b), (c.denom for c in coefficients if c))
    divisor = field.of_polynomial(below)
    if not field.names_in(divisor):
        divisor = field.domain.one
    cleared = field.polynomial([c * divisor for c in coefficients])
    for weight, part in _by_products(field, cleared, frozenset()):
        yield weight / divisor, part


def _by_products(
    field: ParameterField, entry: Polynomial, kept: frozenset[str]
) -> Iterator[tuple[Scalar, Polynomial]]:
    """Products of parameters, but for those that are kept, and what they are multiplied by."""
    coefficients, ring = entry.to_list(), field.domain.field.ring
    gathered: dict[tuple[int, ...], list[Scalar]] = {}
    for place, c in enumerate(coefficients):
        for monomial, number in c.numer.iterterms():
            outer, inner = _apart(field, monomial, kept | {PI})
            row = gathered.setdefault(outer, [field.domain.zero] * len(coefficients))
            row[place] += field.of_polynomial(ring.from_dict({inner: number})) / c.denom
    for monomial, row in gathered.items():
        weight = field.of_polynomial(ring.from_dict({monomial: ring.domain.one}))
        yield weight, field.polynomial(row)


def _apart(
    field: ParameterField, monomial: tuple[int, ...], kept: frozenset[str]
) -> tuple[tuple[int, ...], tuple[int, ...]]:
    """The names of a monomial without those that are kept, and these alone."""
    pairs = list(zip(field.parameters, monomial, strict=True))
    return (
        tuple(0 if n in kept else e for n, e in pairs),
        tuple(e if n in kept else 0 for n, e in pairs),
    )
