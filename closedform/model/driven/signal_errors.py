"""What can be wrong with an input as a function of time."""

from __future__ import annotations

from closedform.errors import Place
from closedform.model.errors import ModelError
from closedform.notation.errors import quoted

__all__ = [
    "DivisionByTimeError",
    "EdgeValueError",
    "ImpulseDerivativeError",
    "ImpulseProductError",
    "NameInInputError",
    "NonlinearArgumentError",
    "OutsideConstantError",
    "PowerOfTimeError",
    "SignalError",
    "SignalSizeError",
    "StepArgumentError",
    "UnknownDirectionError",
    "UnknownOrderError",
    "UnreadFunctionError",
]

READ = "polynomials in {time}, exp, sin, cos, sinh and cosh of a*{time} + b, and products of these"


class SignalError(ModelError):
    """A function of the time that cannot be used; `found` is the term, `time` the variable."""

    def __init__(self, place: Place, found: str, time: str, *facts: object) -> None:
        super().__init__(place, found, time, *facts)
        self.found, self.time = found, time

    @property
    def _read(self) -> str:
        return READ.format(time=self.time)


class NonlinearArgumentError(SignalError):
    """A function whose argument is not linear in the time."""

    def _paragraph(self) -> str:
        return (
            f"the argument of {quoted(self.found)} is not of the form a*{self.time} + b with "
            f"constant a and b; read are {self._read}"
        )


class DivisionByTimeError(SignalError):
    """A denominator that depends on the time, and is not an exponential."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} divides by a function of the time that is not a single "
            f"exponential; read are {self._read}. Such a load has no closed form here: state it "
            "in pieces by functions that are read"
        )


class PowerOfTimeError(SignalError):
    """A power of, or with, a function of the time whose exponent is no number 0, 1, 2, ..."""

    def __init__(self, place: Place, found: str, time: str, limit: int) -> None:
        super().__init__(place, found, time, limit)
        self.limit = limit

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is not read: a function of the time may have a whole exponent "
            f"up to {self.limit}, which does not depend on the time; write exp(r*{self.time}) for "
            "growth at a rate r"
        )


class UnreadFunctionError(SignalError):
    """A function that is not read, or not of the time."""

    def _paragraph(self) -> str:
        return f"{quoted(self.found)} is not read as a function of the time; read are {self._read}"


class NameInInputError(SignalError):
    """A name in an input that is neither a parameter nor the time; `kind` says what it is."""

    def __init__(self, place: Place, found: str, time: str, kind: str) -> None:
        super().__init__(place, found, time, kind)
        self.kind = kind

    def _paragraph(self) -> str:
        what = f"is {self.kind}" if self.kind else "has no meaning here"
        return (
            f"{quoted(self.found)} {what}: an input is a function of the time '{self.time}' and of "
            "parameters alone; what depends on an unknown belongs into the equations, where it "
            "has to be linear"
        )


class OutsideConstantError(SignalError):
    """A function that needs a constant, `constant`, which is no element of the field."""

    def __init__(self, place: Place, found: str, time: str, constant: str) -> None:
        super().__init__(place, found, time, constant)
        self.constant = constant

    def _paragraph(self) -> str:
        t = self.time
        how = "make the constant a parameter"
        if self.constant.startswith(("cos", "sin")):
            how = (
                f"make parameters of the sine and the cosine of a phase: exp(-a*{t})*sin(w*{t} + "
                f"phi) is exp(-a*{t})*(C*sin(w*{t}) + S*cos(w*{t})) with C for cos(phi) and S "
                "for sin(phi)"
            )
        return (
            f"{quoted(self.found)} holds the constant {quoted(self.constant)}, which exact "
            "arithmetic cannot express in the numbers of the model; let all parts of a product "
            f"count the time from one instant, as in exp(-a*({t} - T))*sin(w*({t} - T)), or {how}"
        )


class SignalSizeError(SignalError):
    """A function with more terms, or of a higher degree in the time, than is worked with."""

    def __init__(self, place: Place, found: str, time: str, terms: int, degree: int) -> None:
        super().__init__(place, found, time, terms, degree)
        self.terms, self.degree = terms, degree

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} multiplies out to more than {self.terms} terms, or to a degree "
            f"above {self.degree} in {self.time}; each adds to the order of the model: state a "
            "simpler input"
        )


class StepArgumentError(SignalError):
    """A step or an impulse whose argument does not tell one instant."""

    def _paragraph(self) -> str:
        t = self.time
        return (
            f"the argument of {quoted(self.found)} does not change its sign at one known instant; "
            f"write step({t} - a), step(a - {t}) or delta({t} - a) with a constant a"
        )


class UnknownDirectionError(SignalError):
    """A step or an impulse in c*(t - a) with a factor c, `factor`, of unknown sign."""

    def __init__(self, place: Place, found: str, time: str, factor: str) -> None:
        super().__init__(place, found, time, factor)
        self.factor = factor

    def _paragraph(self) -> str:
        return (
            f"whether {quoted(self.found)} rises or falls hangs on the sign of "
            f"{quoted(self.factor)}, which is not known; write step({self.time} - a), or add a "
            f'condition such as "{self.factor} > 0"'
        )


class ImpulseProductError(SignalError):
    """An impulse times an impulse, or times a step at the same instant."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} has no meaning: an impulse is multiplied by something that "
            "jumps or strikes at the same instant; write the impulse with its amount, as in "
            f"D*delta({self.time} - a)"
        )


class UnknownOrderError(ModelError):
    """Two instants of which it is not known which comes first."""

    def __init__(self, place: Place, one: str, other: str) -> None:
        super().__init__(place, one, other)
        self.one, self.other = one, other

    def _paragraph(self) -> str:
        return (
            f"it is not known which of the instants {quoted(self.one)} and {quoted(self.other)} "
            f"comes first; state it in 'conditions', as \"{self.one} < {self.other}\""
        )


class EdgeValueError(SignalError):
    """A derivative that jumps by an amount that is no element of the field."""

    def __init__(self, place: Place, found: str, time: str, instant: str, constant: str) -> None:
        super().__init__(place, found, time, instant, constant)
        self.instant, self.constant = instant, constant

    def _paragraph(self) -> str:
        t = self.time
        return (
            f"the derivative {quoted(self.found)} has an impulse at {t} = {self.instant}, where "
            f"the input jumps, and its amount holds {quoted(self.constant)}, which exact "
            "arithmetic cannot express in the numbers of the model; let the input count the time "
            f"from that instant, as in exp(-a*({t} - T))*step({t} - T), or declare the derivative "
            "as an input of its own, written out"
        )


class ImpulseDerivativeError(SignalError):
    """The derivative of an impulse."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is the derivative of an impulse, which is not read; choose "
            "another unknown, so that the impulse itself drives the model"
        )
