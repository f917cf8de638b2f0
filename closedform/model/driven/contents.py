"""All that a file says of a driven model, in the numbers with which it was read."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Generic, TypeVar

from closedform.errors import Place
from closedform.model.driven.columns import InputColumns
from closedform.model.driven.equations import stated_by_equations
from closedform.model.driven.initial import stated_initial
from closedform.model.driven.initial_errors import UnusedInputError
from closedform.model.driven.model import Jet
from closedform.model.driven.numerals import Numerals
from closedform.model.driven.pieces import declared_inputs
from closedform.model.driven.points import Point, stated_points
from closedform.model.driven.second_order import stated_by_masses
from closedform.model.driven.signal_algebra import numbers_of
from closedform.model.driven.state_form import stated_by_matrix
from closedform.model.driven.statement import Statement
from closedform.model.formulas import formula_text
from closedform.model.keys import form_of
from closedform.model.statement import outputs_of
from closedform.notation.equation import read_jet_formula
from closedform.notation.jets import found_jets
from closedform.notation.linear import combination

__all__ = ["Contents", "Weighed", "contents_of"]

T = TypeVar("T")


@dataclass(frozen=True, slots=True)
class Weighed(Generic[T]):
    """A linear combination of jets and of inputs, these by their place."""

    of_jets: tuple[tuple[Jet, T], ...]
    of_inputs: tuple[tuple[int, T], ...]


@dataclass(frozen=True)
class Contents(Generic[T]):
    """What is stated: equations, inputs, outputs, and values at the start or at points."""

    numerals: Numerals[T]
    statement: Statement[T]
    columns: InputColumns[T]
    outputs: tuple[tuple[str, Weighed[T]], ...]
    start: T
    initial: Mapping[Jet, T] | None
    points: tuple[Point[T], ...]

    def numbers(self) -> Iterator[T]:
        """Yield every number."""
        for row in self.statement.rows:
            yield from (weight for _, weight in row.of_unknowns)
            yield from (weight for _, weight in row.of_inputs)
        for column in self.columns.columns:
            yield from numbers_of(column.signal)
        for _, output in self.outputs:
            yield from (weight for _, weight in output.of_jets)
            yield from (weight for _, weight in output.of_inputs)
        for point in self.points:
            yield from (point.at, point.value, *(weight for _, weight in point.of_jets))
        yield self.start
        yield from (self.initial or {}).values()


def contents_of(
    mapping: Mapping[str, object], given: tuple[str, ...], numerals: Numerals[T]
) -> Contents[T]:
    """Return what a mapping states; `given` are the states that it declares.

    Raises:  the errors of ``closedform.model``, ``closedform.model.driven`` and
             ``closedform.notation``.
    """
    source = numerals.source
    declared, numerals.names = declared_inputs(
        mapping.get("inputs", {}), numerals.names, source, numerals.arithmetic, numerals.signs
    )
    numerals.used.update(*(one.names for one in declared))
    columns = InputColumns(declared, numerals)
    match form_of(mapping):
        case "equations":
            statement = stated_by_equations(mapping["equations"], given, numerals, columns)
        case "mass":
            statement = stated_by_masses(mapping, given, numerals, columns)
        case _:
            statement = stated_by_matrix(mapping, given, numerals, columns)

    def weigh(value: object, key: str) -> Weighed[T]:
        return _weighed(value, key, statement, columns)

    outputs = outputs_of(mapping.get("outputs", {}), numerals.names, source, weigh)
    numerals.names = numerals.names.added((name for name, _ in outputs), "an output")
    _refuse_unused(statement, columns, outputs)
    initial = None
    points: tuple[Point[T], ...] = ()
    if "initial" in mapping:
        initial = stated_initial(mapping["initial"], statement, numerals, declared=bool(given))
    else:
        points = stated_points(mapping["at_points"], statement.unknowns, numerals)
    start = numerals.entry(mapping.get("start", 0), "start")
    return Contents(numerals, statement, columns, outputs, start, initial, points)


def _weighed(
    value: object, key: str, statement: Statement[T], columns: InputColumns[T]
) -> Weighed[T]:
    numerals = columns.numerals
    text = formula_text(value, key, numerals.source)

    def work(place: Place) -> Weighed[T]:
        formula = read_jet_formula(
            text,
            time=columns.time,
            constants=numerals.constants,
            functions=frozenset(statement.unknowns) | columns.names,
            place=place,
        )
        numerals.note(formula)
        acting = frozenset(statement.unknowns) | columns.names
        jets = tuple(Jet(*jet) for jet in found_jets(formula) if jet[0] in acting)
        names = tuple(jet.text for jet in jets)
        weights = combination(formula, names, numerals.arithmetic, place)
        of_jets, of_inputs = [], []
        for jet, weight in zip(jets, weights, strict=True):
            if jet.name in columns.names:
                of_inputs.append((columns.of(jet.name, jet.order, None, place), weight))
            else:
                of_jets.append((jet, weight))
        return Weighed(tuple(of_jets), tuple(of_inputs))

    return numerals.read(text, key, work)


def _refuse_unused(
    statement: Statement[T],
    columns: InputColumns[T],
    outputs: tuple[tuple[str, Weighed[T]], ...],
) -> None:
    places = {place for row in statement.rows for place, _ in row.of_inputs}
    places |= {place for _, output in outputs for place, _ in output.of_inputs}
    used = {columns.columns[place].declared for place in places}
    source = columns.numerals.source
    for name, one in columns.declared.items():
        if one not in used:
            raise UnusedInputError(source.at_name(f"inputs.{name}"), name)
