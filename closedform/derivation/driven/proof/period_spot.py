"""What inputs that repeat add to a motion, followed from period to period."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

from flint import acb, acb_mat

from closedform.derivation.driven.proof.spot import Spot
from closedform.model.driven.signal import Repeat
from closedform.response.driven.periodic import one_period, repeating

__all__ = ["PeriodSpot", "periods_of", "total_at"]


def periods_of(spot: Spot) -> tuple[PeriodSpot, ...]:
    """Return what inputs that repeat add, for each period that they have."""
    return tuple(PeriodSpot(spot, repeat) for repeat in repeating(spot.model))


def total_at(spot: Spot, t: acb) -> list[acb]:
    """Return every row at an instant, with what inputs that repeat add."""
    rows = spot.rows_at(spot.place_at(t), t)
    for period in periods_of(spot):
        rows = [a + b for a, b in zip(rows, period.rows_at(t), strict=True)]
    return rows


@dataclass(frozen=True)
class PeriodSpot:
    """What the inputs of one way to repeat add from rest, followed period by period."""

    spot: Spot
    repeat: Repeat

    @cached_property
    def single(self) -> Spot:
        """The first period by itself."""
        one = one_period(self.spot.model, self.repeat)
        return replace(self.spot, period=one)

    @cached_property
    def length(self) -> acb:
        """The period."""
        return self.spot.element(self.repeat.period)

    @property
    def stretches(self) -> range:
        """The parts of a period by their places."""
        return range(len(self.single.instants) - 1)

    def left(self, n: int) -> acb_mat:
        """Return the state at the end of the n-th period, before anything strikes there.

        From one end to the next it is multiplied by e^(AT), and what a period with the blow
        before it leaves is added: powers of one matrix carry on a state with 1 below it.
        """
        size = self.spot.a.nrows()
        if not n:
            return acb_mat(size, 1)
        first = self.at_end(acb_mat(size, 1))
        carried = self._carrying ** (n - 1) * acb_mat([*first.tolist(), [acb(1)]])
        return acb_mat([[carried[i, 0]] for i in range(size)])

    @cached_property
    def _carrying(self) -> acb_mat:
        size = self.spot.a.nrows()
        moved, once = (self.spot.a * self.length).exp(), self._once()
        rows = [[*moved.tolist()[i], once[i, 0]] for i in range(size)]
        return acb_mat([*rows, [*[acb(0)] * size, acb(1)]])

    def _once(self) -> acb_mat:
        """The state at the end of a period from rest, with the blow of the one before."""
        return self.at_end(self.single.blow(len(self.single.instants) - 1))

    def before(self, n: int) -> acb_mat:
        """Return the state right before the start of the n-th period, and what ends the last."""
        if n == 1:
            return acb_mat(self.spot.a.nrows(), 1)
        return self.left(n - 1) + self.single.blow(len(self.single.instants) - 1)

    def at_end(self, before: acb_mat) -> acb_mat:
        """Return the state at the end of a period that begins so."""
        motion = self.single.motion_from(before)
        last = len(self.single.instants) - 1
        return self.single.carried(motion[last - 1], last - 1, self.single.instants[last])

    def begins(self) -> acb_mat:
        """Return the state at the end of a steady period: what a period leaves as it began."""
        n = self.spot.a.nrows()
        unit = acb_mat([[acb(int(i == k)) for k in range(n)] for i in range(n)])
        return (unit - (self.spot.a * self.length).exp()).solve(self._once())

    def in_period(self, before: acb_mat, place: int, local: acb) -> list[acb]:
        """Return every row at a local time of a period that begins so."""
        t = self.single.instants[0] + local
        state = self.single.carried(self.single.motion_from(before)[place], place, t)
        return self.single.rows_of(state, self.single.inputs_at(place, t))

    def rows_at(self, t: acb) -> list[acb]:
        """Return every row at an instant."""
        first = self.single.instants[0]
        nothing = acb_mat(max(len(self.spot.model.inputs), 1), 1)
        if bool(t.real < first.real):
            return self.single.rows_of(acb_mat(self.spot.a.nrows(), 1), nothing)
        n = _whole((t - first) / self.length) + 1
        count = self.repeat.count
        if count is not None and n > count:
            end = first + self.length * count
            state = self.left(count) + self.single.blow(len(self.single.instants) - 1)
            return self.single.rows_of((self.spot.a * (t - end)).exp() * state, nothing)
        local = t - first - self.length * (n - 1)
        place = min(self.single.place_at(first + local), self.stretches[-1])
        return self.in_period(self.before(n), place, local)


def _whole(value: acb) -> int:
    """The whole number below, or the one that a value may be itself."""
    nearest = int(value.real.mid().floor().unique_fmpz() or 0)
    return nearest + 1 if bool(value.real.contains(nearest + 1)) else nearest
