"""The model, the characteristic polynomial and the eigenvalues, as they are printed."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from flint import acb, arb

from closedform.algebra.enclosure import ball_of
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.derivation.proof.evaluation import ball_at, exact_at, unit
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    decimal_of,
    number_in,
    whether,
)
from closedform.derivation.proof.ground import Ground, rows_of, vanishing_at
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import Expression, Name, is_expression

__all__ = [
    "eigenvalue_rows",
    "eigenvalue_statement",
    "formula_in",
    "initial_statement",
    "matrix_statement",
    "output_definition",
    "polynomial_of_roots",
    "polynomial_statement",
    "root_rows",
    "system_statement",
]


def formula_in(side: object) -> Expression:
    """Return a side that has to be a formula.  Raises TypeError if it is none."""
    if not is_expression(side):
        raise TypeError(f"{side} is no formula")
    return side


def system_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """x'(t) = A x(t), in letters."""
    t = Name(ground.response.model.time)
    x = Symbol("vector", argument=t, letter="x")
    expected = (
        Symbol("derivative", argument=t, letter="x"),
        (Symbol("matrix", letter="A"), x),
    )
    yield from whether(statement.sides == expected, "system", "it is not x' = A x")


def matrix_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """A, number by number, exactly."""
    yield from _exactly("A", statement.sides[-1], ground.response.model.matrix)


def initial_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """x0, number by number, exactly."""
    column = tuple((value,) for value in ground.response.model.initial)
    yield from _exactly("x0", statement.sides[-1], column)


def _exactly(
    place: str, side: Side, expected: tuple[tuple[SurdSum, ...], ...]
) -> Iterator[Finding]:
    if not isinstance(side, Matrix):
        raise TypeError(f"{side} is no matrix")
    front = SurdSum.rational(1) if side.front is None else exact_at(side.front, {})
    found = tuple(tuple(front * exact_at(entry, {}) for entry in row) for row in side.rows)
    yield from whether(
        [len(row) for row in found] == [len(row) for row in expected], place, "it has another shape"
    )
    for i, (row, others) in enumerate(zip(found, expected, strict=False), start=1):
        for k, (value, other) in enumerate(zip(row, others, strict=False), start=1):
            yield from whether(
                value == other, f"{place}, entry {(i, k)}", "it is not the one of the model"
            )


