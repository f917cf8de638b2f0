"""The steps that say what the solution does: resonance, stability, the steady state."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from closedform.algebra.field import Scalar
from closedform.algebra.hurwitz import HurwitzTest
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import SignArgument
from closedform.derivation.driven.writing import Writing
from closedform.derivation.parametric.formulas import sign_statement
from closedform.derivation.parametric.reasons import reason_of
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation.expression import ZERO, Expression, Sum, power_of, product
from closedform.notation.terms import negated, sum_of
from closedform.response.driven.phasor import Phasor, Sinusoid
from closedform.response.driven.resonance import Resonance
from closedform.response.driven.response import DrivenSolution

__all__ = ["resonance_step", "stability_step", "steady_step", "transient_step"]


def resonance_step(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object]
) -> Step | None:
    """Name the eigenvalues that an input shares with A; None where there are none."""
    if not solution.resonances:
        return None
    rows = [
        {
            "input": writing.inputs[found.input],
            "place": found.input,
            "value": Statement("shared tone", (_value(writing, found),)),
            "multiplicity": found.multiplicity,
            "order": found.order,
            "power": power_of(writing.t, found.order),
            "raised": found.raised,
            "damped": found.damped,
            "pair": bool(found.tone.frequency),
            "constant": not found.tone.frequency and not found.tone.rate,
        }
        for found in solution.resonances
    ]
    return Step("resonance", (), {**facts, "rows": rows}, ("input_system",), "summary")


def _value(writing: Writing, found: Resonance) -> Side:
    rate = writing.element(found.tone.rate)
    if not found.tone.frequency:
        return rate
    return Symbol("pair", parts=(rate, writing.element(found.tone.frequency)))


def stability_step(writing: Writing, solution: DrivenSolution, facts: dict[str, object]) -> Step:
    """Say whether the free motion decays, and why."""
    stability = solution.stability
    whole = product(
        power_of(_polynomial(writing, test.polynomial), test.multiplicity)
        for test in stability.factors
    )
    statement = Statement(
        "polynomial of A", (Symbol("determinant", argument=writing.root, letter="A"), whole)
    )
    told = {
        **facts,
        "verdict": stability.verdict,
        "rows": [_test_row(writing, test) for test in stability.reasons],
        "second": all(len(test.polynomial) <= 3 for test in stability.factors),
        "marginal": stability.marginal,
        "scalar": writing.is_scalar,
    }
    return Step("stability", (statement,), told, ("driven_solution",))


def _polynomial(writing: Writing, coefficients: Sequence[Scalar]) -> Expression:
    degree = len(coefficients) - 1
    terms = [
        writing.term(c, [power_of(writing.root, degree - k)])
        for k, c in enumerate(coefficients)
        if c
    ]
    return Sum(tuple(terms)) if len(terms) > 1 else sum_of(terms)


def _test_row(writing: Writing, test: HurwitzTest) -> dict[str, object]:
    determinants = [
        {
            "order": k,
            "polynomial": Statement("factor of A", (_polynomial(writing, test.polynomial), ZERO)),
            "statement": Statement(
                "Hurwitz determinant",
                (
                    Symbol("scalar", (str(k),), None, writing.letter("D")),
                    writing.element(argument.element),
                ),
            ),
            "why": _why(writing, argument),
        }
        for k, argument in test.determinants
    ]
    return {
        "degree": len(test.polynomial) - 1,
        "polynomial": Statement("factor of A", (_polynomial(writing, test.polynomial), ZERO)),
        "manner": test.manner,
        "signs": [_why(writing, a) for a in test.coefficients if _worth(writing, a)],
        "determinants": determinants,
        "structure": test.structure is not None,
    }


def _worth(writing: Writing, argument: SignArgument) -> bool:
    """Whether a sign is not plain to see: more than a product of positive numbers and names."""
    field = writing.model.field
    if not isinstance(field, ParameterField) or argument.values != {1}:
        return False
    return len(argument.element.numer) > 1


def _why(writing: Writing, argument: SignArgument) -> list[Side | Statement | str]:
    field = writing.model.field
    if not isinstance(field, ParameterField):
        relation = {1: ">", 0: "=", -1: "<"}[min(argument.values)]
        return [Statement("sign", (writing.element(argument.element), ZERO), relation)]
    if argument.sign == "unknown":
        return []
    found = reason_of(field, argument)
    return found or [sign_statement(field, argument.element, argument.sign)]


def steady_step(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object]
) -> Step | None:
    """State the steady state, and by amplitude and phase where it oscillates."""
    steady = solution.steady_state
    if steady is None or not steady.steady:
        return None
    rows: list[dict[str, Any]] = []
    phases: list[dict[str, Any]] = []
    for place, name in enumerate(writing.model.rows):
        phasor = solution.phasors[place]
        told = None
        if phasor is not None:
            told, own = _phasor(writing, name, phasor, place)
            phases += own
        rows.append(
            {
                "row": place,
                "kind": steady.kinds[place],
                "steady": Statement(
                    "steady",
                    (
                        Symbol("scalar", ("steady",), writing.t, name),
                        steady.steady_formulas[place],
                    ),
                ),
                "phasor": told,
            }
        )
    several = len(solution.functions.intervals) > 1
    last = len(solution.functions.intervals) - 1
    phasors = [row["phasor"] for row in rows if row["phasor"] is not None]
    facts = {
        **facts,
        "rows": rows,
        "phases": phases,
        "open": any(phase["open"] for phase in phases),
        "quadrants": _quadrants(phases),
        "gains": [gain for phasor in phasors for gain in phasor["gains"]],
        "when": writing.within(last) if several else None,
        "constant": all(row["kind"] in ("constant", "zero") for row in rows),
        "growing": any(row["kind"] == "growing" for row in rows),
    }
    return Step("steady", (), facts, ("stability",), "summary")


_QUADRANTS = {"I": "first", "II": "second", "III": "third", "IV": "fourth"}


def _quadrants(phases: Sequence[Mapping[str, Any]]) -> list[dict[str, object]]:
    """The quadrants in which phases lie, each with its phases."""
    found: dict[str, list[object]] = {}
    for phase in phases:
        if phase["place"] in _QUADRANTS:
            found.setdefault(_QUADRANTS[phase["place"]], []).append(phase["statement"].sides[0])
    return [{"quadrant": word, "phases": held} for word, held in found.items()]


def transient_step(
    writing: Writing, solution: DrivenSolution, facts: dict[str, object]
) -> Step | None:
    """State what decays; None where nothing is left of it, or no steady state is named."""
    steady = solution.steady_state
    if steady is None or not steady.steady or not steady.transient:
        return None
    statements = tuple(
        Statement("transient", (Symbol("scalar", ("transient",), writing.t, name), formula))
        for name, formula in zip(writing.model.rows, steady.transient_formulas, strict=True)
    )
    return Step("transient", statements, facts, ("steady",), "full")


def _phasor(
    writing: Writing, name: str, phasor: Phasor, row: int
) -> tuple[dict[str, Any], list[dict[str, Any]]]:
    """The steady state by amplitude and phase; and what each phase is."""
    parts: list[Side] = [] if phasor.mean_formula == ZERO else [phasor.mean_formula]
    phases: list[dict[str, Any]] = []
    for k, sinusoid in enumerate(phasor.sinusoids):
        symbol = _phase_symbol(writing, row, k, len(phasor.sinusoids))
        argument = _argument(writing, sinusoid)
        kernel = "cos" if sinusoid.sine_phase is None else "sin"
        parts.append(Symbol("sinusoid", (kernel,), parts=(sinusoid.amplitude, argument, symbol)))
        phases.append(_phase(sinusoid, symbol))
    side = parts[0] if len(parts) == 1 else Symbol("sum", parts=tuple(parts))
    symbol = Symbol("scalar", ("steady",), writing.t, name)
    statement = Statement("by amplitude", (symbol, side))
    return {"statement": statement, "gains": list(_gains(writing, name, phasor))}, phases


def _phase_symbol(writing: Writing, row: int, k: int, count: int) -> Symbol:
    index = str(row + 1) if count == 1 else f"{row + 1},{k + 1}"
    return Symbol("scalar", (index,), None, writing.letter("varphi"))


def _argument(writing: Writing, sinusoid: Sinusoid) -> Expression:
    t: Expression = writing.t
    if sinusoid.origin:
        t = sum_of([t, negated(writing.element(sinusoid.origin))])
    return writing.term(sinusoid.frequency, [t])


def _phase(sinusoid: Sinusoid, symbol: Symbol) -> dict[str, Any]:
    """The phase by its arc tangent, where that is all; else by a point and its quadrant.

    It is that of a sine where sines drive, so that it is the lag of the textbooks.
    """
    angle = sinusoid.phase if sinusoid.sine_phase is None else sinusoid.sine_phase
    value = Symbol("angle of", parts=(angle.above, angle.beside))
    if angle.arc is not None:
        turn, direction, ratio = angle.arc
        pi = Symbol("turn", (str(turn.numerator), str(turn.denominator)))
        if direction == 0:
            value = pi
        elif not turn:
            value = Symbol("arc", ("+" if direction > 0 else "-",), parts=(ratio,))
    return {
        "statement": Statement("phase", (symbol, value)),
        "place": angle.place,
        "open": value.kind == "angle of",
    }


def _gains(writing: Writing, name: str, phasor: Phasor) -> Iterator[dict[str, object]]:
    """How the amplitude stands to that of the only input of its frequency."""
    for place, sinusoid in enumerate(phasor.sinusoids):
        if sinusoid.lag is not None:
            yield {
                "row": Symbol("scalar", ("steady",), None, name),
                "place": phasor.row,
                "sinusoid": place,
                "input": writing.inputs[sinusoid.lag.input],
                "gain": Statement("gain", (sinusoid.lag.gain,)),
            }
