"""The lines about P, J and the exponentials."""
# ruff: noqa: FBT003

from __future__ import annotations

from random import Random

from tests.checking.generated import forms, reference
from tests.checking.generated.lines import Line
from tests.checking.generated.object_slips import exponential_of
from tests.checking.generated.sheet import is_real
from tests.checking.generated.spectrum import SpectrumSheet
from tests.checking.generated.surds import (
    Matrix,
    Surd,
    inverse,
    times,
)
from tests.checking.generated.writing import Writer

__all__ = ["CanonicalSheet"]


class CanonicalSheet(SpectrumSheet):
    """A derivation with the lines about P and J."""

    def transformation_line(self) -> None:
        """P = ..."""
        told = "J" in self.planned and self.planned.index("J") < self.planned.index("P")
        judge = reference.transforms_judge(self.case, self.true_j if told else None)

        def holds(m: Matrix) -> bool:
            form = Writer(Random(0)).matrix(m)
            return judge((form,), True)[0]

        mine, what = self.slipping("P", self.p, holds)
        letter = self.rng.choice(("P", "P", "T", "V", "S", r"\mathbf{P}"))
        if letter in self.case.states or letter in {s.split("_")[0] for s in self.case.states}:
            letter = "P"
        self.letter = letter
        form = self.writer().matrix(mine)
        if what and self.carry:
            try:
                self._with_p(mine)
            except ZeroDivisionError:
                self.carry = False
        self.put("P", Line("P", (letter,), (form,), judge), slipped=what)

    def inverse_line(self) -> None:
        """P^(-1) = ..."""
        true_q = inverse(self.stated_p)
        mine, what = self.slipping("P inverse", self.q, lambda m: m == true_q)
        if what and self.carry:
            self.q = mine
            self._after_exp_j()
        target = times(inverse(self.true_p), Surd.number)
        judge = reference.matrix_judge(lambda m: reference.close(m, target, 1e-18))
        form = self.writer().matrix(mine)
        self.put(
            "P inverse", Line("P inverse", (self.letter + "^{-1}",), (form,), judge), slipped=what
        )

    def canonical_line(self) -> None:
        """J = ..."""
        judge = reference.similar_judge(self.case)

        def holds(m: Matrix) -> bool:
            return judge((Writer(Random(0)).matrix(m),), True)[0]

        mine, what = self.slipping("J", self.j, holds)
        form = self.writer().matrix(mine)
        self.j_letter = self.rng.choice(("J", r"\mathbf{J}") if self.bold else ("J", "J"))
        if all(len(c.columns) == 1 for c in self.chains) and not self.real_form:
            self.j_letter = self.rng.choice(("J", r"\Lambda", "D"))
        if what and self.carry and not self.real_form:
            found = exponential_of(mine)
            if found is not None:
                self.j, self.exp_j = mine, found
                self._after_exp_j()
        self.put("J", Line("J", (self.j_letter,), (form,), judge), slipped=what)

    def block_exponential_line(self) -> None:
        """e^(Jt) = ..."""
        true = self.true_exp_j
        mine, what = self.slipping("exp J", self.exp_j, lambda m: m == true)
        if what and self.carry:
            self.exp_j = mine
            self._after_exp_j()
        writer = self.writer()
        if self.real_form or all(x.rate.imag.is_zero for x in self.chains):
            form = writer.transition(mine)
        else:
            form = forms.rows_of([[writer.exponentials(w) for w in row] for row in mine])
        judge = reference.function_judge(
            lambda t: tuple(tuple(w.at(t) for w in row) for row in true)
        )
        letter = getattr(self, "j_letter", "J")
        left = (
            f"{self.euler()}^{{{letter} t}}"
            if letter[0] == "\\"
            else f"{self.euler()}^{{{letter}t}}"
        )
        self.put("exp J", Line("exp J", (left,), (form,), judge), slipped=what)

    def euler(self) -> str:
        return self.pen.euler if self.pen.euler != r"\exp" else "e"

    def transition_line(self) -> None:
        """e^(At) = ..."""
        true = self.case.transition
        mine, what = self.slipping("exp A", self.exp_a, lambda m: m == true)
        if what and self.carry:
            self.exp_a = mine
            self._after_exp_a()
        a = self.a_name()
        left = self.rng.choice(
            (f"{self.euler()}^{{{a}t}}", f"{self.euler()}^{{{a} t}}", rf"\exp({a}t)", r"\Phi(t)")
        )
        told = {"P", "J"} <= set(self.planned) and self.chained
        if told and self.rng.random() < 0.3:
            j = self.j_letter + (" " if self.j_letter[0] == "\\" else "")
            left += f"={self.letter}{self.euler()}^{{{j}t}}{self.letter}^{{-1}}"
        rounded = self.rng.random() < 0.15 and not what
        writer = self.writer(rounded=rounded)
        real = all(is_real(w) for row in mine for w in row)
        if real:
            form = writer.transition(mine)
        else:
            form = forms.rows_of([[writer.exponentials(w) for w in row] for row in mine])
        line = Line(
            "exp A",
            (left,),
            (form,),
            reference.function_judge(self.transition_at),
            signs=(r"\approx",) if rounded else ("=",),
        )
        self.put("exp A", line, slipped=what)
