"""How the roots of a factor with parameters lie: the regimes that its domain leaves open.

A regime fixes which real functions the roots give: real exponentials, sines and cosines,
hyperbolic ones.  Over one regime the formulas are the same; its conditions say where.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Literal

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.exceptional import RootsUnknownError, discriminant_of, roots_unknown
from closedform.algebra.factor_structure import FactorStructure
from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.known_roots import KnownRoot, has_known_roots, known_roots
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.spectrum import Factor

__all__ = ["Regime", "RegimeKind", "RootsUnknownError", "regimes_of", "require_known_roots"]

RegimeKind = Literal[
    "single",
    "circular",
    "double",
    "hyperbolic",
    "decaying",
    "real roots",
    "squares",
    "quartet",
    "root and pair",
    "known roots",
]
SquareSign = Literal["circular", "hyperbolic"]
SquareSigns = tuple[SquareSign, ...]


@dataclass(frozen=True)
class Regime:
    """One way in which the roots of a factor lie.

    single        one root in K
    circular      a ± i omega                     double      a, twice (D = 0)
    hyperbolic    a ± kappa                       decaying    real roots, all negative
    real roots    real roots, all different       squares     a ± sqrt(mu), `signs` of the mu
    quartet       a ± sigma ± i omega             root and pair   a real root and a pair
    known roots   numbers: real roots and pairs, as `roots` tells

    `conditions` narrow the domain to the regime; none where it is the only one.  `which` is
    the place of the real root beside a pair, in the order by real, then imaginary part.
    """

    kind: RegimeKind
    conditions: tuple[Comparison, ...] = ()
    signs: SquareSigns = ()
    which: int = 0
    roots: tuple[KnownRoot, ...] = ()


def regimes_of(
    field: ParameterField,
    factor: Factor,
    structure: FactorStructure | None,
    domain: ParameterDomain,
) -> tuple[Regime, ...]:
    """Return the regimes of a factor on a domain where its exceptional set does not vanish.

    Raises RootsUnknownError for a factor of degree 4 and more without a structure that
    says how its roots lie, unless it is even of degree 4, or its coefficients are numbers.
    """
    if factor.degree == 1:
        return (Regime("single"),)
    if factor.degree == 2:
        return _quadratic(factor, domain)
    roots = factor.roots
    plain = factor.degree == 4 and roots.form == "even"
    if has_known_roots(field, factor.p) and not plain:
        return (Regime("known roots", roots=known_roots(field, factor.p)),)
    if roots.form == "even" and roots.squares is not None:
        if structure is not None and structure.squared and structure.negative:
            signs: SquareSigns = ("circular",)
            return (Regime("squares", signs=signs * (factor.degree // 2)),)
        if factor.degree == 4:
            return _even_quartic(field, roots.squares, domain)
    elif structure is not None and not structure.squared and structure.real is not None:
        return (Regime("decaying" if structure.negative else "real roots"),)
    elif factor.degree == 3:
        return _cubic(field, factor, domain)
    raise roots_unknown(field, factor.p)


def require_known_roots(
    field: ParameterField, factor: Factor, structure: FactorStructure | None
) -> None:
    """Raise RootsUnknownError where `regimes_of` would, before anything else is worked out."""
    if factor.degree <= 3 or (factor.degree == 4 and factor.roots.form == "even"):
        return
    even = factor.roots.form == "even"
    settled = structure is not None and (
        (structure.squared and structure.negative)
        if even
        else (not structure.squared and structure.real is not None)
    )
    if not settled and not has_known_roots(field, factor.p):
        raise roots_unknown(field, factor.p)


def _quadratic(factor: Factor, domain: ParameterDomain) -> tuple[Regime, ...]:
    d = factor.roots.discriminant
    regimes = _by_sign(
        d,
        domain,
        positive=Regime("hyperbolic"),
        negative=Regime("circular"),
        zero=Regime("double"),
    )
    if [r.kind for r in regimes] == ["hyperbolic"]:
        sum_and_product = (factor.p.nth(1), factor.p.nth(0))
        if all(domain.sign_of(c).sign == "positive" for c in sum_and_product):
            return (Regime("decaying"),)
    return tuple(reversed(regimes))


def _cubic(field: ParameterField, factor: Factor, domain: ParameterDomain) -> tuple[Regime, ...]:
    """Three real roots, or one; that one lies beyond the mean of all three where p(mean) < 0."""
    middle = factor.p.shift(factor.roots.centre).nth(0)
    found: list[Regime] = []
    for regime in _by_sign(
        discriminant_of(field, factor.p),
        domain,
        positive=Regime("real roots"),
        negative=Regime("root and pair"),
    ):
        if regime.kind == "real roots":
            found.append(regime)
            continue
        inside = domain.narrowed(*regime.conditions)
        places = _by_sign(
            middle,
            inside,
            positive=Regime("root and pair", which=1),
            negative=Regime("root and pair", which=3),
            zero=Regime("root and pair", which=2),
        )
        found += [replace(p, conditions=(*regime.conditions, *p.conditions)) for p in places]
    return tuple(found)


def _even_quartic(
    field: ParameterField, squares: Polynomial, domain: ParameterDomain
) -> tuple[Regime, ...]:
    """mu^2 + b mu + c: the signs of its discriminant, of c and of b say where the mu lie."""
    b, c = squares.nth(1), squares.nth(0)
    found: list[Regime] = []
    for gap in _by_sign(
        discriminant_of(field, squares),
        domain,
        positive=Regime("squares"),
        negative=Regime("quartet"),
    ):
        if gap.kind == "quartet":
            found.append(gap)
            continue
        inside = domain.narrowed(*gap.conditions)
        for same in _by_sign(c, inside, positive=Regime("real roots"), negative=Regime("squares")):
            before = (*gap.conditions, *same.conditions)
            if same.kind == "squares":
                found.append(Regime("squares", before, ("circular", "hyperbolic")))
                continue
            ways = _by_sign(
                b,
                inside.narrowed(*same.conditions),
                positive=Regime("squares", signs=("circular", "circular")),
                negative=Regime("squares", signs=("hyperbolic", "hyperbolic")),
            )
            found += [replace(way, conditions=(*before, *way.conditions)) for way in ways]
    return tuple(found)


def _by_sign(
    element: Scalar,
    domain: ParameterDomain,
    *,
    positive: Regime,
    negative: Regime,
    zero: Regime | None = None,
) -> tuple[Regime, ...]:
    """Return the regimes that the sign of an element leaves open, with their conditions.

    Without a regime for zero the element is known not to vanish here.
    """
    sign = domain.sign_of(element).sign
    ways = {
        "positive": ("positive",),
        "negative": ("negative",),
        "zero": ("zero",),
        "nonnegative": ("positive", "zero"),
        "nonpositive": ("zero", "negative"),
        "nonzero": ("positive", "negative"),
        "unknown": ("positive", "zero", "negative"),
    }[sign]
    if zero is None:
        ways = tuple(way for way in ways if way != "zero")
    if len(ways) == 1:
        only = {"positive": positive, "negative": negative, "zero": zero}[ways[0]]
        return () if only is None else (only,)
    made = []
    for way in ways:
        if way == "positive":
            made.append(_under(positive, Comparison(element, ">")))
        elif way == "negative":
            made.append(_under(negative, Comparison(-element, ">")))
        elif zero is not None:
            made.append(_under(zero, Comparison(element, "=")))
    return tuple(made)


def _under(regime: Regime, condition: Comparison) -> Regime:
    return replace(regime, conditions=(*regime.conditions, condition))
