"""The solution, the outputs, the constants and the table of values, as printed."""

from __future__ import annotations

from collections.abc import Iterator

from flint import acb, acb_mat, arb

from closedform.algebra.enclosure import ball_of
from closedform.algebra.surds import SurdSum
from closedform.derivation.proof.evaluation import ball_at, exact_at
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    decimal_of,
    undecided,
    whether,
)
from closedform.derivation.proof.ground import Ground, Instant, rows_of
from closedform.derivation.proof.spectrum import formula_in
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation import read_formula
from closedform.notation.expression import Name

__all__ = [
    "constant_rows",
    "function_statement",
    "shown_functions",
    "value_rows",
    "values_by_formula",
]


def function_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """x_i(t) or y(t) = …, against e^(At) x0 at the same instants."""
    symbol, formula = statement.sides
    place = _called(ground, symbol)
    if place is None:
        yield Fault(statement.says, "it is of no state and no output of the model")
        return
    for instant in ground.instants:
        expected = _functions(ground, instant)[place]
        yield Comparison(
            f"{statement.says} {place}", ball_at(formula_in(formula), instant.names), expected
        )


def shown_functions(ground: Ground, step: Step) -> Iterator[Finding]:
    """Each state or output is given once, in the model's order."""
    model = ground.response.model
    names = model.states if step.kind == "solution" else [o.name for o in model.outputs]
    shown = step.facts.get("shown", len(names))
    found = [_called(ground, statement.sides[0]) for statement in step.statements]
    yield from whether(
        found == list(names)[: len(found)] and len(found) == min(int(str(shown)), len(names)),
        step.kind,
        "it gives others than the model has",
    )


def _called(ground: Ground, side: Side) -> str | None:
    model = ground.response.model
    names = {*model.states, *(output.name for output in model.outputs)}
    is_function = (
        isinstance(side, Symbol)
        and side.kind == "scalar"
        and side.argument == Name(model.time)
        and not side.indices
        and side.letter in names
    )
    return side.letter if is_function and isinstance(side, Symbol) else None


def _functions(ground: Ground, instant: Instant) -> dict[str, acb]:
    """The value of every state and output at an instant."""
    model = ground.response.model
    state = instant.transition * ground.initial
    found = {name: state[i, 0] for i, name in enumerate(model.states)}
    for output, weights in zip(model.outputs, ground.weights, strict=True):
        found[output.name] = (weights * state)[0, 0]
    return found


def constant_rows(ground: Ground, step: Step) -> Iterator[Finding]:
    """Constants: r(lambda)/p'(lambda), or twice its real part and minus twice the imaginary."""
    factors = ground.response.spectrum.factors
    numerator = None
    for row in rows_of(step):
        numerator = row["numerator"] or numerator
        place = "table of constants"
        root = ball_at(row["at"], ground.names)
        balls = factors[int(row["factor"]) - 1].roots.enclosures()
        met = [ball for ball in balls if ball.overlaps(root)]
        if len(met) > 1:
            yield undecided(place)
            continue
        if not met or numerator is None:
            yield Fault(place, "a constant is not at a zero of the factor named")
            continue
        slope = acb(1)
        for other in balls:
            if not other.overlaps(met[0]):
                slope = slope * (met[0] - other)
        value = ball_at(numerator, {ground.root.text: met[0]}) / slope
        is_real = met[0].imag == 0
        parts = (value, None) if is_real else (acb(2 * value.real), acb(-2 * value.imag))
        for constant, part in zip(row["constants"], parts, strict=True):
            if constant is None:
                continue
            name, text = constant
            if part is None:
                yield Fault(f"{place}, {name.text}", "a real eigenvalue has no sine")
                continue
            yield Comparison(f"{place}, {name.text}", ground.names[name.text], part)
            yield decimal_of(f"{place}, decimal of {name.text}", text, part, ground.digits)


def value_rows(ground: Ground, step: Step) -> Iterator[Finding]:
    """Every value, against the matrix exponential at its instant; and the instants."""
    model = ground.response.model
    header = _head(step)
    names = [_called(ground, side) for side in header[1:]]
    yield from whether(
        header[0] == Name(model.time) and None not in names and len(set(names)) == len(names),
        "table of values",
        "its head names something else",
    )
    times = []
    for text, *values in rows_of(step):
        time = _time(text)
        times.append(time)
        instant = ground.instant(acb(ball_of(time)))
        expected = _functions(ground, instant)
        scale = _size(instant.transition) * (1 + _size(ground.initial))
        for name, value in zip(names, values, strict=True):
            if name is not None:
                yield decimal_of(_place(name, text), value, expected[name], ground.digits, scale)
    yield from whether(
        not model.times or tuple(times) == model.times, "table of values", "the times are others"
    )


def values_by_formula(ground: Ground, step: Step) -> Iterator[Finding]:
    """Every value, against the formula of its state or output, which was proved before.

    Of a small value beside a huge one nothing may be left in the matrix exponential.
    """
    model, forms = ground.response.model, ground.response.closed_forms
    formulas = dict(zip(model.states, forms.solution, strict=True))
    formulas |= {o.name: f for o, f in zip(model.outputs, forms.outputs, strict=True)}
    called = [_called(ground, side) for side in _head(step)[1:]]
    for text, *values in rows_of(step):
        names = ground.names | {model.time: acb(ball_of(_time(text)))}
        for name, value in zip(called, values, strict=True):
            if name is not None:
                expected = ball_at(formulas[name], names)
                yield decimal_of(_place(name, text), value, expected, ground.digits)


def _head(step: Step) -> list[Side]:
    header = step.facts["header"]
    if not isinstance(header, list):
        raise TypeError("the table of values has no head")
    return header


def _place(name: str, text: str) -> str:
    return f"value of {name} at {text}"


def _time(text: str) -> SurdSum:
    return exact_at(formula_in(read_formula(text, names=frozenset())), {})


def _size(matrix: acb_mat) -> arb:
    return max((abs(entry).upper() for entry in matrix.entries()), default=arb(1))
