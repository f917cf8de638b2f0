"""Steps of several cases that read alike, told once."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace

from closedform.derivation.step import Step

__all__ = ["alike", "printed", "some"]

_OF_ONE_CASE = ("cases", "number", "numbers", "conditions")


def printed(steps: Sequence[Step]) -> list[Step]:
    """Return the steps of one kind, with those in full documents only that tell little more.

    That is stability where parameters are tied, and substitution but in the first case.
    """

    def shown(step: Step) -> bool:
        if step.kind == "stability":
            return bool(step.facts["generic"])
        return step.kind not in ("substitution", "period_substitution") or 0 in _tuple(
            step.facts["cases"]
        )

    return [step if shown(step) else replace(step, depth="full") for step in steps]


def some(steps: Iterable[Step | None]) -> list[Step]:
    """Return the steps that there are."""
    return [step for step in steps if step is not None]


def alike(steps: Sequence[Step], count: int) -> list[Step]:
    """Return the steps, those in one that say the same of several of `count` cases."""
    found: list[Step] = []
    for step in steps:
        place = next((k for k, other in enumerate(found) if _same(step, other)), None)
        if place is None:
            found.append(step)
        else:
            found[place] = _joined(found[place], step)
    return [
        replace(s, facts={**s.facts, "whole": len(_tuple(s.facts["cases"])) == count})
        for s in found
    ]


def _same(step: Step, other: Step) -> bool:
    def rest(facts: Mapping[str, object]) -> dict[str, object]:
        return {key: value for key, value in facts.items() if key not in _OF_ONE_CASE}

    return step.statements == other.statements and rest(step.facts) == rest(other.facts)


def _joined(step: Step, other: Step) -> Step:
    facts = dict(step.facts)
    for key in ("cases", "numbers"):
        facts[key] = (*_tuple(step.facts[key]), *_tuple(other.facts[key]))
    facts["conditions"] = ()
    return replace(step, facts=facts)


def _tuple(item: object) -> tuple[object, ...]:
    return item if isinstance(item, tuple) else (item,)
