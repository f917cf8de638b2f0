"""Inputs, the linear system they are the output of, and the stacked matrix, as printed."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from flint import acb, acb_mat, acb_series

from closedform.derivation.driven.proof.spot import SERIES, Spot
from closedform.derivation.driven.proof.stated import same_matrix
from closedform.derivation.driven.proof.values import (
    NoPieceError,
    as_matrix,
    column_at,
    derivative,
    equal,
    formula_at,
    side_at,
)
from closedform.derivation.driven.writing import A_HAT, X_HAT, Writing, bold, unboxed
from closedform.derivation.parametric.proof.ground import Said
from closedform.derivation.parametric.proof.model import formula_of
from closedform.derivation.proof.evaluation import ball_at, matrix_at
from closedform.derivation.proof.finding import Comparison, Fault, Finding, agreeing, whether
from closedform.derivation.step import Matrix, Side, Symbol
from closedform.model.driven.model import Input
from closedform.notation.expression import Call, Expression, Name, names_in
from closedform.notation.jets import jet_of

__all__ = [
    "annihilation",
    "generator",
    "generator_matrix",
    "generator_start",
    "generator_vector",
    "input_statement",
    "named_input",
    "readout",
    "readout_matrix",
    "stacked_matrix",
    "stacked_system",
    "stacked_vector",
    "tone",
    "waves",
]


def input_statement(spot: Spot, said: Said) -> Iterator[Finding]:
    """An input, as typed or in pieces, against its waves.

    A formula that was declared holds for every delay and derivative of the input; pieces and
    impulses are printed for each as it acts.
    """
    left, right = said.statement.sides
    model = spot.model
    name = left.letter if isinstance(left, Symbol) else ""
    found = False
    for k, given in enumerate(model.inputs):
        declared = bool(name) and given.name == name and given.definition == right
        if not declared and given.formula != (Name(name) if name else left):
            continue
        found = True
        order, argument = _shape(given) if declared else (0, None)
        if given.signal.repeat is None:
            yield from _input_values(spot, k, right, order, argument)
        else:
            yield from _first_period(spot, given, right, order, argument)
    if not found:
        yield Fault("input", f"the model has no input {name or left}")


def _first_period(
    spot: Spot, given: Input, side: Side, order: int, argument: Expression | None
) -> Iterator[Finding]:
    """The printed period of an input that repeats, against its waves."""
    repeat = given.signal.repeat
    if repeat is None:
        return
    first, length = spot.element(repeat.start), spot.element(repeat.period)
    for share in (5, 23, 50, 83):  # over a prime: nothing is likely to switch there
        t = first + length * share / 97
        expected = acb(0)
        for burst in given.signal.bursts:
            low = first if burst.start is None else spot.element(burst.start)
            high = first + length if burst.end is None else spot.element(burst.end)
            if not bool(t.real < low.real) and bool(t.real < high.real):
                expected += sum((spot.wave_at(wave, t) for wave in burst.waves), acb(0))
        yield _stated_value(spot, given, side, t, (order, argument), expected)


def _input_values(
    spot: Spot, column: int, side: Side, order: int, argument: Expression | None
) -> Iterator[Finding]:
    """The printed function of a name, delayed and derived as the input is, against its waves."""
    given = spot.model.inputs[column]
    for place in spot.places:
        for t in spot.times(place):
            expected = spot.input_series(column, place, t)[0]
            yield _stated_value(spot, given, side, t, (order, argument), expected)


def _stated_value(
    spot: Spot,
    given: Input,
    side: Side,
    t: acb,
    shape: tuple[int, Expression | None],
    expected: acb,
) -> Finding:
    """What a printed side is at an instant, or a derivative of it at another."""
    order, argument = shape
    at = t if argument is None else ball_at(argument, {**spot.names, spot.model.time: t})
    now = {**spot.names, spot.model.time: at}
    series = {**spot.names, spot.model.time: acb_series([at, acb(1)], SERIES)}
    try:
        value = side_at(side, series, now)
    except NoPieceError as wrong:
        return Fault("input", str(wrong))
    return equal(f"input {given.name}", derivative(value, order), expected)


def _shape(given: Input) -> tuple[int, Expression | None]:
    """Which derivative of the function of its name an input is, and of which argument."""
    match given.formula:
        case Name(text):
            return jet_of(text)[1], None
        case Call(function, argument):
            return jet_of(function)[1], argument
    raise TypeError(f"{given.formula} is no input")


def named_input(spot: Spot, said: Said) -> Iterator[Finding]:
    """The name of an input that stands in an equation as a formula."""
    label, formula = said.statement.sides
    model = spot.model
    pairs = zip(Writing(model).inputs, model.inputs, strict=True)
    found = [k for k, (name, _) in enumerate(pairs) if name == label]
    if not found or model.inputs[found[0]].name:
        writing = Writing(model)
        known = [(n, g.formula) for n, g in zip(writing.inputs, model.inputs, strict=True)]
        yield from whether((label, formula) in known, "input", "it is called otherwise")
        return
    for place in spot.places:
        t = spot.times(place)[0]
        names = {**spot.names, model.time: t}
        value = formula_at(formula_of(formula), names, names)
        yield equal("input", value, spot.input_series(found[0], place, t)[0])


def _orders_of(spot: Spot, name: str) -> dict[int, int]:
    """The inputs that a name with primes belongs to, and its derivative beyond each one's own.

    Where y and y' are inputs both, y'' belongs to both.
    """
    found = {}
    for k, label in enumerate(Writing(spot.model).inputs):
        more = name.removeprefix(label.text)
        if name.startswith(label.text) and not more.strip("'"):
            found[k] = len(more)
    return found


def annihilation(spot: Spot, said: Said) -> Iterator[Finding]:
    """alpha(d/dt) u = 0, for every wave of the input."""
    formula, zero = map(formula_of, said.statement.sides)
    orders = {name: _orders_of(spot, name) for name in sorted(names_in(formula))}
    orders = {name: found for name, found in orders.items() if found}
    columns = set(range(len(spot.model.inputs))).intersection(*orders.values())
    if not orders or not columns:
        yield Fault("equation of an input", "it is not of one input")
        return
    yield Comparison("right side", ball_at(zero, {}), acb(0))
    for column in sorted(columns):
        for burst in spot.model.inputs[column].signal.bursts:
            for wave in burst.waves:
                t = spot.element(wave.origin) + acb(5) / 7
                series = spot.wave_at(wave, acb_series([t, acb(1)], SERIES))
                values: dict[str, Any] = dict(spot.names)
                values |= {n: derivative(series, found[column]) for n, found in orders.items()}
                yield equal("equation of an input", ball_at(formula, values), acb(0))


def generator_vector(spot: Spot, said: Said) -> Iterator[Finding]:
    """The vector w holds the derivatives of each input, as many as its block has rows."""
    symbol, column = said.statement.sides
    writing, generator = Writing(spot.model), spot.model.generator
    expected = [
        (Name(writing.inputs[k].text + "'" * order),)
        for k, size in enumerate(generator.orders if generator else ())
        for order in range(size)
    ]
    same = symbol == bold("w") and column == unboxed(Matrix(tuple(expected)))
    yield from whether(same, "w", "it is another column")


def generator(_spot: Spot, said: Said) -> Iterator[Finding]:
    """The equation w' = S w: nothing but this is said."""
    expected = (Symbol("dotted", letter="w"), (Symbol("matrix", letter="S"), bold("w")))
    yield from whether(said.statement.sides == expected, "w' = S w", "it is another equation")


