"""e^(At) from its exact form, evaluated in certified numbers, against another route to it.

It is compared with the matrix exponential of ball arithmetic, and its determinant with
e^(tr(A) t): both are found from A alone, without eigenvalues.  To evaluate the exact form
takes the isolated roots of its factors; a wrong root would show as a wrong entry.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from fractions import Fraction

from flint import acb_mat, arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of
from closedform.response.response import Response
from closedform.verification.comparison import (
    AGREED,
    DIGITS,
    START_BITS,
    Finding,
    Pair,
    check_of,
    compared,
    listed,
)
from closedform.verification.record import Check

__all__ = ["References", "ball_check", "determinant_ball_check", "trial_times"]


def trial_times(response: Response) -> tuple[Fraction, ...]:
    """Return three instants: 1/3, 1 and 7 times a power of 2 near 1/|lambda|, lambda largest."""
    with ctx.workprec(64):
        roots = [z for f in response.spectrum.factors for z in f.roots.enclosures()]
        largest = max((abs(z).mid() for z in roots), key=float)
    mantissa, exponent = largest.man_exp()
    order = int(mantissa).bit_length() + int(exponent) if mantissa else 0
    unit = Fraction(2) ** -order
    return (unit / 3, unit, unit * 7)


@dataclass(frozen=True)
class References:
    """e^(At) by the scaling and Taylor series of acb_mat, kept by instant and precision."""

    response: Response
    times: tuple[Fraction, ...]
    _kept: dict[tuple[Fraction, int], arb_mat] = field(default_factory=dict, repr=False)

    def at(self, t: Fraction) -> arb_mat:
        """Return balls for e^(At) at FLINT's current precision."""
        if (t, ctx.prec) not in self._kept:
            scaled = self.response.field.enclose_matrix(self.response.matrix) * ball_of(t)
            value = acb_mat(scaled).exp()
            entries = [e.real for e in value.entries()]
            self._kept[t, ctx.prec] = arb_mat(value.nrows(), value.ncols(), entries)
        return self._kept[t, ctx.prec]


def ball_check(response: Response, references: References) -> Check:
    """e^(At) evaluated from its exact form, against the exponential of ball arithmetic."""
    n = response.matrix.shape[0]
    places = {f"entry {(i + 1, k + 1)}": (i, k) for i in range(n) for k in range(n)}

    def finding(t: Fraction) -> Finding:
        def evaluate(names: Sequence[str]) -> Iterator[Pair]:
            found, expected = response.exponential.enclosure(ball_of(t)), references.at(t)
            return ((found[places[name]], expected[places[name]]) for name in names)

        return compared(places, evaluate, where=f" at time {t}")

    return check_of(
        "e^(At), numbers",
        map(finding, references.times),
        f"agree with the matrix exponential of ball arithmetic {AGREED} "
        f"at the times {listed(references.times)}",
    )


def determinant_ball_check(response: Response, times: tuple[Fraction, ...]) -> Check:
    """The determinant of e^(At) against e^(tr(A) t), both to significant digits.

    Not essential: the same is proved exactly by `identities.determinant_check`.
    """
    n = response.matrix.shape[0]

    def finding(t: Fraction) -> Finding:
        def evaluate(_: Sequence[str]) -> list[Pair]:
            diagonal = [response.field.enclose(response.matrix[i, i].element) for i in range(n)]
            expected = (sum(diagonal, arb(0)) * ball_of(t)).exp()
            return [(response.exponential.enclosure(ball_of(t)).det(), expected)]

        # elimination loses about this much with every row
        bits = START_BITS + 32 * n
        return compared(
            ["the determinant"], evaluate, where=f" at time {t}", bits=bits, places=None
        )

    return check_of(
        "det e^(At), numbers",
        map(finding, times),
        f"agree to {DIGITS} significant digits at the times {listed(times)}",
        essential=False,
    )
