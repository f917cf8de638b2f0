"""Changes of one place in a formula: signs, factors t, sines for cosines, units of angles."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from fractions import Fraction

from closedform.checking.slips import names
from closedform.checking.slips.making import (
    ONE,
    ZERO,
    contains,
    exponent_of,
    exponential,
    negated,
    number,
    over,
    times,
)
from closedform.checking.slips.spots import Spot
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.slips.wording import part_text, placed, wave_above, waves_in
from closedform.notation.written.tree import (
    PI,
    Apply,
    Array,
    Literal,
    Negation,
    Power,
    Product,
    Sum,
    Symbol,
    Written,
    changed,
    walk,
)

__all__ = ["angles", "chains", "extra_terms", "functions", "sine_signs", "term_signs"]

Change = tuple[str, str, Written]
"""The name of the slip, what is changed in words, and what comes in its place."""
TURNED = {"sin": "cos", "cos": "sin", "sinh": "cosh", "cosh": "sinh"}
BENT = {"sin": "sinh", "cos": "cosh", "sinh": "sin", "cosh": "cos"}
HALF_TURN = Literal(Fraction(180))
SPECTRAL_KINDS = ("characteristic polynomial",)


def _everywhere(
    trial: Trial, change: Callable[[Trial, Spot], Iterator[Change]]
) -> Iterator[Candidate]:
    for spot in trial.spots():
        for name, what, new in change(trial, spot):
            yield Candidate(name, placed(trial, spot, what), trial.changed(spot, new))


def term_signs(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with one sign turned: of a term, an exponent, or the whole."""
    yield from _everywhere(trial, _turned)


def _turned(trial: Trial, spot: Spot) -> Iterator[Change]:
    node = spot.node
    if wave_above(spot) == "step":
        return
    if spot.path == trial.start:
        yield _whole_sign(trial, node), "" if trial.entry else "the whole right side", negated(node)
    if isinstance(node, Sum):
        order = sorted(range(len(node.terms)), key=lambda k: holds_time(trial, node.terms[k]))
        for k in order:
            term = node.terms[k]
            turned = Sum((*node.terms[:k], negated(term), *node.terms[k + 1 :]))
            yield _term_sign(trial, spot, term), part_text(term), turned
    if isinstance(spot.outer, Array) and spot.path != trial.start and node != ZERO:
        yield _entry_sign(trial, spot), "", negated(node)
    exponent = exponent_of(node)
    if exponent is not None:
        yield names.SIGN_EXPONENT, "the exponential", exponential(negated(exponent), node)
    if isinstance(node, Apply) and node.function in ("sin", "sinh", "tan"):
        yield _wave_sign(trial, node.function), part_text(node), Negation(node)


def _whole_sign(trial: Trial, node: Written) -> str:
    claim = trial.claim
    if trial.entry is not None:
        waves = waves_in(node)
        return _wave_sign(trial, waves[0]) if len(waves) == 1 else names.SIGN_ENTRY
    if claim.subject.endswith("'"):
        return names.SIGN_DERIVATIVE
    return {
        "particular solution": names.SIGN_PARTICULAR,
        "steady state": names.SIGN_PARTICULAR,
        "eigenvalues": names.SIGN_EIGENVALUE,
        "phase": names.SIGN_PHASE,
    }.get(claim.says, names.SIGN_OVERALL)


def _entry_sign(trial: Trial, spot: Spot) -> str:
    place = spot.path[-1][1]
    diagonal = len(place) > 1 and place[0] == place[1]
    if trial.claim.says in ("J", "real form") and diagonal:
        return names.SIGN_EIGENVALUE
    return names.SIGN_ENTRY


def _wave_sign(trial: Trial, wave: str) -> str:
    if trial.claim.subject.endswith("'"):
        return names.SIGN_DERIVATIVE
    if wave in ("sin", "sinh", "tan"):
        return names.SIGN_SINE
    return names.SIGN_COSINE if wave in ("cos", "cosh") else names.SIGN_TERM


def _term_sign(trial: Trial, spot: Spot, term: Written) -> str:
    claim, wave = trial.claim, wave_above(spot)
    if wave in ("sin", "cos"):
        return names.SIGN_PHASE
    if wave == "exp":
        return names.SIGN_EXPONENT
    if claim.says in SPECTRAL_KINDS:
        inside = isinstance(spot.outer, Product | Power)
        return names.SIGN_ROOT if inside else names.SIGN_COEFFICIENT
    if claim.says == "eigenvalues" and wave != "sqrt":
        return names.SIGN_EIGENVALUE
    waves = waves_in(term)
    if len(waves) == 1:
        return _wave_sign(trial, waves[0])
    return names.SIGN_DERIVATIVE if claim.subject.endswith("'") else names.SIGN_TERM


