"""The motion of a driven model in one case: everything in it that is a function of time."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

from closedform.algebra.field import Scalar
from closedform.checking.truth import Interval, Piece
from closedform.checking.truths.formulas import (
    Functions,
    element_written,
    pieces_of,
    with_derivatives,
    written_from,
)
from closedform.checking.truths.limits import limit_of
from closedform.model.driven.model import DrivenModel
from closedform.notation.expression import Expression
from closedform.notation.written.tree import Written
from closedform.response.driven.solution import DrivenSolution

__all__ = ["Motion", "labels_of"]


def labels_of(model: DrivenModel) -> tuple[str, ...]:
    """Return the states as jets are typed (x, x'), then all else that is solved for."""
    others = model.rows[len(model.names) :]
    return (*(jet.text for jet in model.reduction.jets), *others)


@dataclass(frozen=True)
class Motion:
    """A solution with its intervals; no input repeats."""

    solution: DrivenSolution

    @property
    def model(self) -> DrivenModel:
        """The model that is solved."""
        return self.solution.model

    @cached_property
    def spans(self) -> tuple[Interval, ...]:
        """The intervals between the instants at which something is switched."""
        field, put = self.model.field, self.solution.put
        instants = [self.model.start, *self.model.timeline]
        ends: list[Written | None] = [element_written(field, put(at)) for at in instants]
        starts = [at for at in ends if at is not None]
        return tuple(zip(starts, [*ends[1:], None], strict=True))

    def pieces(self) -> dict[str, tuple[Piece, ...]]:
        """Return the solution: states, eliminated unknowns, outputs, further derivatives."""
        columns = zip(*self.solution.pieces, strict=True)
        return pieces_of(self._with_derivatives(self._named(list(columns))), self.spans)

    def particular(self) -> dict[str, tuple[Piece, ...]]:
        """Return what the inputs sustain in each interval, free terms left out."""
        sustained = self.solution.functions.sustained
        if not self.model.inputs or not sustained:
            return {}
        columns = zip(*map(self.solution.in_interval, sustained), strict=True)
        return pieces_of(self._with_derivatives(self._named(list(columns))), self.spans)

    def steady(self) -> dict[str, Written]:
        """Return what is left of the solution when the rest has decayed, where that is known."""
        found = self.solution.steady_state
        if found is not None:
            functions = self._named([(formula,) for formula in found.steady_formulas])
            whole = self._with_derivatives(functions)
            return {name: written_from(formula) for name, (formula,) in whole.items()}
        limits = None if self.model.inputs else self._limits()
        if limits is None:
            return {}
        field = self.model.field
        formulas = [element_written(field, limit) for limit in limits]
        return dict(zip(labels_of(self.model), formulas, strict=True))

    def _limits(self) -> Sequence[Scalar] | None:
        """The limit of a free motion from given initial values."""
        field, functions = self.model.field, self.solution.functions
        (interval,) = functions.intervals
        if not all(summand.constant.is_one for summand in interval.summands):
            return None
        case, reduction = self.solution.case, self.model.reduction
        rows = [[self.solution.put(e) for e in row] for row in reduction.matrix.to_list()]
        total = [field.domain.zero] * len(self.model.rows)
        for summand in interval.summands:
            count = range(functions.columns.shape[1])
            unit = [[field.scalar(int(k == summand.place))] for k in count]
            column = functions.columns.times(field.matrix(unit))
            domain = None if case is None else case.domain
            limits = limit_of(field, field.matrix(rows), column, domain)
            if limits is None:
                return None
            total = [one + other for one, other in zip(total, limits, strict=True)]
        return total

    def _named(self, formulas: Sequence[tuple[Expression, ...]]) -> Functions:
        return dict(zip(labels_of(self.model), formulas, strict=True))

    def _with_derivatives(self, functions: Functions) -> Functions:
        return with_derivatives(functions, self._orders, self.model.time)

    @cached_property
    def _orders(self) -> Mapping[str, int]:
        """How often each unknown is derived in the equations, and in x' = A x + B u."""
        found = {jet.name: jet.order + 1 for jet in self.model.reduction.jets}
        for balance in self.model.balances:
            for jet, _ in balance.of_unknowns:
                found[jet.name] = max(found.get(jet.name, 0), jet.order)
        return found