def generator_matrix(spot: Spot, said: Said) -> Iterator[Finding]:
    """S, number by number, and w' = S w along the inputs."""
    if spot.generator is None:
        yield Fault("S", "the model has no waves")
        return
    yield from same_matrix(spot, said, "S", spot.generator)
    for place in spot.places:
        t = spot.times(place)[0]
        w = acb_mat([[e] for e in spot.generated(place, t)])
        step = _derived(spot, place, t)
        for k in range(w.nrows()):
            yield equal("w' = S w", (spot.generator * w)[k, 0], step[k])


def _derived(spot: Spot, place: int, t: acb) -> list[acb]:
    """w'(t): one derivative more of every row."""
    found: list[acb] = []
    generator_ = spot.model.generator
    for column, size in enumerate(generator_.orders if generator_ else ()):
        if size:
            series = spot.input_series(column, place, t)
            found += [derivative(series, k + 1) for k in range(size)]
    return found


def generator_start(spot: Spot, said: Said) -> Iterator[Finding]:
    """The start of w, at the origin of the waves that are printed beside it."""
    symbol, column = said.statement.sides
    if not isinstance(symbol, Symbol) or symbol.argument is None:
        raise TypeError(f"{symbol} is no vector at an instant")
    orders = spot.model.generator.orders if spot.model.generator else ()
    several = sum(order > 0 for order in orders) > 1
    index = (str(said.row["input"] + 1),) if several else ()
    same = symbol == Symbol("vector", index, symbol.argument, "w")
    yield from whether(same, "start of w", "it is another vector")
    printed = column_at(column, spot.names, spot.names)
    at = ball_at(symbol.argument, spot.names)
    series_names = {**spot.names, spot.model.time: acb_series([at, acb(1)], SERIES)}
    series = ball_at(formula_of(said.row["waves"].sides[1]), series_names)
    size = orders[said.row["input"]]
    yield from whether(len(printed) == size, "start of w", "it has another number of rows")
    for k, value in enumerate(printed):
        yield equal("start of w", value, derivative(series, k))