def sine_signs(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the signs of all its sines, or of all its exponents, turned."""

    def sines(node: Written) -> Written | None:
        odd = isinstance(node, Apply) and node.function in ("sin", "sinh")
        return Negation(node) if odd else None

    tree = changed(trial.tree, sines)
    if tree != trial.tree:
        several = trial.ground.size > 1 and not trial.start and _is_matrix(trial)
        name = names.SIGN_SINE_BLOCK if several else _wave_sign(trial, "sin")
        yield Candidate(name, "every sine", tree)
    yield from _exponents_turned(trial)


def _exponents_turned(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with the sign of an exponent turned wherever it stands, or of all."""
    found = [x for n in walk(trial.tree) if (x := exponent_of(n)) is not None]
    several = [one for one in dict.fromkeys(found) if found.count(one) > 1]
    for chosen in [{one} for one in several] + ([set(found)] if len(set(found)) > 1 else []):

        def change(node: Written, chosen: set[Written] = chosen) -> Written | None:
            exponent = exponent_of(node)
            if exponent not in chosen or exponent is None:
                return None
            return exponential(negated(exponent), node)

        where = "every exponential" if len(chosen) > 1 else "the same exponential everywhere"
        yield Candidate(names.SIGN_EXPONENT, where, changed(trial.tree, change))


def _is_matrix(trial: Trial) -> bool:
    return not trial.points or len(trial.points[0].true) > 1


def chains(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with a factor t or 1/k! more or less in one term."""
    yield from _everywhere(trial, _with_time)


def _with_time(trial: Trial, spot: Spot) -> Iterator[Change]:
    node, t = spot.node, Symbol(trial.ground.truth.time)
    if wave_above(spot):
        return
    driven = _is_driven(trial)
    is_term = spot.path == trial.start or isinstance(spot.outer, Sum | Negation)
    name = names.RESONANCE if driven else names.MISSING_T
    if is_term and not isinstance(node, Negation):
        for power in (1, 2):
            factor = t if power == 1 else Power(t, number(2))
            yield name, part_text(node), times(_first_numbers(node), factor, _rest(node))
    if node == t:
        yield name, part_text(spot.outer or node), Power(t, number(2))
        yield names.EXTRA_T, part_text(spot.outer or node), ONE
    if isinstance(node, Power) and node.base == t and isinstance(node.exponent, Literal):
        k = node.exponent.value
        yield name, part_text(node), Power(t, number(k + 1))
        yield names.EXTRA_T, part_text(node), t if k == 2 else Power(t, number(k - 1))
    powers = set(_powers(node, t)) if is_term else set()
    for k in sorted(powers):
        factorial = {2: 2, 3: 6, 4: 24}.get(int(k))
        if factorial:
            yield names.MISSING_FACTORIAL, part_text(node), over(node, number(factorial))
            yield names.MISSING_FACTORIAL, part_text(node), times(number(factorial), node)
            if factorial > 2:
                for f in (2, 3):
                    yield names.MISSING_FACTORIAL, part_text(node), over(node, number(f))


def _powers(tree: Written, t: Written) -> Iterator[Fraction]:
    """Yield the exponents with which the time stands in a formula."""
    for node in walk(tree):
        if isinstance(node, Power) and node.base == t and isinstance(node.exponent, Literal):
            yield node.exponent.value


def _is_driven(trial: Trial) -> bool:
    about_motion = trial.claim.says not in ("exp A", "exp J", "homogeneous solution", "transform")
    return about_motion and bool(trial.ground.truth.drive)


def _first_numbers(node: Written) -> Written:
    if isinstance(node, Product):
        return times(*(f for f in node.factors if isinstance(f, Literal)))
    return ONE


def _rest(node: Written) -> Written:
    if isinstance(node, Product):
        return times(*(f for f in node.factors if not isinstance(f, Literal)))
    return node


def functions(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with one function for another: sine for cosine, sinh for sin; or all."""
    for table, name in ((TURNED, names.SINE_COSINE), (BENT, names.HYPERBOLIC)):
        for spot in trial.spots():
            node = spot.node
            if isinstance(node, Apply) and node.function in table:
                new = Apply(table[node.function], node.arguments)
                yield Candidate(
                    name, placed(trial, spot, part_text(node)), trial.changed(spot, new)
                )

        def change(node: Written, table: dict[str, str] = table) -> Written | None:
            if isinstance(node, Apply) and node.function in table:
                return Apply(table[node.function], node.arguments)
            return None

        yield Candidate(name, "every one", changed(trial.tree, change))


def angles(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with a number of an angle taken in degrees, or in radian."""
    for spot in trial.spots():
        node = spot.node
        angle = wave_above(spot) in ("sin", "cos", "tan") or trial.claim.says == "phase"
        if not isinstance(node, Literal) or not angle:
            continue
        text = placed(trial, spot, part_text(node).replace("term", "number"))
        in_radian = over(times(node, PI), HALF_TURN)
        yield Candidate(names.DEGREE_AS_RADIAN, text, trial.changed(spot, in_radian))
        in_degrees = over(times(node, HALF_TURN), PI)
        yield Candidate(names.RADIAN_AS_DEGREE, text, trial.changed(spot, in_degrees))


def extra_terms(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with one term of a sum left out."""
    for spot in trial.spots():
        if not isinstance(spot.node, Sum) or wave_above(spot):
            continue
        for k, term in enumerate(spot.node.terms):
            rest = spot.node.terms[:k] + spot.node.terms[k + 1 :]
            new = rest[0] if len(rest) == 1 else Sum(rest)
            where = placed(trial, spot, part_text(term))
            yield Candidate(names.TERM_TOO_MANY, where, trial.changed(spot, new))


def holds_time(trial: Trial, tree: Written) -> bool:
    """Whether the time stands in a formula."""
    return contains(tree, Symbol(trial.ground.truth.time))
