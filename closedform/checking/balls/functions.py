"""Functions of complex balls, and why a formula can have no value as a number."""

from __future__ import annotations

from collections.abc import Callable

from flint import acb, arb

from closedform.errors import InputError

__all__ = [
    "NoValueError",
    "SizeMismatchError",
    "UnknownNameError",
    "apply_function",
    "power",
]


class NoValueError(InputError):
    """A formula, or a part of it, that stands for no number: `what` it is and `why` not."""

    def __init__(self, what: str, why: str) -> None:
        super().__init__(what, why)
        self.what, self.why = what, why

    def __str__(self) -> str:
        return f"{self.what} has no value here: {self.why}"


class UnknownNameError(NoValueError):
    """A name that nothing gives a value to: `name`."""

    def __init__(self, name: str) -> None:
        super().__init__(f"the name {name}", "no number is known for it; declare or define it")
        self.name = name


class SizeMismatchError(NoValueError):
    """Matrices that cannot be joined: `left` and `right` are rows and columns of each."""

    def __init__(self, what: str, left: tuple[int, int], right: tuple[int, int]) -> None:
        sizes = f"{left[0]}×{left[1]} and {right[0]}×{right[1]}"
        super().__init__(what, f"the sizes {sizes} do not fit; transpose or reorder a factor")
        self.left, self.right = left, right


def power(base: acb, exponent: acb) -> acb:
    """Return base^exponent, the principal value; whole exponents by multiplication.

    FLINT's power of a ball with the midpoint 0 is not finite, which its products are.
    """
    if not exponent.is_exact():
        return base**exponent
    if exponent == acb(0.5):
        return base.sqrt()
    whole = exponent.unique_fmpz()
    if whole is None or abs(whole) > 10_000:
        return base**exponent
    result = acb(1)
    for bit in bin(abs(int(whole)))[2:]:
        result = result * result
        if bit == "1":
            result = result * base
    return result if whole >= 0 else 1 / result


def apply_function(function: str, arguments: list[acb]) -> acb:
    """Return a function of numbers at balls, the principal value where there are several.

    A step is 1 from 0 on, and [0, 1] where the ball does not tell the side; `delta` is 0 away
    from 0.  Functions of real numbers (step, min, atan2, ...) want arguments that may be real.

    Raises:  NoValueError for a wrong count of arguments, or an argument that is not real.
    """
    if function in _PLAIN and len(arguments) == 1:
        return acb(_PLAIN[function](arguments[0]))
    if function in _REAL and len(arguments) == 1:
        return acb(_REAL[function](_real(function, arguments[0])))
    if function in ("min", "max") and arguments:
        reals = [_real(function, z) for z in arguments]
        best = reals[0]
        for other in reals[1:]:
            best = best.min(other) if function == "min" else best.max(other)
        return acb(best)
    if function == "atan2" and len(arguments) == 2:
        return acb(arb.atan2(*(_real(function, z) for z in arguments)))
    raise NoValueError(f"{function} of {len(arguments)} arguments", "it is no function of these")


def _real(function: str, value: acb) -> arb:
    if not value.imag.contains(0):
        raise NoValueError(function, "its argument is not a real number")
    return value.real


def _step(x: arb) -> arb:
    if not x.is_finite():
        return arb.nan()
    if x >= 0:
        return arb(1)
    return arb(0) if x < 0 else arb(0.5, 0.5)


def _sign(x: arb) -> arb:
    if not x.is_finite():
        return arb.nan()
    if x == 0:
        return arb(0)
    if x > 0:
        return arb(1)
    return arb(-1) if x < 0 else arb(0, 1)


def _delta(x: arb) -> arb:
    return arb(0) if x > 0 or x < 0 else arb.nan()


def _factorial(z: acb) -> acb:
    return (z + 1).gamma()


_PLAIN: dict[str, Callable[[acb], acb | arb]] = {
    "exp": acb.exp,
    "sin": acb.sin,
    "cos": acb.cos,
    "tan": acb.tan,
    "cot": acb.cot,
    "sec": acb.sec,
    "csc": acb.csc,
    "sinh": acb.sinh,
    "cosh": acb.cosh,
    "tanh": acb.tanh,
    "coth": acb.coth,
    "asin": acb.asin,
    "acos": acb.acos,
    "atan": acb.atan,
    "asinh": acb.asinh,
    "acosh": acb.acosh,
    "atanh": acb.atanh,
    "ln": acb.log,
    "log10": lambda z: z.log() / arb(10).log(),
    "sqrt": acb.sqrt,
    "abs": abs,
    "norm": abs,
    "det": lambda z: z,
    "trace": lambda z: z,
    "transpose": lambda z: z,
    "inverse": lambda z: 1 / z,
    "re": lambda z: z.real,
    "im": lambda z: z.imag,
    "arg": acb.arg,
    "conj": acb.conjugate,
    "factorial": _factorial,
}
"""Functions of one complex number; those of matrices take it as a matrix of one entry."""
_REAL: dict[str, Callable[[arb], arb]] = {"sign": _sign, "step": _step, "delta": _delta}
