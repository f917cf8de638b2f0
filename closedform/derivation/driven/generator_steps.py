"""The step that makes the inputs the output of a linear system, and stacks both."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.field import BaseField, Polynomial, Scalar
from closedform.algebra.waves import Wave
from closedform.derivation.driven.signals import input_formula, waves_formula
from closedform.derivation.driven.writing import A_HAT, X_HAT, Writing, bold, interval
from closedform.derivation.formulas import in_order, surd_matrix
from closedform.derivation.parametric.formulas import as_given
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.model.driven.generator import Generator, Tone
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import ZERO, Expression, Name

__all__ = ["generator_step", "wave_label"]

S, R = Symbol("matrix", letter="S"), Symbol("matrix", letter="R")


def generator_step(writing: Writing) -> Step | None:
    """State alpha(d/dt) u = 0, S and the start values; None without waves."""
    model = writing.model
    generator = model.generator
    if generator is None:
        return None
    places = [k for k, order in enumerate(generator.orders) if order]
    rows = [row for k in places for row in _start_rows(writing, generator, k)]
    statements = [
        *_literal(writing, places),
        *(_annihilation(writing, generator, k) for k in places),
        Statement("generator vector", (bold("w"), writing.column(_vector(writing, generator)))),
        Statement("generator", (Symbol("dotted", letter="w"), (S, bold("w")))),
        Statement("generator matrix", (S, writing.matrix(generator.matrix))),
        *_stacked(writing, generator),
    ]
    facts = {
        "starts": rows,
        "order": generator.order,
        "inputs": [writing.inputs[k] for k in places],
        "several": len(places) > 1,
        "switched": len(rows) > len(places) or any(row["when"] is not None for row in rows),
        "tones": [_tone(writing, tone) for k in places for tone in _unique(generator.tones[k])],
        "all": len(places) == len(model.inputs),
    }
    return Step("input_system", tuple(statements), facts, ("state_form",))


def wave_label(writing: Writing, place: int, order: int) -> Expression:
    """Return the derivative of an input of an order, as a name with primes."""
    return Name(writing.inputs[place].text + "'" * order)


def _literal(writing: Writing, places: list[int]) -> Iterator[Statement]:
    """What a function that stands in an equation goes by from here on."""
    for k in places:
        given, label = writing.model.inputs[k], writing.inputs[k]
        if given.formula != label:
            yield Statement("named input", (label, input_formula(writing, given)))


def _annihilation(writing: Writing, generator: Generator, place: int) -> Statement:
    coefficients = alpha_of(writing.model.field, generator.tones[place]).to_list()
    degree = len(coefficients) - 1
    terms = [
        writing.term(c, [wave_label(writing, place, degree - k)])
        for k, c in enumerate(coefficients)
        if c
    ]
    return Statement("annihilation", (in_order(terms), ZERO))


def alpha_of(field: BaseField, tones: tuple[Tone, ...]) -> Polynomial:
    """Return the product of (s - rate)^m or ((s - rate)^2 + frequency^2)^m over the tones."""
    one = field.domain.one
    product = field.polynomial([one])
    for tone in tones:
        factor = field.polynomial([one, -tone.rate])
        if tone.frequency:
            factor = factor**2 + field.polynomial([tone.frequency**2])
        product = product * factor**tone.size
    return product


def _vector(writing: Writing, generator: Generator) -> list[Expression]:
    return [
        wave_label(writing, k, order)
        for k, size in enumerate(generator.orders)
        for order in range(size)
    ]


def _start_rows(writing: Writing, generator: Generator, place: int) -> Iterator[dict[str, object]]:
    """The values of w at the origin of the waves of each burst, and when they are on."""
    model = writing.model
    size, first = generator.orders[place], generator.first[place]
    several = sum(order > 0 for order in generator.orders) > 1
    for number, burst in enumerate(model.inputs[place].signal.bursts):
        bounds = [None if at is None else writing.element(at) for at in (burst.start, burst.end)]
        origins = dict.fromkeys(_origin(writing, w, burst.start) for w in burst.waves)
        for origin in origins:
            waves = [w for w in burst.waves if _origin(writing, w, burst.start) == origin]
            totals: list[Scalar] = [model.field.domain.zero] * size
            for wave in waves:
                own = generator.start(place, wave).to_list()
                totals = [a + own[first + k][0] for k, a in enumerate(totals)]
            index = (str(place + 1),) if several else ()
            symbol = Symbol("vector", index, writing.element(origin), "w")
            yield {
                "when": None if bounds == [None, None] else interval(writing.t, *bounds),
                "statement": Statement(
                    "generator start", (symbol, writing.column(map(writing.element, totals)))
                ),
                "input": place,
                "burst": number,
                "waves": Statement("waves", (writing.inputs[place], waves_formula(writing, waves))),
            }


def _origin(writing: Writing, wave: Wave, start: Scalar | None) -> Scalar:
    """A constant has no origin of its own: it counts from where it is switched on."""
    if wave.power or wave.rate or wave.frequency:
        return wave.origin
    return writing.model.start if start is None else start


def _unique(tones: tuple[Tone, ...]) -> tuple[Tone, ...]:
    return tuple(dict.fromkeys(tones))


def _tone(writing: Writing, tone: Tone) -> dict[str, object]:
    rate = writing.element(tone.rate)
    value: Side = rate
    if tone.frequency:
        value = Symbol("pair", parts=(rate, writing.element(tone.frequency)))
    return {"value": Statement("tone", (value,)), "size": tone.size}


def _stacked(writing: Writing, generator: Generator) -> Iterator[Statement]:
    a, b = Symbol("matrix", letter="A"), Symbol("matrix", letter="B")
    reads = writing.matrix(generator.readout)
    if _picks(generator):
        yield Statement("readout", (bold("u"), (R, bold("w"))))
        yield Statement("readout matrix", (R, reads))
    vector = Symbol("blocks", ("1",), parts=(bold("x"), bold("w")))
    fed: Side = (b, R) if _picks(generator) else b
    yield Statement("stacked vector", (X_HAT, vector))
    yield Statement("stacked system", (Symbol("dotted", letter="x_hat"), (A_HAT, X_HAT)))
    yield Statement(
        "stacked matrix",
        (A_HAT, Symbol("blocks", ("2",), parts=(a, fed, Symbol("zero"), S)), _numbers(writing)),
    )


def _picks(generator: Generator) -> bool:
    """Whether u = R w is more than u = w."""
    return generator.order != len(generator.tones) or not all(generator.orders)


def _numbers(writing: Writing) -> Matrix:
    stacked = writing.model.stacked
    if isinstance(stacked, ParametricModel):
        return as_given(stacked.field, stacked.matrix)
    return surd_matrix(stacked.matrix)
