"""From a mapping of keys to values, as a TOML file gives it, to the model."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.driven.building import driven_model
from closedform.model.driven.model import DrivenModel
from closedform.model.entries import kind_of, number_from
from closedform.model.errors import WrongKindError
from closedform.model.keys import check_keys, is_driven, uses_pi
from closedform.model.model import Model, Output
from closedform.model.parametric import ParametricModel
from closedform.model.parametric_building import parametric_model
from closedform.model.source import Source
from closedform.model.statement import (
    Heading,
    array_of,
    heading_of,
    initial_of,
    matrix_of,
    outputs_of,
)
from closedform.notation.linear import linear_combination
from closedform.notation.reader import read_formula

__all__ = ["build", "model_from", "system"]

NOWHERE = Place()


def model_from(
    mapping: Mapping[str, object], *, name: str, place: Place = NOWHERE
) -> Model | ParametricModel | DrivenModel:
    """Return the model stated by a mapping with the keys of a model file.

    With equations, masses or inputs it is a DrivenModel, else with the key `parameters` or
    the number pi in a formula a ParametricModel.

    Numbers are int, Fraction (or any other exact rational), Decimal, SurdSum, or text such
    as "0.1" or "sqrt(2)/2"; arrays are sequences, or anything with `tolist`.  `name` is the
    stem under which results are filed, made safe for a file name.

    Shapes:  `matrix` is n rows of n entries, `initial` has n, n = len(states) >= 1.
    Raises:  the errors of ``closedform.model`` and ``closedform.notation``, all InputError.

    >>> model = model_from(
    ...     {"title": "Decay", "states": ["n"], "matrix": [["-0.1"]], "initial": [1]},
    ...     name="decay",
    ... )
    >>> model.matrix[0][0].as_fraction()
    Fraction(-1, 10)
    """
    return build(mapping, name, Source(place))


def system(  # noqa: PLR0913  the keys of a model file, each by its name
    matrix: object,
    *,
    initial: object = None,
    states: Sequence[str] | None = None,
    title: str = "A linear system",
    outputs: Mapping[str, str] | None = None,
    times: object = (),
    time: str = "t",
    inputs: Mapping[str, object] | None = None,
    input_matrix: object = None,
    start: object = None,
    at_points: Sequence[str] | None = None,
    parameters: Mapping[str, object] | None = None,
    conditions: Sequence[str] = (),
    substitute: Mapping[str, str] | None = None,
    abbreviations: Mapping[str, str] | None = None,
    values: Sequence[Mapping[str, object]] = (),
    name: str = "system",
) -> Model | ParametricModel | DrivenModel:
    """Return the model x' = matrix x, x(0) = initial, from Python values.

    With `inputs`, by name a function of the time or a table as in a model file, it is driven:
    x' = matrix x + input_matrix u.  Initial values hold at `start`, 0 if not given; conditions
    `at_points`, such as "x1(0) = 1", may take their place.

    Numbers are as in `model_from`; the states are called x1, x2, … unless named.  With
    `parameters`, by name an assumption or a table as in a model file, the entries may be
    formulas in them.

    >>> system([[0, 1], ["-1/4", 0]], initial=[1, 0]).states
    ('x1', 'x2')
    >>> system([["-k"]], initial=[1], parameters={"k": "positive"}).matrix
    ((-k,),)
    """
    rows = array_of(matrix, "an array of rows", "matrix", Source(NOWHERE))
    mapping = {
        "title": title,
        "states": states or [f"x{k}" for k in range(1, len(rows) + 1)],
        "matrix": matrix,
        "outputs": outputs or {},
        "times": times,
        "time": time,
    }
    open_ones = {
        "initial": initial,
        "inputs": inputs,
        "input_matrix": input_matrix,
        "start": start,
        "at_points": at_points,
        "parameters": parameters,
        "conditions": conditions or None,
        "substitute": substitute,
        "abbreviations": abbreviations,
        "values": values or None,
    }
    given = {key: value for key, value in open_ones.items() if value is not None}
    return model_from({**mapping, **given}, name=name)


def build(
    mapping: Mapping[str, object], name: str, source: Source
) -> Model | ParametricModel | DrivenModel:
    """Return the model stated by a mapping; errors give the lines of `source`."""
    check_keys(mapping, source)
    heading = heading_of(mapping, name, source)
    if is_driven(mapping):
        return driven_model(mapping, heading, source)
    if "parameters" in mapping or uses_pi(mapping):
        return parametric_model(mapping, heading, source)
    return _numeric(mapping, heading, source)


def _numeric(mapping: Mapping[str, object], heading: Heading, source: Source) -> Model:
    states = heading.states

    def number(value: object, key: str) -> SurdSum:
        return number_from(value, key, source)

    def weights(value: object, key: str) -> tuple[SurdSum, ...]:
        if not isinstance(value, str):
            raise WrongKindError(source.at(key), "a formula in quotation marks", kind_of(value))

        def work(place: Place) -> tuple[SurdSum, ...]:
            known = frozenset(states) | {heading.time}
            formula = read_formula(value, names=known, place=place)
            return linear_combination(formula, states, place)

        return source.read(value, key, work)

    outputs = outputs_of(mapping.get("outputs", {}), heading.names, source, weights)
    return Model(
        name=heading.name,
        title=heading.title,
        states=states,
        matrix=matrix_of(mapping["matrix"], len(states), source, number),
        initial=initial_of(mapping["initial"], states, source, number),
        outputs=tuple(Output(name, weighed) for name, weighed in outputs),
        times=heading.times,
        time=heading.time,
        summary=heading.summary,
    )
