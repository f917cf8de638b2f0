"""The solution in certified numbers, step by step in time, from A, B and the waves alone.

In an interval the waves that are on solve a linear system of their own, v' = V v, with values
that are enclosed from their formulas; x and v together are carried on by the exponential of
[[A, B C], [0, V]] in ball arithmetic, from one switching to the next.  No eigenvalue, no
generator and no exact exponential takes part.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from flint import acb_mat, arb, arb_mat, ctx

from closedform.algebra.field import FieldMatrix
from closedform.algebra.waves import Wave
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import Enclose

__all__ = ["Steps", "wave_value"]


@dataclass
class Steps:
    """The solution of a case at one ground; states at instants are kept by precision."""

    setting: Setting
    ground: Ground
    _kept: dict[tuple[int, int], list[arb]] = field(default_factory=dict)

    def rows(self, k: int, t: arb, enclose: Enclose) -> list[arb]:
        """Return balls for the rows of the model at an instant of an interval."""
        states = self._carried(k, self._begun(k, enclose), t, enclose)
        return self.with_rows(states, self.inputs(k, t, enclose), enclose)

    def free_rows(self, t: arb, enclose: Enclose) -> list[arb]:
        """Return balls for the rows of the free part.

        It starts with the initial values.  Where conditions at points stand for these, and their
        values at the start are not in the field, it starts with what the first sustained part
        leaves of them.
        """
        begin = enclose(self.setting.instants[0])
        initial = self.initial(enclose)
        if self.setting.model.initial is None:
            sustained = self.setting.total(self.setting.solution.functions.sustained[0].summands)
            held = sustained.enclosure(enclose, begin)[: len(initial)]
            initial = [x - p for x, p in zip(initial, held, strict=True)]
        states = self.carried_free(initial, t - begin, enclose)
        silent = [arb(0)] * len(self.setting.model.inputs)
        return self.with_rows(states, silent, enclose)

    def initial(self, enclose: Enclose) -> list[arb]:
        """Return balls for the states at the start, before an impulse there.

        Conditions at points are n equations for them, which are solved in balls: what is finite
        is the only solution.
        """
        setting, n = self.setting, self.setting.states
        if setting.model.initial is not None:
            return [enclose(setting.put(x)) for x in setting.model.initial]
        if (-1, ctx.prec) not in self._kept:
            rows, right = arb_mat(n, n), arb_mat(n, 1)
            begin = enclose(setting.instants[0])
            matrix = self._matrix(setting.model.reduction.matrix, enclose)
            for i, condition in enumerate(setting.model.conditions):
                weights = [enclose(setting.put(w)) for w in condition.of_states]
                at = enclose(setting.put(condition.at))
                moved = _exponential(matrix, at - begin)
                for j in range(n):
                    rows[i, j] = _dot(weights, [moved[k, j] for k in range(n)])
                rest = self._from_rest(setting.interval_of(condition.at, enclose), at, enclose)
                right[i, 0] = enclose(setting.put(condition.value)) - _dot(weights, rest)
            try:
                solved = rows.solve(right)
                self._kept[-1, ctx.prec] = [solved[i, 0] for i in range(n)]
            except ZeroDivisionError:  # not known to be invertible at this precision
                self._kept[-1, ctx.prec] = [arb("nan")] * n
        return self._kept[-1, ctx.prec]

    def _from_rest(self, place: int | None, at: arb, enclose: Enclose) -> list[arb]:
        """The states at an instant of an interval, from zero at the start; None for the start."""
        states = [arb(0)] * self.setting.states
        if place is None:
            return states
        for k in range(place + 1):
            if k:
                begin = enclose(self.setting.instants[k])
                states = self._carried(k - 1, states, begin, enclose)
            blow = self.setting.blow(k).to_list()
            states = [x + enclose(b) for x, (b,) in zip(states, blow, strict=True)]
        return self._carried(place, states, at, enclose)

    def carried_free(self, states: Sequence[arb], since: arb, enclose: Enclose) -> list[arb]:
        """Return balls for e^(A since) states."""
        a = self._matrix(self.setting.model.reduction.matrix, enclose)
        return _applied(_exponential(a, since), states)

    def inputs(self, k: int, t: arb, enclose: Enclose) -> list[arb]:
        """Return balls for the inputs at an instant of an interval."""
        return [
            sum((wave_value(w, t, enclose) for w in self.setting.waves_on(place, k)), arb(0))
            for place in range(len(self.setting.model.inputs))
        ]

    def with_rows(self, states: list[arb], inputs: Sequence[arb], enclose: Enclose) -> list[arb]:
        """Return states, and below them the eliminated unknowns and the outputs."""
        model, put = self.setting.model, self.setting.put
        reduction = model.reduction
        found = list(states)
        for place in range(len(reduction.eliminated)):
            total = arb(0)
            for matrix, values in (
                (reduction.eliminated_from_states, states),
                (reduction.eliminated_from_inputs, inputs),
            ):
                if matrix is not None:
                    row = matrix.to_list()[place]
                    total += _dot([enclose(put(e)) for e in row], values)
            found.append(total)
        for output in model.outputs:
            of_states = [enclose(put(e)) for e in output.of_states]
            of_inputs = [enclose(put(e)) for e in output.of_inputs]
            found.append(_dot(of_states, states) + _dot(of_inputs, inputs))
        return found

    def _begun(self, k: int, enclose: Enclose) -> list[arb]:
        """The states at the beginning of an interval, after impulses there."""
        done = max((j for j, bits in self._kept if 0 <= j <= k and bits == ctx.prec), default=-1)
        for j in range(done + 1, k + 1):
            if j:
                at = enclose(self.setting.instants[j])
                states = self._carried(j - 1, self._kept[j - 1, ctx.prec], at, enclose)
            else:
                states = self.initial(enclose)
            blow = self.setting.blow(j).to_list()
            self._kept[j, ctx.prec] = [x + enclose(b) for x, (b,) in zip(states, blow, strict=True)]
        return self._kept[k, ctx.prec]

    def _carried(self, k: int, states: list[arb], t: arb, enclose: Enclose) -> list[arb]:
        """The states at t, from those at the beginning of the interval."""
        setting, n = self.setting, len(states)
        begin = enclose(setting.instants[k])
        blocks = [
            (place, *_system(wave, begin, enclose))
            for place in range(len(setting.model.inputs))
            for wave in setting.waves_on(place, k)
        ]
        size = n + sum(len(start) for _, _, start, _ in blocks)
        whole = arb_mat(size, size)
        a = self._matrix(setting.model.reduction.matrix, enclose)
        for i in range(n):
            for j in range(n):
                whole[i, j] = a[i, j]
        values = list(states)
        matrix = setting.model.reduction.input_matrix
        fed = [] if matrix is None else matrix.to_list()
        for place, own, start, read in blocks:
            first = len(values)
            for j, weight in enumerate(read):
                for i, row in enumerate(fed):
                    whole[i, first + j] = enclose(setting.put(row[place])) * weight
                for i in range(len(start)):
                    whole[first + i, first + j] = own[i, j]
            values += start
        return _applied(_exponential(whole, t - begin), values)[:n]

    def _matrix(self, matrix: FieldMatrix, enclose: Enclose) -> arb_mat:
        rows = [[enclose(self.setting.put(e)) for e in row] for row in matrix.to_list()]
        return arb_mat(rows)


def wave_value(wave: Wave, t: arb, enclose: Enclose) -> arb:
    """Return a ball for a wave at an instant, from its formula."""
    s = t - enclose(wave.origin)
    value = enclose(wave.amount) * (enclose(wave.rate) * s).exp()
    for _ in range(wave.power):  # a power of a ball around 0 is not finite in FLINT
        value = value * s
    if wave.kernel == "one":
        return value
    angle = enclose(wave.frequency) * s
    return value * (angle.cos() if wave.kernel == "cos" else angle.sin())


def _system(wave: Wave, begin: arb, enclose: Enclose) -> tuple[arb_mat, list[arb], list[arb]]:
    """V, v at the beginning, and the row c with wave = c v.

    v are the functions s^j e^(as) cos(ws) and sin(ws), j up to the power of the wave.
    """
    a, w, count = enclose(wave.rate), enclose(wave.frequency), wave.power + 1
    circular = wave.kernel != "one"
    width = 2 if circular else 1
    matrix = arb_mat(width * count, width * count)
    start, read = [], [arb(0)] * (width * count)
    s = begin - enclose(wave.origin)
    scale = (a * s).exp()
    for j in range(count):
        first = width * j
        start += [scale * (w * s).cos(), scale * (w * s).sin()] if circular else [scale]
        for i in range(width):
            matrix[first + i, first + i] = a
            if j:
                matrix[first + i, first + i - width] = arb(j)
        if circular:
            matrix[first, first + 1], matrix[first + 1, first] = -w, w
        scale = scale * s
    place = width * wave.power + (1 if wave.kernel == "sin" else 0)
    read[place] = enclose(wave.amount)
    return matrix, start, read


def _exponential(matrix: arb_mat, t: arb) -> arb_mat:
    value = acb_mat(matrix * t).exp()
    return arb_mat(value.nrows(), value.ncols(), [e.real for e in value.entries()])


def _applied(matrix: arb_mat, values: Sequence[arb]) -> list[arb]:
    column = matrix * arb_mat(len(values), 1, list(values))
    return [column[i, 0] for i in range(len(values))]


def _dot(weights: Sequence[arb], values: Sequence[arb]) -> arb:
    return sum((w * v for w, v in zip(weights, values, strict=True)), arb(0))
