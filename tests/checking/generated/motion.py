"""The lines about motion: solutions in several forms, their derivatives, values and limits."""
# ruff: noqa: FBT001, ARG005, PLW0108

from __future__ import annotations

from fractions import Fraction

import mpmath

from tests.checking.generated import forms, reference
from tests.checking.generated.canonical import CanonicalSheet
from tests.checking.generated.forms import F, num
from tests.checking.generated.lines import Line
from tests.checking.generated.surds import column, product, times
from tests.checking.generated.waves import Wave, constant

__all__ = ["MotionSheet"]


class MotionSheet(CanonicalSheet):
    """A derivation with the lines about motion."""

    def left(self, state: str, *, at: str = "t") -> str:
        """Return a state or a derivative with its argument, as it is set."""
        rng, base = self.rng, state.rstrip("'")
        order = len(state) - len(base)
        text = self.case.names.get(base, base)
        argument = f"({at})" if at != "t" or rng.random() < 0.8 else ""
        if order == 0:
            return text + argument
        dots = {1: r"\dot", 2: r"\ddot"}[order]
        style = rng.random()
        if style < 0.4 or at != "t":
            return f"{dots}{{{text}}}{argument}" if style < 0.6 else text + "'" * order + argument
        if style < 0.7:
            return text + "'" * order + argument
        if order == 2:
            return rf"\frac{{d^2{text}}}{{dt^2}}"
        return (
            rf"\frac{{d{text}}}{{dt}}"
            if rng.random() < 0.5
            else rf"\frac{{\mathrm{{d}} {text}}}{{\mathrm{{d}}t}}"
        )

    def ways(self, wave: Wave, *, plain: bool = False) -> list[tuple[F, bool]]:
        """Return a few forms of a real function, each with whether it has rounded decimals.

        With `plain` the first of them is exact.
        """
        rng, found = self.rng, []
        for _ in range(rng.choice((1, 1, 2, 3))):
            rounded = rng.random() < 0.35 and not plain
            writer = self.writer(rounded=rounded)
            way = rng.choice(("", "", "amplitude", "hyperbolic", "exponentials"))
            form = None
            if way == "amplitude":
                form = writer.amplitude(wave)
            elif way == "hyperbolic":
                form = writer.hyperbolic(wave)
            elif way == "exponentials" and not rounded:
                form = writer.exponentials(wave)
            found.append((form if form is not None else writer.function(wave), rounded))
            plain = False
        return found

    def solution_lines(self) -> None:
        """The solution of every state or of some."""
        case = self.case
        states = [0] if case.second_order else list(range(case.size))
        if len(states) > 2 and self.rng.random() < 0.5:
            states = states[:2]
        solution = list(self.solution)
        for k in states:
            true = case.solution[k]
            mine, what = self.slipping("solution", solution[k], lambda w, true=true: w == true)
            if what and self.carry:
                solution[k] = mine
                self.solution = tuple(solution)
            judge = reference.function_judge(self._truth(true))
            spoken = mine
            for form, rounded in self.ways(spoken, plain=bool(what)):
                line = Line(
                    "solution",
                    (self.left(case.states[k]),),
                    (form,),
                    judge,
                    subject=case.states[k],
                    signs=self.sign(form),
                )
                self.put("solution", line, slipped=what)
                del rounded
                if what and not self.carry:
                    what, spoken = "", true
                    break
                what = ""

    def sign(self, form: F) -> tuple[str, ...]:
        """Return the sign before a form: decimals may stand behind an equals sign too."""
        whole = any(n.op == "dec" and "." not in n.args[0] for _, n in forms.nodes(form))
        about = form_rounded(form) and (whole or self.rng.random() < 0.7)
        return (r"\approx",) if about else ("=",)

    def equation_line(self) -> None:
        """One of the equations, as they are typed or by way of the matrix."""
        case, rng = self.case, self.rng
        writer = self.writer()
        k = rng.randrange(case.size) if not case.second_order else 1
        base = case.states[0] if case.second_order else case.states[k]
        highest = base + ("''" if case.second_order else "'")
        drive = case.drive[k] if case.drive else Wave()
        jets = [F("jet", (s, self.left(s).removesuffix("(t)"))) for s in case.states]
        top = F("jet", (highest, self.left(highest).removesuffix("(t)")))
        row = [(a, jet) for a, jet in zip(case.matrix[k], jets, strict=True) if not a.is_zero]
        force = () if drive.is_zero else (writer.function(drive, "expanded"),)
        if case.second_order:
            terms = [writer.scaled(-a, (jet,)) for a, jet in reversed(row)]
            sides = (forms.add(top, *terms), *(force or (num(0),)))
        else:
            terms = [writer.scaled(a, (jet,)) for a, jet in row]
            sides = (top, forms.add(*terms, *force) if terms or force else num(0))
        points = [
            {s: mpmath.mpf(n + 3 * i + 2) / 7 for i, s in enumerate(case.states)} for n in (1, 5)
        ]

        def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
            right, plain = True, False
            for point, t in zip(points, reference.INSTANTS, strict=False):
                values = [point[s] for s in case.states]
                rate = drive.at(t) + sum(
                    a.number() * x for a, x in zip(case.matrix[k], values, strict=True)
                )
                env = {**point, highest: rate, "t": t}
                one, other = (forms.value(m, env, exact=exact) for m in members)
                right = right and reference.close(one, other)
                plain = plain or reference.far(one, other)
            return right, plain

        self.put("equation", Line("equation", ("",), sides, judge, signs=("", "=")))

    def column_line(self) -> None:
        """x(t) = ..., the solution as a column."""
        case = self.case
        names = {s.split("_")[0].rstrip("0123456789") for s in case.states}
        if len(names) != 1 or case.second_order:
            return
        letter = rf"\mathbf{{{names.pop()}}}"
        truth = reference.function_judge(lambda t: tuple((w.at(t),) for w in case.solution))
        writer = self.writer()
        body = forms.rows_of([[writer.function(w)] for w in self.solution])
        self.put("column", Line("solution", (f"{letter}(t)",), (body,), truth, subject="vector"))

    @staticmethod
    def _truth(wave: Wave):
        return wave.at

    def derivative_line(self) -> None:
        """The derivative of the first state, or of the last that was solved for."""
        state = self.case.states[0]
        true = self.case.solution[0].derivative()
        self.slip_origin = self.solution[0]
        mine, what = self.slipping("derivative", self.solution[0].derivative(), lambda w: w == true)
        if what and self.carry and self.case.second_order:
            self.solution = (self.solution[0], mine)
        elif self.case.second_order:
            self.solution = (self.solution[0], self.solution[0].derivative())
        form = self.writer(rounded=self.rng.random() < 0.2).function(mine)
        line = Line(
            "solution",
            (self.left(state + "'"),),
            (form,),
            reference.function_judge(true.at),
            subject=state + "'",
            signs=self.sign(form),
        )
        self.put("derivative", line, slipped=what)

    def value_line(self) -> None:
        """A value at an instant: exact, rounded, or both."""
        rng, case = self.rng, self.case
        k = rng.randrange(case.size)
        if case.second_order and "derivative" not in self.planned:
            k = 0
        text, at = rng.choice(
            (
                ("1", num(1)),
                ("2", num(2)),
                ("0.5", num(Fraction(1, 2))),
                (r"\frac12", num(Fraction(1, 2))),
                (r"\tfrac{1}{4}", num(Fraction(1, 4))),
                (r"\ln 2", forms.fn("ln", num(2))),
                ("0", num(0)),
                (r"\pi", forms.PI),
                ("3", num(3)),
            )
        )
        with mpmath.workdps(50):
            instant = forms.value(at, {})
            true, own = case.solution[k].at(instant).real, self.solution[k].at(instant).real
        judge = reference.function_judge(lambda t: true)
        exact = _at(self.writer().function(self.solution[k]), at)
        values, signs = [], []
        if rng.random() < 0.4 or abs(own) < 1e-12 or text == "0":
            values.append(exact)
            signs.append("=")
        if (rng.random() < 0.8 or not values) and abs(own) > 1e-12:
            size = abs(own)
            digits = rng.choice((3, 4, 5))
            with mpmath.workdps(60):
                printed = forms.rounded(size, digits)
                if own * true > 0 and printed == forms.rounded(abs(true), digits):
                    size = abs(true)
                origin = F("at", (lambda env, size=size: size,))
                form = forms.dec(printed, origin)
            values.append(form if own > 0 else forms.neg(form))
            signs.append(r"\approx")
        tail = ""
        line = Line(
            "value",
            (self.left(case.states[k], at=text),),
            tuple(values),
            judge,
            subject=case.states[k],
            signs=tuple(signs),
            tail=tail,
        )
        self.put("value", line)

    def steady_line(self) -> None:
        """The limit of the first state, where there is one."""
        limit = self.case.solution[0].limit()
        own = self.solution[0].limit()
        state = self.case.states[0]
        text = self.case.names[state]
        if limit is None or own is None or any(c.rate.real.sign > 0 for c in self.case.chains):
            return
        lefts = [rf"\lim_{{t\to\infty}}{text}(t)", rf"{text}(\infty)"]
        if "_" not in text:
            lefts.append(rf"{text}_\infty")
        form = self.writer().real(own)
        line = Line(
            "steady state",
            (self.rng.choice(lefts),),
            (form,),
            reference.function_judge(lambda t: limit.number()),
            subject=state,
        )
        self.put("steady", line)

    def particular_line(self) -> None:
        """A particular solution of a driven equation of one unknown."""
        case = self.case
        if not case.particular or not (case.second_order or case.size == 1):
            return
        text = case.names[case.states[0]]
        if "_" in text:
            return
        true = case.particular[0]
        if true.is_zero:
            return
        mine, what = self.slipping("particular", true, lambda w: self._is_particular(w))
        if what and self.carry:
            start = [mine.at_zero(), mine.derivative().at_zero()][: case.size]
            rest = column([x - y for x, y in zip(case.initial, start, strict=True)])
            free = product(case.transition, times(rest, constant), Wave())
            mine_all = [mine, mine.derivative()][: case.size]
            self.solution = tuple(w + f[0] for w, f in zip(mine_all, free, strict=True))
        form = self.writer().function(mine)

        def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
            right = all(self._satisfies(m, exact=exact) for m in members)
            return right, not right

        left = self.rng.choice((rf"{text}_p(t)", rf"{text}_{{p}}(t)", rf"{text}_p"))
        line = Line("particular solution", (left,), (form,), judge, subject=case.states[0])
        self.put("particular", line, slipped=what)

    def _is_particular(self, w: Wave) -> bool:
        form = self.writer().function(w)
        return self._satisfies(form, exact=True)

    def _satisfies(self, form: F, *, exact: bool) -> bool:
        """Whether a function less the true solution satisfies the free equation."""
        coefficients = _coefficients(self.case)

        def rest(t):
            return forms.value(form, {"t": t}, exact=exact) - self.case.solution[0].at(t)

        with mpmath.workdps(40):
            for t in reference.INSTANTS[:2]:
                total = sum(c * mpmath.diff(rest, t, k) for k, c in enumerate(coefficients))
                if abs(total) > 1e-8:
                    return False
        return True


def _coefficients(case) -> list:
    a = case.matrix
    if case.size == 1:
        return [-a[0][0].number(), mpmath.mpf(1)]
    trace = a[0][0] + a[1][1]
    det = a[0][0] * a[1][1] - a[0][1] * a[1][0]
    return [det.number(), -trace.number(), mpmath.mpf(1)]


def _at(form: F, instant: F) -> F:
    return forms.put(form, lambda f: instant if f.op == "t" else None)


def form_rounded(form: F) -> bool:
    """Whether a formula has decimals that are not exact."""
    return any(n.op == "dec" and n.args[1].op != "num" for _, n in forms.nodes(form))
