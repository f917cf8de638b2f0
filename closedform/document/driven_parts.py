"""The parts of a driven solution as plain data: pieces, free and forced, steady and transient."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from closedform.model.driven.model import DrivenModel
from closedform.model.driven.signal import Repeat
from closedform.notation.expression import Expression, Name
from closedform.notation.plain import plain
from closedform.response.driven.composition import element_formula, step_formula
from closedform.response.driven.period_formulas import PeriodicSolution, PeriodStretch
from closedform.response.driven.phasor import Phasor, Sinusoid
from closedform.response.driven.polar import Angle
from closedform.response.driven.resonance import Resonance
from closedform.response.driven.response import DrivenSolution

__all__ = ["input_names", "parts_of"]


def input_names(model: DrivenModel) -> tuple[Name, ...]:
    """Return a name for each column of the input matrix that plain notation can read.

    It is that of the input where it stands as declared; F' and u(t - 2) are F_in2 and u_in3 by
    their places, and a function of time without a name is u_in1.
    """
    taken = {*model.rows, *model.unknowns, model.time, *getattr(model.field, "parameters", ())}
    taken |= {given.name for given in model.inputs}
    found = []
    for place, given in enumerate(model.inputs, start=1):
        text = given.name
        if given.formula != Name(given.name):
            text = f"{given.name or 'u'}_in{place}"
            while text in taken:
                text += "_"
        taken.add(text)
        found.append(Name(text))
    return tuple(found)


def parts_of(solution: DrivenSolution) -> dict[str, Any]:
    """Return the solution and the parts of it that there are.

    Where inputs repeat, the parts of all else stand in one of their own.
    """
    model = solution.model
    told: dict[str, Any] = {}
    if solution.has_one_formula:
        told |= _in_rows(model, solution.solution)
    if solution.periodic:
        told["base"] = _in_rows(model, solution.base) | _pieces(solution)
        told["periodic"] = [
            _periodic(model, own, functions.repeat)
            for own, functions in zip(solution.periodic, solution.periods, strict=True)
        ]
    else:
        told |= _pieces(solution)
    steady = solution.steady_state
    if steady is not None:
        told["steady_state"] = _in_rows(model, steady.steady_formulas)
        told["steady_state"]["sinusoids"] = {
            model.rows[own.row]: _phasor(model, own) for own in solution.phasors if own is not None
        }
        told["transient"] = _in_rows(model, steady.transient_formulas)
    if solution.points is not None:
        constants = solution.points.constants
        told["constants"] = {c.name: plain(c.formula) for c in constants}
        told["provided"] = list(map(plain, solution.points.provided))
    told["resonance"] = [_resonance(model, own) for own in solution.resonances]
    return told


def _pieces(solution: DrivenSolution) -> dict[str, Any]:
    """The intervals, and the free and the forced response."""
    model, functions = solution.model, solution.functions
    told: dict[str, Any] = {}
    if len(functions.intervals) > 1:
        told["pieces"] = [
            {**_bounds(solution, place), **_in_rows(model, rows)}
            for place, rows in enumerate(solution.pieces)
        ]
    told["free"] = _in_rows(model, solution.of(functions.free))
    told["forced"] = _in_rows(model, _forced(solution))
    return told


def _in_rows(model: DrivenModel, formulas: Sequence[Expression]) -> dict[str, Any]:
    """A formula for each row of a model, by what the row is."""
    texts = list(map(plain, formulas))
    n, e = len(model.names), len(model.reduction.eliminated)
    return {
        "solution": texts[:n],
        "eliminated": dict(zip(model.reduction.eliminated, texts[n : n + e], strict=True)),
        "outputs": dict(
            zip((output.name for output in model.outputs), texts[n + e :], strict=True)
        ),
    }


def _bounds(solution: DrivenSolution, place: int) -> dict[str, str | None]:
    interval, field = solution.functions.intervals[place], solution.model.field
    end = None if interval.end is None else plain(element_formula(field, interval.end))
    return {"from": plain(element_formula(field, interval.start)), "to": end}


def _forced(solution: DrivenSolution) -> list[Expression]:
    """The forced response for all times: what joins at a switching is all forced."""
    model, functions = solution.model, solution.functions
    first, columns = functions.forced[0], solution.columns
    return [
        step_formula(model.field, columns, row, first, functions.switches, model.time)
        for row in range(len(model.rows))
    ]


def _phasor(model: DrivenModel, own: Phasor) -> dict[str, Any]:
    return {
        "mean": plain(own.mean_formula),
        "terms": [_sinusoid(model, term) for term in own.sinusoids],
    }


def _sinusoid(model: DrivenModel, term: Sinusoid) -> dict[str, Any]:
    told: dict[str, Any] = {
        "frequency": plain(element_formula(model.field, term.frequency)),
        "origin": plain(element_formula(model.field, term.origin)),
        "amplitude": plain(term.amplitude),
        "phase": _angle(term.phase),
    }
    if term.lag is not None:
        name = input_names(model)[term.lag.input].text
        told["against"] = {
            "input": name,
            "gain": plain(term.lag.gain),
            "lag": _angle(term.lag.angle),
        }
    return told


def _angle(angle: Angle) -> dict[str, str]:
    return {"y": plain(angle.above), "x": plain(angle.beside)}


def _resonance(model: DrivenModel, own: Resonance) -> dict[str, Any]:
    return {
        "input": input_names(model)[own.input].text,
        "rate": plain(element_formula(model.field, own.tone.rate)),
        "frequency": plain(element_formula(model.field, own.tone.frequency)),
        "multiplicity": own.multiplicity,
        "power": own.order,
    }


def _periodic(model: DrivenModel, own: PeriodicSolution, repeat: Repeat) -> dict[str, Any]:
    named = zip(input_names(model), model.inputs, strict=True)
    told: dict[str, Any] = {
        "inputs": [name.text for name, given in named if given.signal.repeat == repeat],
        "period": plain(own.period),
        "start": plain(own.start),
        "number": own.number,
        "local": own.local,
        "stretches": _stretches(model, own.stretches),
        "left": [plain(formula) for formula in own.left],
        "carried": [plain(formula) for formula in own.carried],
    }
    if own.provided:
        told["provided"] = [plain(formula) for formula in own.provided]
    if own.meets:
        told["meets"] = [plain(formula) for formula in own.meets]
    if own.count is not None:
        told["count"] = own.count
    if own.after is not None:
        told["after"] = _in_rows(model, own.after)
    if own.steady is not None:
        told["steady"] = _stretches(model, own.steady)
    if own.begins is not None:
        told["begins"] = [plain(formula) for formula in own.begins]
    return told


def _stretches(model: DrivenModel, stretches: Sequence[PeriodStretch]) -> list[dict[str, Any]]:
    return [
        {"from": plain(own.start), "to": plain(own.end), **_in_rows(model, own.rows)}
        for own in stretches
    ]
