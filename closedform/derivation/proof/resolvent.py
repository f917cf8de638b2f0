"""The way by the resolvent: denominators, the functions g, the matrices R, and their sum."""

from __future__ import annotations

from collections.abc import Iterator

from flint import acb, acb_mat

from closedform.algebra.spectrum import Factor
from closedform.derivation.proof.evaluation import ball_at
from closedform.derivation.proof.finding import Comparison, Fault, Finding, agreeing, whether
from closedform.derivation.proof.ground import Ground, Letter, letter_of, vanishing_at
from closedform.derivation.proof.spectrum import formula_in
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation.expression import Name

__all__ = ["denominator", "expansion", "impulse_response"]


def denominator(ground: Ground, step: Step, statement: Statement) -> Iterator[Finding]:
    """p(s) or p_i(s) is the factor of this place in the characteristic polynomial."""
    symbol, formula = statement.sides
    factor = _factors(ground, step).get(letter_of(symbol)[2])
    place = f"denominator {','.join(letter_of(symbol)[2])}".rstrip()
    if factor is None:
        yield Fault(place, "no factor of the polynomial has this index")
        return
    for k in range(factor.degree + 2):
        point = acb(k) - factor.degree // 2
        printed = ball_at(formula_in(formula), {"s": point})
        yield Comparison(place, printed, vanishing_at(factor, point))


def impulse_response(ground: Ground, step: Step, statement: Statement) -> Iterator[Finding]:
    """The function g = sum of e^(lambda t)/p'(lambda) over the roots."""
    symbol, formula = statement.sides
    factor = _factors(ground, step).get(letter_of(symbol)[2])
    place = f"function g {','.join(letter_of(symbol)[2])}".rstrip()
    if factor is None or letter_of(symbol)[:2] != ("scalar", "g"):
        yield Fault(place, "no factor of the polynomial has this index")
        return
    for instant in ground.instants:
        printed = ball_at(formula_in(formula), instant.names)
        yield Comparison(place, printed, _derivative_of_g(factor, instant.time, 0))


def expansion(ground: Ground, step: Step, statement: Statement) -> Iterator[Finding]:
    """The sum of R g^(k) t^j/j!, from its letters, is e^(At)."""
    t = Name(ground.response.model.time)
    yield from whether(
        statement.sides[0] == Symbol("transition", argument=t), "expansion", "it is not of e^(At)"
    )
    factors = _factors(ground, step)
    matrices = _residues(ground, statement)
    letters = [letter_of(part[-2]) for part in _parts(statement)]
    printed = [letter_of(s.sides[0]) for s in step.statements if s.says == "residue matrix"]
    yield from whether(
        len(set(letters)) == len(letters) and printed in ([], letters),
        "expansion",
        "its letters are not those of the matrices",
    )
    n = ground.matrix.nrows()
    for instant in ground.instants:
        total = acb_mat(n, n)
        for part in _parts(statement):
            *front, letter, g = part
            if not isinstance(g, Symbol) or len(front) > 1:
                raise TypeError(f"{part} is no part of an expansion")
            factor = factors.get(g.indices)
            matrix = matrices.get(letter_of(letter))
            if factor is None or matrix is None or letter_of(g)[:2] != ("scalar", "g"):
                yield Fault("expansion", "a letter in it is not defined")
                return
            weight = _derivative_of_g(factor, instant.time, g.order)
            for formula in front:
                weight = weight * ball_at(formula_in(formula), instant.names)
            total = total + matrix * weight
        yield from agreeing("expansion", total, instant.transition)


def _parts(statement: Statement) -> list[tuple[Side, ...]]:
    total = statement.sides[1]
    if not isinstance(total, Symbol) or total.kind != "sum":
        raise TypeError("the expansion is no sum")
    return [part for part in total.parts if isinstance(part, tuple)]


def _factors(ground: Ground, step: Step) -> dict[tuple[str, ...], Factor]:
    """The factors by the index of p in print: the k-th denominator is that of the k-th."""
    printed = [s.sides[0] for s in step.statements if s.says == "denominator"]
    factors = ground.response.spectrum.factors
    return {letter_of(p)[2]: f for p, f in zip(printed, factors, strict=True)}


def _residues(ground: Ground, statement: Statement) -> dict[Letter, acb_mat]:
    """The matrices by letter: those in print, or if they are too large, the exact ones in order."""
    letters = [letter_of(part[-2]) for part in _parts(statement)]
    shown = {letter: ground.printed(*letter) for letter in letters}
    if any(matrix is not None for matrix in shown.values()):
        return {letter: matrix for letter, matrix in shown.items() if matrix is not None}
    field = ground.response.field
    exact = [
        acb_mat([[acb(field.enclose(e)) for e in row] for row in matrix.to_list()])
        for term in ground.response.exponential.terms
        for residue in term.residues
        for matrix in residue.coefficients
        if not matrix.is_zero_matrix
    ]
    return dict(zip(letters, exact, strict=True))


def _derivative_of_g(factor: Factor, time: acb, order: int) -> acb:
    """The sum of lambda^k e^(lambda t)/p'(lambda), p' as a product of differences of roots."""
    roots = factor.roots.enclosures()
    total = acb(0)
    for i, root in enumerate(roots):
        slope = acb(1)
        for other in (*roots[:i], *roots[i + 1 :]):
            slope = slope * (root - other)
        total = total + root**order * (root * time).exp() / slope
    return total
