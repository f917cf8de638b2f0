"""What a proof finds: two values that ought to agree, or a fault that needs no number."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal

from flint import acb, acb_mat, arb

from closedform.errors import RefutedError

__all__ = [
    "Comparison",
    "Fault",
    "Finding",
    "StatementRefutedError",
    "agreeing",
    "decimal_of",
    "number_in",
    "undecided",
    "whether",
]

_ACCURATE_BITS = 64
_NEGLIGIBLE = 200
"""A ball narrower than 2^-200 of the numbers compared is narrow even around zero."""


class StatementRefutedError(RefutedError):
    """A statement or a number of the derivation is not true as printed; nothing is issued."""

    def __init__(self, model: str, statement: str, reason: str) -> None:
        super().__init__(model, statement, reason)
        self.model, self.statement, self.reason = model, statement, reason

    def __str__(self) -> str:
        return (
            f"{self.model}: the derivation states what does not hold, so no write-up is issued: "
            f"{self.statement}: {self.reason}. This is a fault of the program, not of the model; "
            "please report it with the model."
        )


@dataclass(frozen=True, slots=True)
class Fault:
    """Something printed that is wrong, in words."""

    place: str
    reason: str


@dataclass(frozen=True, slots=True)
class Comparison:
    """Two balls of one number: as it is printed, and worked out on another way.

    `margin` is how far apart they may truly lie (half a unit in the last place of a
    decimal); `scale` is the size of what the number was made from.
    """

    place: str
    printed: acb
    expected: acb
    entry: tuple[int, int] | None = None
    margin: arb | None = None
    scale: arb | None = None

    @property
    def is_apart(self) -> bool:
        """Whether the two certainly differ."""
        if not (self.printed.is_finite() and self.expected.is_finite()):
            return False
        if self.margin is None:
            return not self.printed.overlaps(self.expected)
        return bool(abs(self.printed - self.expected) > self.margin)

    @property
    def has_no_value(self) -> bool:
        """Whether what is printed has no finite ball, as the root of a negative number has none."""
        return not self.printed.is_finite()

    @property
    def is_settled(self) -> bool:
        """Whether both balls are narrow, so that meeting means something."""
        if self.margin is not None:
            limit = self.margin / 128
            return bool(_radius(self.expected) <= limit and _radius(self.printed) <= limit)
        return self._is_narrow(self.printed) and self._is_narrow(self.expected)

    def _is_narrow(self, ball: acb) -> bool:
        if not ball.is_finite():
            return False
        if ball.rel_accuracy_bits() >= _ACCURATE_BITS:
            return True
        scale = arb(1) if self.scale is None else self.scale
        return bool(_radius(ball) <= scale * arb(2) ** -_NEGLIGIBLE)

    def __str__(self) -> str:
        if self.entry is None:
            return self.place
        return f"{self.place}, entry {self.entry}"


Finding = Comparison | Fault


def _radius(ball: acb) -> arb:
    if not ball.is_finite():
        return arb("inf")
    return max(ball.real.rad(), ball.imag.rad())


def whether(holds: bool, place: str, reason: str) -> Iterator[Finding]:  # noqa: FBT001  it reads as a sentence
    """Yield a fault unless something holds."""
    if not holds:
        yield Fault(place, reason)


def undecided(place: str) -> Comparison:
    """Return what only a finer look can tell."""
    return Comparison(place, acb(0), acb("nan"))


def agreeing(place: str, printed: acb_mat, expected: acb_mat) -> Iterator[Finding]:
    """Compare two matrices entry by entry."""
    rows, columns = printed.nrows(), printed.ncols()
    if (rows, columns) != (expected.nrows(), expected.ncols()):
        yield Fault(place, f"it is of the shape {rows} x {columns}")
        return
    for i in range(rows):
        for k in range(columns):
            yield Comparison(place, printed[i, k], expected[i, k], (i + 1, k + 1))


def decimal_of(
    place: str, text: str, expected: acb, digits: int, scale: arb | None = None
) -> Comparison:
    """Compare a decimal rounded to `digits` significant digits with the number it stands for.

    A decimal with fewer figures is taken for one that ends in zeros; "0" for zero itself.
    """
    mantissa, power = _read(text)
    printed = acb(number_in(text))
    if mantissa.is_zero():
        return Comparison(place, printed, expected, scale=scale)
    last = min(int(mantissa.as_tuple().exponent), mantissa.adjusted() - digits + 1)
    return Comparison(place, printed, expected, margin=arb(10) ** (last + power) / 2)


def number_in(text: str) -> arb:
    """Return a printed decimal as a ball."""
    mantissa, power = _read(text)
    sign, figures, exponent = mantissa.as_tuple()
    whole = arb(int("".join(map(str, figures))))
    return (-whole if sign else whole) * arb(10) ** (int(exponent) + power)


def _read(text: str) -> tuple[Decimal, int]:
    """The mantissa and the power of ten, which may be beyond what Decimal holds."""
    mantissa, _, power = text.partition("e")
    return Decimal(mantissa), int(power or 0)