def output_definition(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """An output as a sum of states: the weight of every state, exactly, and nothing besides."""
    model = ground.response.model
    name, formula = formula_in(statement.sides[0]), formula_in(statement.sides[1])
    output = next((o for o in model.outputs if Name(o.name) == name), None)
    if output is None:
        yield Fault(f"output {name}", "the model has none of this name")
        return
    zero, one = SurdSum(()), SurdSum.rational(1)
    trials = [(zero, dict.fromkeys(model.states, zero))]
    for state, weight in zip(model.states, output.weights, strict=True):
        trials.append((weight, dict.fromkeys(model.states, zero) | {state: one}))
    every = {state: SurdSum.rational(7**k) for k, state in enumerate(model.states)}
    pairs = zip(output.weights, every.values(), strict=True)
    trials.append((sum((w * x for w, x in pairs), zero), every))
    for expected, states in trials:
        yield from whether(
            exact_at(formula, states) == expected, f"output {output.name}", "a weight is another"
        )


def polynomial_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """p(lambda) = det(lambda I - A), expanded and factored, at more points than its degree."""
    says = statement.says
    n, root = ground.matrix.nrows(), ground.root
    named = (
        Symbol("characteristic polynomial", argument=root),
        Symbol("determinant", argument=root, letter="A"),
    )
    symbols, formulas = statement.sides[:2], [formula_in(side) for side in statement.sides[2:]]
    yield from whether(
        symbols == named,
        says,
        "the letters are others",
    )
    for k in _beyond_eigenvalues(ground, n + 2):
        point = SurdSum.rational(k)
        values = [exact_at(formula, {root.text: point}) for formula in formulas]
        yield from whether(
            all(value == values[0] for value in values),
            says,
            f"its two forms differ at {root.text} = {k}",
        )
        determinant = (unit(n) * acb(ball_of(point)) - ground.matrix).det()
        yield Comparison(f"{says} at {root.text} = {k}", acb(ball_of(values[0])), determinant)


def _beyond_eigenvalues(ground: Ground, count: int) -> range:
    """Whole numbers above every row sum of A: there, lambda I - A is regular."""
    n = ground.matrix.nrows()
    sums = [sum((abs(ground.matrix[i, k]) for k in range(n)), arb(0)) for i in range(n)]
    mantissa, exponent = max(total.upper() for total in sums).man_exp()
    first = 1 + (
        int(mantissa) << int(exponent) if exponent >= 0 else int(mantissa) >> -int(exponent)
    )
    return range(first, first + count)


def eigenvalue_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """lambda_k = a, lambda_(k,k+1) = a ± b, and the definition of a frequency."""
    symbol, value = statement.sides
    if isinstance(symbol, Name):
        name = symbol.text
        yield Comparison(f"{name} as defined", ball_at(formula_in(value), {}), ground.names[name])
        return
    numbers = _numbers(ground, symbol)
    place = f"eigenvalue {','.join(map(str, numbers))}"
    if isinstance(value, Symbol):
        rate, turn = (ball_at(formula_in(part), ground.names) for part in value.parts)
        yield from whether(value.kind in ("pair", "real pair"), place, "it is no pair")
        turn = turn * acb(0, 1) if value.kind == "pair" else turn
        printed = [rate + turn, rate - turn]
    else:
        printed = [ball_at(formula_in(value), ground.names)]
    yield from whether(len(printed) == len(numbers), place, "it has another number of values")
    for number, ball in zip(numbers, printed, strict=False):
        yield from _is_eigenvalue(ground, place, number, ball)


def _is_eigenvalue(ground: Ground, place: str, number: int, ball: acb) -> Iterator[Finding]:
    expected = ground.eigenvalues.get(number)
    if expected is None:
        yield Fault(place, "no zero of the polynomial has this number")
    else:
        yield Comparison(place, ball, expected)


def _numbers(ground: Ground, side: Side) -> tuple[int, ...]:
    if not isinstance(side, Symbol) or side.letter != ground.root.text or len(side.indices) != 1:
        raise TypeError(f"{side} is no eigenvalue")
    return tuple(map(int, side.indices[0].split(",")))


def eigenvalue_rows(ground: Ground, step: Step) -> Iterator[Finding]:
    """The table of eigenvalues: decimals against roots, structure against the chains."""
    yield from ground.unplaced()
    rows = rows_of(step)
    seen: list[tuple[int, ...]] = []
    for row in rows:
        numbers = _numbers(ground, row["eigenvalue"])
        seen.append(numbers)
        place = f"table of eigenvalues, number {','.join(map(str, numbers))}"
        eigenvalue = ground.numbered.get(numbers)
        if eigenvalue is None:
            yield Fault(place, "no eigenvalue has this number")
            continue
        yield from structure(ground, place, eigenvalue.factor, row)
        yield from _decimals(ground, place, row, numbers)
    yield from whether(
        seen == list(ground.numbered), "table of eigenvalues", "it lists other eigenvalues"
    )


def structure(
    ground: Ground, place: str, factor: Factor, facts: Mapping[str, Any]
) -> Iterator[Finding]:
    """Multiplicity, index and block sizes against the chains, which are proved for themselves."""
    chains = ground.response.jordan.chains
    sizes = sorted((c.size for c in chains if c.factor.p == factor.p), reverse=True)
    holds = (
        facts["blocks"] == tuple(sizes)
        and facts["multiplicity"] == sum(sizes)
        and facts["index"] == sizes[0]
    )
    yield from whether(holds, place, "multiplicity, index or blocks are not those of the chains")


def _decimals(
    ground: Ground, place: str, row: Mapping[str, Any], numbers: tuple[int, ...]
) -> Iterator[Finding]:
    text, kind = str(row["decimal"]), row["meaning"]
    roots = [ground.eigenvalues[number] for number in numbers]
    if kind == "real":
        yield from whether(roots[0].imag == 0, place, "it is not real")
        yield decimal_of(place, text, roots[0], ground.digits)
        return
    if kind == "real pair":
        texts = text.split(" and ")
        yield from whether(len(texts) == 2, place, "a real pair has two decimals")
        for part, root in zip(texts, roots, strict=False):
            yield from whether(root.imag == 0, place, "it is not real")
            yield decimal_of(place, part, root, ground.digits)
        return
    rate, _, turn = text.partition("±")
    yield from whether(turn.endswith("i"), place, "it is the other kind of pair")
    middle, half = (roots[0] + roots[1]) / 2, (roots[0] - roots[1]) / acb(0, 2)
    yield decimal_of(place, rate.strip() or "0", middle, ground.digits)
    yield decimal_of(place, turn.strip().removesuffix("i"), half, ground.digits)


def polynomial_of_roots(ground: Ground, step: Step, statement: Statement) -> Iterator[Finding]:
    """p(lambda) = 0 is the factor whose roots are named there; so it is with mu put in."""
    formula, zero = (formula_in(side) for side in statement.sides)
    yield Comparison("right side of the polynomial", ball_at(zero, {}), acb(0))
    squares = [
        formula_in(s.sides[1])
        for s in step.statements
        if s.says == "substitution" and s.sides[0] == Name("mu")
    ]
    factor = _factor_named(ground, step)
    for k in range(factor.degree + 2):
        point = acb(k) - factor.degree // 2
        names = {ground.root.text: point}
        if squares:
            names = {"mu": ball_at(squares[0], names)}
        yield Comparison(
            "polynomial of the named roots", ball_at(formula, names), vanishing_at(factor, point)
        )


def _factor_named(ground: Ground, step: Step) -> Factor:
    return ground.numbered[_numbers(ground, rows_of(step)[0]["eigenvalue"])].factor


def root_rows(ground: Ground, step: Step) -> Iterator[Finding]:
    """Named parts of roots: the value, its decimal, and an interval with no other root."""
    rows = rows_of(step)
    factor = _factor_named(ground, step)
    boxes: dict[int, list[acb]] = {}
    for row in rows:
        name, part = row["name"].text, row["part"]
        number = _numbers(ground, row["eigenvalue"])[0]
        root = ground.eigenvalues[number]
        value = acb(root.real if part == "real" else root.imag)
        place = f"{part} part {name}"
        yield Comparison(place, ground.names[name], value)
        yield decimal_of(f"{place}, decimal", row["decimal"], value, ground.digits)
        low, high = (number_in(text) for text in row["interval"])
        yield from whether(
            bool(low <= value.real) and bool(value.real <= high),
            f"{place}, interval",
            "it does not hold the number",
        )
        box = boxes.setdefault(number, [acb(root.real), acb(root.imag)])
        box[0 if part == "real" else 1] = acb(low.union(high))
    for number, (real, imaginary) in boxes.items():
        box_ball = acb(real.real, imaginary.real)
        held = [root for root in factor.roots.enclosures() if root.overlaps(box_ball)]
        yield from whether(
            len(held) == 1, f"interval of eigenvalue {number}", "it shuts out no other zero"
        )
