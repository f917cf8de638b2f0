"""What the record of a driven model tells, as series of its unknowns at an instant.

From the record's JSON alone, by the reader of plain notation that is not the package's.
"""

from __future__ import annotations

import json
from collections.abc import Mapping
from fractions import Fraction
from itertools import pairwise
from typing import Any, Self

from flint import arb, arb_series

import closedform
from closedform.document.record import record_text
from closedform.model.building import model_from
from tests.driven.series import constant, moving, series
from tests.parametric.driven_record_reader import check_driven_texts
from tests.parametric.plain_reader import DRIVEN_FUNCTIONS, Number, ball_of, parse, value
from tests.parametric.record_reader import DisagreementError, covering_cases, names_at

__all__ = ["Told", "record_of_driven"]

Record = Mapping[str, Any]


def record_of_driven(mapping: Mapping[str, Any]) -> Record:
    """Build, respond, prove and record a model.  It is an error if a proof fails."""
    model = model_from({"title": "A driven model", **mapping}, name="model")
    response = closedform.respond(model)
    proofs = closedform.verify(response)
    assert not proofs.refuted
    assert proofs.holds
    record: Record = json.loads(record_text(response, proofs))
    check_driven_texts(record)
    return record


class Told:
    """One case of a record, at values of the parameters."""

    def __init__(self, record: Record, values: Mapping[str, Number], case: int = 0) -> None:
        self.record = record
        self.case: Record = record["cases"][case] if "cases" in record else record
        self.known = names_at(self.case, values) if "cases" in record else self._constants()
        self.start = self.number(record["start"])
        self.bounds = [self.start, *(self.number(text) for text in record["instants"])]

    @classmethod
    def cases(cls, record: Record, values: Mapping[str, Number]) -> list[Self]:
        """The cases that hold at these values; at least one, or DisagreementError."""
        if "cases" not in record:
            return [cls(record, values)]
        return [cls(record, values, case) for case in covering_cases(record, values)]

    def _constants(self) -> dict[str, Number]:
        """Numbers with names, by their formula; those without one are told to some digits."""
        found: dict[str, Number] = {}
        for name, entry in self.record["names"].items():
            formula = entry["definition"].get("formula")
            middle = arb(entry["value"])
            rounded = middle + arb(0, abs(middle) * arb(10) ** -39)
            found[name] = rounded if formula is None else value(parse(formula), found)
        return found

    def number(self, text: str) -> Number:
        return value(parse(text, DRIVEN_FUNCTIONS), self.known)

    def functions(self, at: Number, *, before: bool = False) -> dict[str, arb_series]:
        """The series of all rows at an instant, seen from after it or from before it."""
        base = self.case.get("base", self.case)
        pieces = base.get("pieces", [base])
        place = sum(1 for bound in self.bounds[1:] if _passed(at, bound, before=before))
        near = {self.record["time"]: moving(at)}
        found = self._rows(pieces[place], near)
        for own in self.case.get("periodic", ()):
            for name, more in self._periodic(own, at, before=before).items():
                found[name] = found[name] + more
        self._derivatives(found)
        return found

    def values(self, at: Number) -> dict[str, arb]:
        """The value of each row at an instant."""
        return {name: of[0] for name, of in self.functions(at).items()}

    def steady(self, at: Number) -> dict[str, arb_series]:
        return self._rows(self.case["steady_state"], {self.record["time"]: moving(at)})

    def whole(self, at: Number) -> dict[str, arb_series]:
        """The one formula for all times."""
        return self._rows(self.case, {self.record["time"]: moving(at)})

    def _rows(self, rows: Record, near: Mapping[str, arb_series]) -> dict[str, arb_series]:
        texts = dict(zip(self.record["states"], rows["solution"], strict=True))
        texts |= rows["eliminated"] | rows["outputs"]
        known = {name: constant(number) for name, number in self.known.items()} | near
        return {name: series(parse(text, DRIVEN_FUNCTIONS), known) for name, text in texts.items()}

    def _periodic(self, own: Record, at: Number, *, before: bool) -> dict[str, arb_series]:
        begun, period = self.number(own["start"]), self.number(own["period"])
        if not _passed(at, begun, before=before):
            return {}
        passed = 0
        while passed < 1000 and _passed(at, begun + period * (passed + 1), before=before):
            passed += 1
        if "count" in own and passed >= own["count"]:
            return self._rows(own["after"], {self.record["time"]: moving(at)})
        local = at - begun - period * passed
        stretches = [
            part
            for part in own["stretches"]
            if _passed(local, self.number(part["from"]), before=before)
        ] or own["stretches"][:1]
        near = {own["number"]: constant(passed + 1), own["local"]: moving(local)}
        return self._rows(stretches[-1], near)

    def _derivatives(self, found: Mapping[str, arb_series]) -> None:
        """A state that is named a derivative is that of the one before it."""
        marks = ["", "_dot", "_ddot", *(f"_dot{k}" for k in range(3, 9))]
        for unknown in self.record["unknowns"]:
            jets = [unknown + mark for mark in marks if unknown + mark in found]
            for one, other in pairwise(jets):
                slope, told = found[one].derivative(), found[other]
                scale = max(abs(told[0]).upper(), arb(1), key=float)
                if not abs(slope[0] - told[0]) < scale * arb(10) ** -30:
                    raise DisagreementError(f"{other} is not the derivative of {one}")


def _passed(at: Number, bound: Number, *, before: bool) -> bool:
    """Whether an instant is later than a bound, or is the bound seen from after it."""
    if isinstance(at, Fraction) and isinstance(bound, Fraction):
        return at > bound or (at == bound and not before)
    gap = ball_of(at) - ball_of(bound)
    if gap > 0 or gap < 0:
        return bool(gap > 0)
    assert abs(gap) < arb(10) ** -30
    return not before
