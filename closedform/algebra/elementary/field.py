"""The field of closed forms in which hand derivations and true formulas are compared."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from closedform.algebra.elementary import functions, substitution
from closedform.algebra.elementary.closed_form import ClosedForm, Number
from closedform.algebra.elementary.context import Context
from closedform.algebra.elementary.signs import PolynomialSign
from closedform.algebra.elementary.sums import Terms

__all__ = ["Element", "ElementaryField"]


@dataclass(frozen=True, eq=False, slots=True)
class Element(ClosedForm):
    """A function of time in an `ElementaryField`, in general a constant."""

    field: ElementaryField

    def like(self, above: Terms, below: Terms | None) -> Element:
        """Return another element of the field, a quotient in lowest terms."""
        return Element(self.context, above, below, self.field)

    def at(self, instant: Element | Number) -> Element:
        """Return the value with something else, in general a constant, for the time.

        Raises ZeroDivisionError at a pole.
        """
        return substitution.at_time(self, self.field.element(instant))

    def shifted(self, delay: Element | Number) -> Element:
        """Return the function of t + delay."""
        return substitution.at_time(self, self.field.t + delay)

    def substituted(self, values: Mapping[str, Element]) -> Element:
        """Return the element with others in the place of names.

        Signs that were taken for the names must hold for what comes in their place.
        """
        return substitution.substituted(self, values)

    def coefficients(self, name: str) -> tuple[Element, ...]:
        """Return the coefficients of the powers of a name, lowest first, empty for zero.

        Raises NotElementaryError if it is no polynomial in the name.
        """
        return substitution.coefficients(self, name)


class ElementaryField:
    """Quotients of sums of c t^k exp(lambda t + alpha) over constants with square roots.

    `names` are real parameters; `sign` gives the sign of a polynomial in them on their whole
    domain (exponents in the order of `names`), None where it has none there; without it no
    sign is known.  `samples` are points of the domain.  Other names may come at any time by
    `name`; they are real, and no sign of theirs is known.  Roots, logarithms and angles are
    adjoined as they are met, so the form of an element (but not its value, nor equality)
    depends on what was asked before.

    All functions are the principal values.  They raise NotElementaryError for what is not in
    the field, or takes a sign that is not known, and ZeroDivisionError where they have no value.
    """

    def __init__(
        self,
        names: Sequence[str] = (),
        sign: PolynomialSign | None = None,
        samples: Sequence[Mapping[str, Fraction]] = (),
    ) -> None:
        self._context = Context(names, sign or (lambda _: None), samples)
        tower = self._context.tower
        self.zero = Element(self._context, {}, None, self)
        self.one, self.i, self.pi = map(self.zero.of, (tower.one, tower.i, tower.pi))
        self.t = self.zero.time

    def grant(self, products: int) -> None:
        """Let so many products of constants be worked out from now on.

        Beyond, operations raise NotElementaryError: what takes longer is not decided.
        """
        self._context.sums.left = products

    @property
    def granted(self) -> int:
        """How many products of constants may still be worked out."""
        return max(0, self._context.sums.left)

    @property
    def e(self) -> Element:
        """The number 2.71828…."""
        return self.exp(self.one)

    def number(self, value: Number) -> Element:
        """Return a rational number."""
        return self.zero.of(value)

    def name(self, name: str) -> Element:
        """Return a name as an element; one that is new is a real quantity without known sign."""
        tower = self._context.tower
        return self.zero.of(tower.generator(self._context.index(name)))

    def element(self, value: Element | Number) -> Element:
        """Return a number as an element, and an element itself."""
        return value if isinstance(value, Element) else self.number(value)

    # Functions

    def sqrt(self, value: Element | Number) -> Element:
        """Return the principal square root of a constant, or of a single term."""
        return functions.square_root(self.element(value))

    def root(self, value: Element | Number, degree: int) -> Element:
        """Return the principal root; degrees that are no power of 2 where it is exact."""
        return functions.root(self.element(value), degree)

    def exp(self, value: Element | Number) -> Element:
        """Return e^x for x = a t + b."""
        return functions.exponential(self.element(value))

    def ln(self, value: Element | Number) -> Element:
        """Return the natural logarithm of a constant, or of a single real exponential."""
        return functions.logarithm(self.element(value))

    def sin(self, value: Element | Number) -> Element:
        """Return the sine."""
        turned = self.i * self.element(value)
        return (self.exp(turned) - self.exp(-turned)) / (2 * self.i)

    def cos(self, value: Element | Number) -> Element:
        """Return the cosine."""
        turned = self.i * self.element(value)
        return (self.exp(turned) + self.exp(-turned)) / 2

    def tan(self, value: Element | Number) -> Element:
        """Return the tangent."""
        return self.sin(value) / self.cos(value)

    def sinh(self, value: Element | Number) -> Element:
        """Return the hyperbolic sine."""
        value = self.element(value)
        return (self.exp(value) - self.exp(-value)) / 2

    def cosh(self, value: Element | Number) -> Element:
        """Return the hyperbolic cosine."""
        value = self.element(value)
        return (self.exp(value) + self.exp(-value)) / 2

    def tanh(self, value: Element | Number) -> Element:
        """Return the hyperbolic tangent."""
        return self.sinh(value) / self.cosh(value)

    def atan(self, value: Element | Number) -> Element:
        """Return the arctangent of a real constant."""
        return functions.arctangent(self.element(value))

    def atan2(self, y: Element | Number, x: Element | Number) -> Element:
        """Return the angle of the point (x, y), above -pi and up to pi."""
        return functions.direction(self.element(x), self.element(y))

    def asin(self, value: Element | Number) -> Element:
        """Return the arcsine of a real constant between -1 and 1."""
        return self.pi / 2 - self.acos(value)

    def acos(self, value: Element | Number) -> Element:
        """Return the arccosine of a real constant between -1 and 1."""
        return functions.arccosine(self.element(value))

    def asinh(self, value: Element | Number) -> Element:
        """Return the inverse hyperbolic sine of a real constant."""
        value = self.element(value)
        return self.ln(value + self.sqrt(value * value + 1))

    def acosh(self, value: Element | Number) -> Element:
        """Return the inverse hyperbolic cosine of a real constant from 1 on."""
        value = self.element(value)
        return self.ln(value + self.sqrt(value - 1) * self.sqrt(value + 1))

    def atanh(self, value: Element | Number) -> Element:
        """Return the inverse hyperbolic tangent of a real constant between -1 and 1."""
        value = self.element(value)
        return (self.ln(1 + value) - self.ln(1 - value)) / 2

    def abs(self, value: Element | Number) -> Element:
        """Return the absolute value of a constant, or of a single term without t before it."""
        return functions.modulus(self.element(value))

    def arg(self, value: Element | Number) -> Element:
        """Return the angle of a complex constant."""
        return functions.direction(self.re(value), self.im(value))

    def conj(self, value: Element | Number) -> Element:
        """Return the complex conjugate, for real time and names."""
        return self.element(value).conjugate()

    def re(self, value: Element | Number) -> Element:
        """Return the real part."""
        value = self.element(value)
        return (value + value.conjugate()) / 2

    def im(self, value: Element | Number) -> Element:
        """Return the imaginary part."""
        value = self.element(value)
        return (value - value.conjugate()) / (2 * self.i)
