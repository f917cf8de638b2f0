"""Substitution, stability, resonance and the steady state, as printed."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from flint import acb, acb_mat, acb_poly, arb

from closedform.derivation.driven.proof.motion import row_of
from closedform.derivation.driven.proof.spot import Spot
from closedform.derivation.driven.proof.stated import named_at
from closedform.derivation.driven.proof.values import equal, formula_at
from closedform.derivation.driven.writing import Writing
from closedform.derivation.parametric.proof.ground import Said, coefficients_at
from closedform.derivation.parametric.proof.model import formula_of
from closedform.derivation.proof.evaluation import ball_at
from closedform.derivation.proof.finding import Comparison, Fault, Finding, undecided, whether
from closedform.derivation.step import Side, Step, Symbol
from closedform.notation.expression import ZERO

__all__ = [
    "balance",
    "by_amplitude",
    "factor_of_a",
    "gain",
    "hurwitz_determinant",
    "identity",
    "phase",
    "polynomial_of_a",
    "shared_tone",
    "stability",
    "steady",
    "term",
    "transient",
]

_SETTLED = 130
"""After this many times that halve it, nothing of a decaying term is seen."""


def term(spot: Spot, said: Said) -> Iterator[Finding]:
    """A term of an equation along the true motion."""
    left, formula = map(formula_of, said.statement.sides)
    place = _place(said.step)
    for t in spot.times(place):
        state = spot.state_at(place, t)
        names = named_at(spot, t, state, spot.inputs_at(place, t))
        expected = ball_at(left, names)
        yield equal("term of an equation", formula_at(formula, names, names), expected)


def balance(spot: Spot, said: Said) -> Iterator[Finding]:
    """The terms in print add up to the input: the residual is zero."""
    place = _place(said.step)
    terms = [s for s in said.step.statements if s.says == "term"]
    for t in spot.times(place):
        state = spot.state_at(place, t)
        names = named_at(spot, t, state, spot.inputs_at(place, t))
        total = sum((formula_at(formula_of(s.sides[1]), names, names) for s in terms), acb(0))
        for side in said.statement.sides:
            yield equal("equation", total, formula_at(formula_of(side), names, names))


def _place(step: Step) -> int:
    place = step.facts["place"]
    if not isinstance(place, int):
        raise TypeError("a substitution is made in an interval")
    return place


def identity(spot: Spot, said: Said) -> Iterator[Finding]:
    """All sides are equal."""
    first, *others = (ball_at(formula_of(side), spot.names) for side in said.statement.sides)
    for other in others:
        yield equal(said.statement.says, first, other)


def shared_tone(spot: Spot, said: Said) -> Iterator[Finding]:
    """An eigenvalue of A as often as is said, and one of the input."""
    (side,) = said.statement.sides
    value = _value(spot, side)
    polynomial = spot.a.charpoly()
    for _ in range(said.row["multiplicity"]):
        yield equal("eigenvalue of A", polynomial(value), acb(0))
        polynomial = polynomial.derivative()
    waves = [
        (spot.element(wave.rate), spot.element(wave.frequency))
        for burst in spot.model.inputs[said.row["place"]].signal.bursts
        for wave in burst.waves
    ]
    turn = acb(0, 1)
    product = acb(1)
    for rate, frequency in waves:
        product = product * (value - rate - turn * frequency) * (value - rate + turn * frequency)
    yield equal("eigenvalue of the input", product, acb(0))
    damped = said.row["damped"]
    if damped is not None:
        yield from whether(bool(value.real < 0) == damped, "resonance", "its damping is another")


def _value(spot: Spot, side: Side) -> acb:
    if isinstance(side, Symbol):
        rate, turn = (ball_at(formula_of(part), spot.names) for part in side.parts)
        return acb(rate + turn * acb(0, 1))
    return acb(ball_at(formula_of(side), spot.names))


def polynomial_of_a(spot: Spot, said: Said) -> Iterator[Finding]:
    """det(lambda I - A) in factors."""
    symbol, formula = said.statement.sides
    root = Writing(spot.model).root
    expected = Symbol("determinant", argument=root, letter="A")
    yield from whether(symbol == expected, "polynomial of A", "it is of something else")
    polynomial = spot.a.charpoly()
    for k in range(polynomial.degree() + 2):
        point = acb(2 * k + 1) / 3
        value = ball_at(formula_of(formula), {**spot.names, root.text: point})
        yield equal("polynomial of A", value, polynomial(point))


def factor_of_a(spot: Spot, said: Said) -> Iterator[Finding]:
    """A factor of det(lambda I - A)."""
    yield from whether(said.statement.sides[1] == ZERO, "factor of A", "it is not said to be 0")
    factor = _coefficients(spot, said.statement.sides[0])
    _, rest = divmod(spot.a.charpoly(), factor)
    for k in range(factor.degree()):
        yield equal("factor of A", rest[k], acb(0))


def _coefficients(spot: Spot, side: Side) -> acb_poly:
    return coefficients_at(formula_of(side), Writing(spot.model).root.text, spot.names)


def hurwitz_determinant(spot: Spot, said: Said) -> Iterator[Finding]:
    """D_k, the leading minor of the matrix with a_(2j - i) in row i and column j."""
    symbol, formula = said.statement.sides
    order = said.row["order"]
    same = isinstance(symbol, Symbol) and symbol.indices == (str(order),)
    yield from whether(same, "Hurwitz determinant", "it is of another order")
    factor = _coefficients(spot, said.row["polynomial"].sides[0])
    n = factor.degree()
    a = [factor[n - k] / factor[n] for k in range(n + 1)]
    rows = [
        [a[2 * j - i] if 0 <= 2 * j - i <= n else acb(0) for j in range(1, order + 1)]
        for i in range(1, order + 1)
    ]
    value = ball_at(formula_of(formula), spot.names)
    yield equal("Hurwitz determinant", value, acb_mat(rows).det())


def stability(spot: Spot, step: Step) -> Iterator[Finding]:
    """The verdict on the eigenvalues of A: stable exactly if some power of e^A contracts."""
    verdict = step.facts["verdict"]
    if verdict == "undecided":
        return
    contracts = spot.half_time is not None
    if verdict == "stable":
        yield from whether(contracts, "stability", "no power of e^A was found that contracts")
    else:
        yield from whether(not contracts, "stability", "the free motion decays")


def steady(spot: Spot, said: Said) -> Iterator[Finding]:
    """Steady and transient part add up to the true motion."""
    row = row_of(spot, said.statement.sides[0], "steady")
    if row is None:
        yield Fault("steady state", "it is of no state and no output of the model")
        return
    place = len(spot.instants) - 1
    found = spot.solution.steady_state
    if found is None:
        yield Fault("steady state", "there is none")
        return
    transient_ = found.transient_formulas[row]
    for t in spot.times(place):
        names = {**spot.names, spot.model.time: t}
        value = ball_at(formula_of(said.statement.sides[1]), names) + ball_at(transient_, names)
        yield equal("steady and transient", value, spot.rows_at(place, t)[row])


def transient(spot: Spot, said: Said) -> Iterator[Finding]:
    """The transient part decays: after many time constants nothing is left."""
    row = row_of(spot, said.statement.sides[0], "transient")
    if row is None:
        yield Fault("transient", "it is of no state and no output of the model")
        return
    half = spot.half_time
    if half is None:
        yield undecided("transient")
        return
    formula = formula_of(said.statement.sides[1])
    start = spot.instants[-1]
    wait = max(half.real.upper(), *(1 / rate for rate in _decaying(spot)))
    value = ball_at(formula, {**spot.names, spot.model.time: start + acb(_SETTLED * wait)})
    before = ball_at(formula, {**spot.names, spot.model.time: start + acb(wait) / 7})
    size = 1 + abs(acb(before)).upper()
    yield Comparison("transient", acb(value), acb(0), margin=size * arb(10) ** -20)


def _decaying(spot: Spot) -> list[arb]:
    """The rates at which waves of the inputs decay, and 1 for none."""
    rates = [
        -spot.element(wave.rate).real
        for given in spot.model.inputs
        for burst in given.signal.bursts
        for wave in burst.waves
    ]
    held = [rate.lower() for rate in rates if bool(rate > 0)]
    return held or [arb(2) ** 64]


def by_amplitude(spot: Spot, said: Said) -> Iterator[Finding]:
    """Mean value and sinusoids by amplitude and phase, against the steady state in print."""
    symbol, side = said.statement.sides
    row = row_of(spot, symbol, "steady")
    if row is None:
        yield Fault("steady state", "it is of no state and no output of the model")
        return
    rows: Any = said.step.facts["rows"]
    formula = formula_of(rows[row]["steady"].sides[1])
    held: Any = said.step.facts["phases"]
    phases = {p["statement"].sides[0]: p["statement"].sides[1] for p in held}
    parts = side.parts if isinstance(side, Symbol) and side.kind == "sum" else (side,)
    for t in spot.times(len(spot.instants) - 1):
        names = {**spot.names, spot.model.time: t}
        total = acb(0)
        for part in parts:
            if isinstance(part, Symbol) and part.kind == "sinusoid":
                amplitude, argument, name = part.parts
                if name not in phases:
                    yield Fault("amplitude and phase", "a phase is not said")
                    return
                turn = ball_at(formula_of(argument), names)
                shift = angle_at(spot, phases[name])
                wave = (turn - shift).sin() if part.indices == ("sin",) else (turn - shift).cos()
                total += ball_at(formula_of(amplitude), names) * wave
            else:
                total += ball_at(formula_of(part), names)
        yield equal("amplitude and phase", total, ball_at(formula, names))


def gain(spot: Spot, said: Said) -> Iterator[Finding]:
    """The ratio of the amplitude in print to that of the one input of its frequency."""
    phasor = spot.solution.phasors[said.row["place"]]
    lag = None if phasor is None else phasor.sinusoids[said.row["sinusoid"]].lag
    if phasor is None or lag is None:
        yield Fault("gain", "no input has this frequency by itself")
        return
    frequency = spot.element(phasor.sinusoids[said.row["sinusoid"]].frequency)
    parts = acb(0)
    for wave in spot.waves(lag.input, len(spot.instants) - 1):
        own = spot.element(wave.frequency)
        if wave.kernel != "one" and (own - frequency).contains(0):
            parts += spot.element(wave.amount) * (acb(0, 1) if wave.kernel == "sin" else 1)
    rows: Any = said.step.facts["rows"]
    side = rows[said.row["place"]]["phasor"]["statement"].sides[1]
    held = side.parts if isinstance(side, Symbol) and side.kind == "sum" else (side,)
    sinusoids = [p for p in held if isinstance(p, Symbol) and p.kind == "sinusoid"]
    amplitude = sinusoids[said.row["sinusoid"]].parts[0]
    value = ball_at(formula_of(said.statement.sides[0]), spot.names)
    yield equal("gain", value * acb(abs(acb(parts))), ball_at(formula_of(amplitude), spot.names))


def phase(spot: Spot, said: Said) -> Iterator[Finding]:
    """A phase lies in the quadrant that is said; its value is proved with the sinusoid."""
    angle = angle_at(spot, said.statement.sides[1])
    place = said.row["place"]
    signs = {"I": (1, 1), "II": (-1, 1), "III": (-1, -1), "IV": (1, -1)}
    if place in signs:
        cosine, sine = angle.cos().real, angle.sin().real
        held = bool(cosine * signs[place][0] > 0) and bool(sine * signs[place][1] > 0)
        yield from whether(held, "phase", "it lies in another quadrant")


def angle_at(spot: Spot, side: Side) -> acb:
    """Return an angle as it is printed: a part of pi, an arc tangent, or that of a point."""
    if not isinstance(side, Symbol):
        raise TypeError(f"{side} is no angle")
    match side.kind:
        case "turn":
            return acb(arb.pi()) * int(side.indices[0]) / int(side.indices[1])
        case "arc":
            *turns, ratio = side.parts
            value = acb(ball_at(formula_of(ratio), spot.names).real.atan())
            value = value if side.indices == ("+",) else -value
            return value + sum((angle_at(spot, turn) for turn in turns), acb(0))
        case "angle of":
            y, x = (ball_at(formula_of(part), spot.names).real for part in side.parts)
            return acb(arb.atan2(y, x))
    raise TypeError(f"{side} is no angle")
