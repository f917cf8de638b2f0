"""Numbers, functions of time and matrices as formulas, in several equivalent forms."""
# ruff: noqa: ARG005

from __future__ import annotations

from fractions import Fraction
from math import gcd, lcm
from random import Random

import mpmath

from tests.checking.generated import forms
from tests.checking.generated.forms import F, T, add, div, exp, fn, mul, neg, num, power, sqrt
from tests.checking.generated.surds import ONE, ZERO, Surd, surd
from tests.checking.generated.waves import RealTerm, Wave

__all__ = ["Writer"]


class Writer:
    """Turns values into formulas; `digits` is None for exact ones."""

    def __init__(self, rng: Random, digits: int | None = None) -> None:
        self.rng = rng
        self.digits = digits

    def real(self, x: Surd) -> F:
        """Return a real number."""
        return self.scaled(x, ())

    def scaled(self, x: Surd, factors: tuple[F, ...]) -> F:
        """Return a real number times factors."""
        if x.is_zero:
            return num(0)
        if x.sign < 0:
            return neg(self.scaled(-x, factors))
        if self.digits is not None and not (x == ONE and factors):
            return mul(self.decimal(x), *factors)
        if x.is_rational:
            return self._fraction(x.a, factors)
        below = lcm(x.a.denominator, x.b.denominator)
        if not x.a:
            root = sqrt(num(x.d))
            if below != 1 and self.rng.random() < 0.5:
                return div(mul(num(x.b.numerator), root, *factors), num(below))
            if x.b.numerator == 1 and x.d % below == 0 and self.rng.random() < 0.3:
                return mul(div(num(x.d // below), root), *factors)
            return mul(num(x.b), root, *factors)
        if below != 1 and self.rng.random() < 0.6:
            inner = self._pair(surd(x.a * below, x.b * below, 0, 0, x.d))
            if factors and self.rng.random() < 0.4:
                return div(mul(inner, *factors), num(below))
            return mul(div(inner, num(below)), *factors)
        return mul(self._pair(x), *factors)

    def _pair(self, x: Surd) -> F:
        first, second = num(x.a), mul(num(x.b), sqrt(num(x.d)))
        if x.a > 0 or x.b < 0 or self.rng.random() < 0.5:
            return add(first, second)
        return add(second, first)

    def _fraction(self, x: Fraction, factors: tuple[F, ...]) -> F:
        if x.denominator == 1:
            return mul(num(x), *factors)
        if self._is_decimal(x) and self.rng.random() < 0.25:
            return mul(self._exact_decimal(x), *factors)
        if factors and self.rng.random() < 0.4:
            return div(mul(num(x.numerator), *factors), num(x.denominator))
        return mul(num(x), *factors)

    @staticmethod
    def _is_decimal(x: Fraction) -> bool:
        return 1000 % x.denominator == 0

    @staticmethod
    def _exact_decimal(x: Fraction) -> F:
        text = f"{float(x):.3f}".rstrip("0")
        return F("dec", (text, num(x)))

    def decimal(self, x: Surd) -> F:
        """Return a positive number to the digits of the writer; integers as they are."""
        if x.is_rational and x.a.denominator == 1 and x.a < 1000:
            return num(x.a)
        if x.is_rational and self._is_decimal(x.a) and x.a < 100:
            return self._exact_decimal(x.a)
        assert self.digits is not None
        with mpmath.workdps(60):
            return forms.dec(forms.rounded(x.number().real, self.digits), forms.number(x))

    def complex(self, x: Surd) -> F:
        """Return a complex number."""
        if x.imag.is_zero:
            return self.real(x.real)
        imag = self._imaginary(x.imag)
        return imag if x.real.is_zero else add(self.real(x.real), imag)

    def _imaginary(self, x: Surd) -> F:
        if x.sign < 0:
            return neg(self._imaginary(-x))
        if self.digits is not None:
            return mul(self.decimal(x), forms.I) if x != ONE else forms.I
        if x.is_rational:
            return self.scaled(x, (forms.I,))
        if self.rng.random() < 0.5:
            return mul(forms.I, self.real(x))
        return self.scaled(x, (forms.I,))

    def pair(self, x: Surd) -> F:
        """Return a number and its conjugate with plus-or-minus; also a ± b sqrt(d)."""
        if not x.imag.is_zero:
            imag = self._imaginary(x.imag if x.imag.sign > 0 else -x.imag)
            return F("pm", (self.real(x.real), imag))
        root = surd(0, abs(x.b), 0, 0, x.d)
        return F("pm", (self.real(surd(x.a)), self.real(root)))

    # functions of time

    def rate(self, x: Surd) -> F:
        """Return a real rate times the time."""
        return self.scaled(x, (T,))

    def basis(self, term: RealTerm, *, decay: bool = True) -> tuple[F, ...]:
        """Return the factors t^k and e^(sigma t) of a term."""
        found = [power(T, term.k)] if term.k else []
        if decay and not term.sigma.is_zero:
            found.append(exp(self.rate(term.sigma)))
        return tuple(found)

    def waves(self, term: RealTerm) -> list[tuple[Surd, tuple[F, ...]]]:
        """Return the parts of a term: numbers with the factors cos and sin."""
        if term.omega.is_zero:
            return [(term.cosine, ())]
        angle = self.rate(term.omega)
        both = [(term.cosine, (fn("cos", angle),)), (term.sine, (fn("sin", angle),))]
        return [(c, f) for c, f in both if not c.is_zero]

    def terms(self, terms: list[RealTerm], *, decay: bool = True) -> list[F]:
        """Return terms one by one."""
        return [
            self.scaled(c, (*self.basis(term, decay=decay), *factors))
            for term in terms
            for c, factors in self.waves(term)
        ]

    def function(self, wave: Wave, way: str = "") -> F:
        """Return a real function of time in one of the ways of `WAYS`."""
        terms = list(wave.real_terms())
        if not terms:
            return num(0)
        self.rng.shuffle(terms)
        terms.sort(key=lambda t: self.rng.random() < 0.3)
        way = way or self.rng.choice(("expanded", "grouped", "common"))
        if way == "grouped":
            return self._grouped(terms)
        if way == "common" and self.digits is None:
            return self._common(terms)
        return add(*self.terms(terms))

    def _grouped(self, terms: list[RealTerm]) -> F:
        found: list[F] = []
        for sigma in dict.fromkeys(t.sigma for t in terms):
            own = self.terms([t for t in terms if t.sigma == sigma], decay=False)
            if len(own) == 1 or sigma.is_zero:
                found += (
                    own if sigma.is_zero else self.terms([t for t in terms if t.sigma == sigma])
                )
            else:
                decay = exp(self.rate(sigma))
                inner = add(*own)
                found.append(mul(*((decay, inner) if self.rng.random() < 0.7 else (inner, decay))))
        return add(*found)

    def _common(self, terms: list[RealTerm]) -> F:
        parts = [c for t in terms for c in (t.cosine, t.sine) if not c.is_zero]
        if any(not c.is_rational for c in parts) or len(parts) < 2:
            return add(*self.terms(terms))
        below = lcm(*(c.a.denominator for c in parts))
        above = gcd(*(int(c.a * below) for c in parts)) or 1
        factor = Fraction(above, below)
        if factor == 1:
            return add(*self.terms(terms))
        inner = self._scaled_terms(terms, surd(1 / factor))
        body = self._grouped(inner) if self.rng.random() < 0.4 else add(*self.terms(inner))
        if self.rng.random() < 0.2:
            return div(body, num(below)) if above == 1 else mul(num(factor), body)
        return mul(num(factor), body)

    @staticmethod
    def _scaled_terms(terms: list[RealTerm], factor: Surd) -> list[RealTerm]:
        return [RealTerm(t.k, t.sigma, t.omega, t.cosine * factor, t.sine * factor) for t in terms]

    def hyperbolic(self, wave: Wave) -> F | None:
        """Return c1 e^(at) + c2 e^(bt) by cosh and sinh, None if it is not of that form."""
        terms = wave.real_terms()
        if len(terms) != 2 or any(t.k or not t.omega.is_zero for t in terms):
            return None
        two = surd(2)
        one, other = sorted(terms, key=lambda t: float(t.sigma.number().real), reverse=True)
        middle, half = (one.sigma + other.sigma) / two, (one.sigma - other.sigma) / two
        parts = [
            self.scaled(c, (fn(which, self.rate(half)),))
            for c, which in (
                (one.cosine + other.cosine, "cosh"),
                (one.cosine - other.cosine, "sinh"),
            )
            if not c.is_zero
        ]
        if middle.is_zero:
            return add(*parts)
        return mul(exp(self.rate(middle)), add(*parts))

    def amplitude(self, wave: Wave) -> F | None:
        """Return a single wave by amplitude and phase, None if it is none."""
        terms = wave.real_terms()
        if len(terms) != 1 or terms[0].omega.is_zero or terms[0].k:
            return None
        (term,) = terms
        a, b = term.cosine, term.sine
        if not (a.is_rational and b.is_rational) or a.is_zero or b.is_zero:
            return None
        square = a.a * a.a + b.a * b.a
        exact = sqrt(num(square))
        root = self._root(square)
        cosine = self.rng.random() < 0.6
        above, below = (b, a) if cosine else (a, b)
        sign = -1 if cosine else 1
        angle = F("atan2", (forms.number(above), forms.number(below)))
        if below.a > 0 and self.digits is None:
            ratio = abs(above.a / below.a)
            phase = fn("arctan", num(ratio))
            sign *= 1 if above.a > 0 else -1
        else:
            with mpmath.workdps(60):
                size = forms.value(angle, {})
                sign *= 1 if size > 0 else -1
                positive = angle if size > 0 else F("neg", (angle,))
                digits = self.digits or 4
                phase = forms.dec(forms.rounded(abs(size), digits), positive)
        if self.digits is not None:
            with mpmath.workdps(60):
                worth = forms.value(exact, {})
                root = forms.dec(forms.rounded(worth, self.digits), exact)
        inside = add(self.rate(term.omega), phase if sign > 0 else neg(phase))
        return mul(root, *self.basis(term), fn("cos" if cosine else "sin", inside))

    @staticmethod
    def _root(square: Fraction) -> F:
        above, below = square.numerator * square.denominator, square.denominator
        outside = 1
        for k in range(2, int(above**0.5) + 1):
            while above % (k * k) == 0:
                above //= k * k
                outside *= k
        front = Fraction(outside, below)
        if above == 1:
            return num(front)
        return mul(num(front), sqrt(num(above)))

    def exponentials(self, wave: Wave) -> F:
        """Return a function by complex exponentials."""
        found = []
        for (k, rate), c in wave.terms.items():
            factors = [power(T, k)] if k else []
            if not rate.is_zero:
                factors.append(exp(self.complex_rate(rate)))
            if c.imag.is_zero:
                found.append(self.scaled(c.real, tuple(factors)))
            elif c.real.is_zero:
                imag = self._imaginary(c.imag)
                found.append(mul(imag, *factors))
            else:
                found.append(mul(self.complex(c), *factors))
        return add(*found) if found else num(0)

    def complex_rate(self, rate: Surd) -> F:
        """Return a complex rate times the time."""
        if rate.imag.is_zero:
            return self.rate(rate.real)
        if rate.real.is_zero:
            imag = self._imaginary(rate.imag)
            return mul(imag, T)
        return mul(self.complex(rate), T)

    # matrices

    def matrix(self, matrix, entry=None) -> F:
        """Return a matrix of numbers, with a common factor in front or not."""
        entry = entry or self.complex
        flat = [x for row in matrix for x in row]
        rational = all(isinstance(x, Surd) and x.is_rational for x in flat)
        if rational and self.digits is None and self.rng.random() < 0.6:
            below = lcm(*(x.a.denominator for x in flat))
            if below != 1:
                inner = [[x * surd(below) for x in row] for row in matrix]
                front = num(Fraction(1, below))
                return mul(front, forms.rows_of([[entry(x) for x in row] for row in inner]))
        return forms.rows_of([[entry(x) for x in row] for row in matrix])

    def transition(self, matrix) -> F:
        """Return a matrix of real functions, with a factor in front or not."""
        if len(matrix) == 1 and self.rng.random() < 0.7:
            return self.function(matrix[0][0])
        flat = [w for row in matrix for w in row if not w.is_zero]
        front: list[F] = []
        inner = matrix
        rates = {t.sigma for w in flat for t in w.real_terms()}
        if len(rates) == 1 and ZERO not in rates and self.rng.random() < 0.7:
            (sigma,) = rates
            shift = Wave({(0, -sigma): ONE})
            inner = [[w * shift for w in row] for row in inner]
            front.append(exp(self.rate(sigma)))
        parts = [
            c
            for row in inner
            for w in row
            for t in w.real_terms()
            for c in (t.cosine, t.sine)
            if not c.is_zero
        ]
        if all(c.is_rational for c in parts) and self.rng.random() < 0.5 and self.digits is None:
            below = lcm(*(c.a.denominator for c in parts))
            if below != 1:
                inner = [[w.scaled(surd(below)) for w in row] for row in inner]
                front.insert(0, num(Fraction(1, below)))
        body = forms.rows_of(
            [
                [self.function(w, self.rng.choice(("expanded", "grouped"))) for w in row]
                for row in inner
            ]
        )
        return mul(*front, body) if front else body