def waves(spot: Spot, said: Said) -> Iterator[Finding]:
    """What an input is while a burst is on: its waves of one origin, and others apart."""
    column, number = said.row["input"], said.row["burst"]
    label = said.statement.sides[0]
    yield from whether(label == Writing(spot.model).inputs[column], "waves", "of another input")
    held: Any = said.step.facts["starts"]
    rows = [r for r in held if (r["input"], r["burst"]) == (column, number)]
    burst = spot.model.inputs[column].signal.bursts[number]
    for k in range(2):
        t = spot.instants[0] + acb(3 * k + 1) / 7
        names = {**spot.names, spot.model.time: t}
        total = sum((ball_at(formula_of(r["waves"].sides[1]), names) for r in rows), acb(0))
        expected = sum((spot.wave_at(wave, t) for wave in burst.waves), acb(0))
        yield equal("waves", total, expected)


def tone(spot: Spot, said: Said) -> Iterator[Finding]:
    """An eigenvalue of S."""
    (side,) = said.statement.sides
    if spot.generator is None:
        yield Fault("eigenvalue of S", "there is no S")
        return
    if isinstance(side, Symbol):
        rate, turn = (ball_at(formula_of(part), spot.names) for part in side.parts)
        values = [rate + turn * acb(0, 1), rate - turn * acb(0, 1)]
    else:
        values = [ball_at(formula_of(side), spot.names)]
    polynomial = spot.generator.charpoly()
    for value in values:
        yield equal("eigenvalue of S", polynomial(value), acb(0))


def readout(_spot: Spot, said: Said) -> Iterator[Finding]:
    """The equation u = R w: nothing but this is said."""
    expected = (bold("u"), (Symbol("matrix", letter="R"), bold("w")))
    yield from whether(said.statement.sides == expected, "u = R w", "it is another equation")


def readout_matrix(spot: Spot, said: Said) -> Iterator[Finding]:
    """R gives u from w."""
    printed = matrix_at(as_matrix(said.statement.sides[-1]), spot.names)
    letter = said.statement.sides[0] == Symbol("matrix", letter="R")
    yield from whether(letter, "R", "it is another letter")
    for place in spot.places:
        t = spot.times(place)[0]
        w = acb_mat([[e] for e in spot.generated(place, t)])
        yield from agreeing("R w", printed * w, spot.inputs_at(place, t))


def stacked_vector(_spot: Spot, said: Said) -> Iterator[Finding]:
    """The states above, w below."""
    expected = (X_HAT, Symbol("blocks", ("1",), parts=(bold("x"), bold("w"))))
    yield from whether(said.statement.sides == expected, "stacked vector", "it is another vector")


def stacked_system(_spot: Spot, said: Said) -> Iterator[Finding]:
    """The homogeneous system: nothing but this is said."""
    expected = (Symbol("dotted", letter=X_HAT.letter), (A_HAT, X_HAT))
    yield from whether(said.statement.sides == expected, "system", "it is another equation")


def stacked_matrix(spot: Spot, said: Said) -> Iterator[Finding]:
    """The stacked matrix, in letters and in numbers."""
    symbol, blocks, matrix = said.statement.sides
    a, b, r, w = (Symbol("matrix", letter=letter) for letter in "ABRS")
    shapes = [Symbol("blocks", ("2",), parts=(a, fed, Symbol("zero"), w)) for fed in (b, (b, r))]
    yield from whether(symbol == A_HAT and blocks in shapes, "stacked matrix", "in other letters")
    printed = matrix_at(as_matrix(matrix), spot.names)
    yield from agreeing("stacked matrix", printed, spot.stacked)
