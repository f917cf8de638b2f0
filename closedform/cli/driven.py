"""What is said about a driven model on a terminal: equations, inputs, intervals, stability."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence

from closedform.algebra.spectrum import Factor
from closedform.model.driven.model import DrivenModel
from closedform.notation.plain import plain
from closedform.response.driven.composition import element_formula
from closedform.response.driven.resonance import Resonance
from closedform.response.driven.response import DrivenResponse, DrivenSolution

__all__ = ["behaviour_lines", "of_inputs", "of_matrix", "stated_lines"]

MOST_NAMED = 24
FORMS = {
    "second order": "by mass, damping and stiffness",
    "state form": "x' = A x + B u",
}
KINDS = {
    "zero": "zero",
    "constant": "constant",
    "oscillating": "oscillating",
    "growing": "growing with the time",
}
"""What the steady state of a row is, in words."""


def stated_lines(model: DrivenModel) -> list[tuple[str, list[str]]]:
    """Return labelled lines on what was stated and what it was brought to."""
    count = len(model.balances)
    equations = f"{count}, in {', '.join(model.unknowns[:MOST_NAMED])}"
    found = [("equations", [equations if count else FORMS.get(model.form, model.form)])]
    found.append(("states", [listed(model.names)]))
    if model.reduction.eliminated:
        found.append(("eliminated", [listed(model.reduction.eliminated)]))
    if model.inputs:
        found.append(("inputs", [listed([plain(given.formula) for given in model.inputs])]))
    if model.conditions:
        found.append(("conditions", [", ".join(own.text for own in model.conditions)]))
    instants = [plain(element_formula(model.field, at)) for at in (model.start, *model.timeline)]
    several = f"{len(instants)}: from {', '.join(instants)}"
    found.append(("intervals", [several if model.timeline else f"1, from {instants[0]} on"]))
    for given in model.inputs:
        if given.signal.repeat is not None:
            period = plain(element_formula(model.field, given.signal.repeat.period))
            times = given.signal.repeat.count
            often = "" if times is None else f", {times} times"
            found.append(("repeats", [f"{plain(given.formula)} every {period}{often}"]))
    return found


def behaviour_lines(response: DrivenResponse) -> list[tuple[str, list[str]]]:
    """Return labelled lines on resonance, stability and steady state, case by case."""
    solutions = response.solutions
    found = [("stability", _by_case(solutions, lambda s: s.stability.verdict))]
    resonant = _by_case(solutions, lambda s: "; ".join(map(_met(response), s.resonances)))
    found.append(("resonance", resonant or (["none"] if response.model.inputs else [])))
    found.append(("steady state", _by_case(solutions, _steady)))
    return found


def of_matrix(response: DrivenResponse) -> Callable[[Factor], str | None]:
    """Return what tells how often a factor belongs to A itself; None where it does not."""
    tests = response.solutions[0].stability.factors
    multiplicities = {test.polynomial: test.multiplicity for test in tests}

    def told(factor: Factor) -> str | None:
        count = multiplicities.get(factor.polynomial)
        return None if count is None else f"multiplicity {count}" if count > 1 else ""

    return told


def of_inputs(response: DrivenResponse) -> Callable[[Factor], str | None]:
    """Return what tells a factor that belongs to the inputs from others."""
    drive = response.solutions[0].drive

    def told(factor: Factor) -> str | None:
        return None if drive.tone_of(factor.p) is None else ""

    return told


def listed(names: Sequence[str]) -> str:
    """Return how many names there are, and the first of them."""
    shown = ", ".join(names[:MOST_NAMED])
    return f"{len(names)}: {shown}{', …' if len(names) > MOST_NAMED else ''}"


def _by_case(
    solutions: Sequence[DrivenSolution], told: Callable[[DrivenSolution], str]
) -> list[str]:
    """What is told of the cases, one line for all that are told the same; none for nothing."""
    found: dict[str, list[int]] = {}
    for number, solution in enumerate(solutions, start=1):
        text = told(solution)
        if text:
            found.setdefault(text, []).append(number)
    if len(found) == 1 and len(solutions) == len(next(iter(found.values()))):
        return list(found)
    return [f"{text} in {_cases(numbers)}" for text, numbers in found.items()]


def _cases(numbers: Iterable[int]) -> str:
    texts = list(map(str, numbers))
    return f"case{'s' if len(texts) > 1 else ''} {', '.join(texts)}"


def _met(response: DrivenResponse) -> Callable[[Resonance], str]:
    model = response.model

    def told(resonance: Resonance) -> str:
        rate, frequency = (
            plain(element_formula(model.field, e)) if e else ""
            for e in (resonance.tone.rate, resonance.tone.frequency)
        )
        turn = f"± {frequency} i" if frequency else ""
        place = " ".join(text for text in (rate, turn) if text) or "0"
        power = resonance.order
        met = f"factor {model.time}{f'^{power}' if power > 1 else ''}" if power else "not reached"
        return f"{plain(model.inputs[resonance.input].formula)} at {place} ({met})"

    return told


def _steady(solution: DrivenSolution) -> str:
    state = solution.steady_state
    if state is None:
        periodic = [own.steady is not None for own in solution.periodic]
        return "periodic" if periodic and all(periodic) else ""
    rows: dict[str, list[str]] = {}
    for name, kind in zip(solution.model.rows, state.kinds, strict=True):
        rows.setdefault(KINDS[kind], []).append(name)
    texts = [f"{', '.join(names[:MOST_NAMED])} {kind}" for kind, names in rows.items()]
    return "; ".join(texts)
