"""The equations that printed numbers must fulfil, one for each sampled value of a formula."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from flint import acb, arb, arb_mat, ctx

from closedform.checking.balls.enclosing import Quantities, enclose_written
from closedform.checking.digits.instants import Point
from closedform.checking.digits.slopes import Plan, planned
from closedform.notation.written.tree import Written

__all__ = ["Equations", "System", "compared"]


@dataclass(frozen=True, slots=True)
class System:
    """Equations at values of the unknowns: real, one row of `slopes` for each of `residuals`.

    `sizes` are those of the numbers whose difference each residual is.
    """

    residuals: list[arb]
    slopes: list[list[arb]]
    sizes: list[arb]

    @property
    def is_finite(self) -> bool:
        """Whether all numbers are."""
        rows = (*self.slopes, self.residuals)
        return all(number.is_finite() for row in rows for number in row)

    def holds(self, bits: int) -> bool:
        """Whether every residual may be 0 and is known to be smaller than 2^-bits of its size."""
        return all(
            r.contains(0) and r.abs_upper() <= size * arb(2) ** -bits
            for r, size in zip(self.residuals, self.sizes, strict=True)
        )


@dataclass(frozen=True, slots=True)
class Equations:
    """claimed(u) - true = 0 at points, u one unknown for each group of printed numbers."""

    groups: tuple[tuple[int, ...], ...]
    pairs: tuple[tuple[Plan, acb], ...]

    @property
    def count(self) -> int:
        """How many unknowns there are."""
        return len(self.groups)

    def at(self, unknowns: Sequence[arb]) -> System:
        """Return real and imaginary parts at values of the unknowns.

        A part that is exactly 0, as imaginary ones of real formulas are, is left out.
        """
        u = [acb(0)] * sum(map(len, self.groups))
        for group, unknown in zip(self.groups, unknowns, strict=True):
            for i in group:
                u[i] = acb(unknown)
        system = System([], [], [])
        for plan, true in self.pairs:
            value, slopes = plan(u)
            residual = value - true
            size = abs(true).max(abs(value))
            size = arb(size.abs_upper())
            if true.contains(0):  # nothing to measure by: differences of numbers of about 1
                size = size.max(arb(1))
            for part in (_real, _imaginary):
                row = [
                    sum((part(slopes[i]) for i in group if i in slopes), arb(0))
                    for group in self.groups
                ]
                rest = part(residual)
                if part is _real or not (rest.is_zero() and all(s.is_zero() for s in row)):
                    system.residuals.append(rest)
                    system.slopes.append(row)
                    system.sizes.append(size)
        return system

    def scaled(self, system: System, scale: Sequence[arb]) -> tuple[arb_mat, arb_mat]:
        """Return slopes and residuals with midpoints for balls, each row divided by its largest.

        Columns are multiplied by the scale of their unknown.  A row of nothing but noise, as
        that of the imaginary part of a formula that is real by cancelling, becomes 0.
        """
        rows, rests = [], []
        noise = arb(2) ** -(ctx.prec // 2)
        for residual, slopes, size in zip(
            system.residuals, system.slopes, system.sizes, strict=True
        ):
            row = [(slope * s).mid() for slope, s in zip(slopes, scale, strict=True)]
            largest = max((abs(entry) for entry in row), default=arb(0))
            if largest <= noise * size and abs(residual) <= noise * size:
                rows.append([arb(0)] * self.count)
                rests.append([arb(0)])
                continue
            largest = largest.max(abs(residual.mid()) * noise)
            rows.append([(entry / largest).mid() for entry in row])
            rests.append([(residual.mid() / largest).mid()])
        return arb_mat(rows), arb_mat(rests)


def compared(
    claimed: Written, true: Written, names: Quantities, places: Sequence[Point]
) -> tuple[tuple[Plan, acb], ...]:
    """Return a formula in its unknowns and the true value, at points where that is finite.

    Raises NoValueError as `enclose_written` does.
    """
    pairs = []
    for point in places:
        environment = names.environment(point)
        value = enclose_written(true, environment)
        if value.is_finite():
            pairs.append((planned(claimed, environment), value))
    return tuple(pairs)


Part = Callable[[acb], arb]


def _real(z: acb) -> arb:
    return z.real


def _imaginary(z: acb) -> arb:
    return z.imag
