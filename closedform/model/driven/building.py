"""From a mapping of keys to values to a driven model."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TypeVar

from closedform.model.driven.assembly import Assembly
from closedform.model.driven.contents import contents_of
from closedform.model.driven.model import DrivenModel
from closedform.model.driven.numerals import OpenNumerals, PlainNumerals
from closedform.model.keys import form_of, uses_pi
from closedform.model.model import Model
from closedform.model.parametric_building import Contents, opening_of, with_parameters
from closedform.model.source import Source
from closedform.model.statement import Heading

__all__ = ["driven_model"]

T = TypeVar("T")


def driven_model(mapping: Mapping[str, object], heading: Heading, source: Source) -> DrivenModel:
    """Return the driven model that a mapping states below its heading.

    With parameters, or with the number pi in a formula, its field is that of the parameters.

    Raises:  the errors of ``closedform.model``, of its room ``driven``, and of
             ``closedform.notation``; all are InputError.
    """
    key = form_of(mapping)
    if "parameters" in mapping or uses_pi(mapping):
        return _open_model(mapping, heading, key, source)
    numerals = PlainNumerals(heading.names, source)
    assembly = Assembly(contents_of(mapping, heading.states, numerals), key, None)
    surds = assembly.field.surds
    stacked = Model(
        name=heading.name,
        title=heading.title,
        states=assembly.stacked_states,
        matrix=tuple(tuple(map(surds, row)) for row in assembly.stacked_matrix),
        initial=tuple(map(surds, assembly.stacked_initial)),
        times=heading.times,
        time=heading.time,
        summary=heading.summary,
        reserved=assembly.reserved,
    )
    return assembly.model(stacked)


def _open_model(
    mapping: Mapping[str, object], heading: Heading, key: str, source: Source
) -> DrivenModel:
    opening = opening_of(mapping, heading.names, source)
    numerals = OpenNumerals(opening, source)
    assembly = Assembly(contents_of(mapping, heading.states, numerals), key, opening.domain)
    contents = Contents(
        states=assembly.stacked_states,
        matrix=assembly.stacked_matrix,
        initial=assembly.stacked_initial,
        outputs=(),
        used=frozenset(numerals.used),
        elements=assembly.elements,
        key=key,
        reserved=assembly.reserved,
    )
    return assembly.model(with_parameters(opening, mapping, heading, contents))
