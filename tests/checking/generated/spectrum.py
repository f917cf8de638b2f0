"""The lines about the matrix, its polynomial, its eigenvalues and eigenvectors."""
# ruff: noqa: FBT001, FBT003, PLR0915

from __future__ import annotations

from random import Random

from tests.checking.generated import forms, reference
from tests.checking.generated.cases import (
    Chain,
    columns_matrix,
    jordan,
    jordan_exponential,
)
from tests.checking.generated.forms import F, add, mul, name, power
from tests.checking.generated.lines import Line
from tests.checking.generated.sheet import Sheet
from tests.checking.generated.surds import (
    ONE,
    ZERO,
    Surd,
    column,
    inverse,
    surd,
    times,
)
from tests.checking.generated.writing import Writer

__all__ = ["SpectrumSheet"]

LAMBDA = name("lambda")


class SpectrumSheet(Sheet):
    """A derivation with the lines about the spectrum."""

    def matrix_line(self) -> None:
        """A = ..."""
        a = self.case.matrix
        mine, what = self.slipping("matrix", a, lambda m: m == a)
        judge = reference.matrix_judge(lambda m: reference.close(m, times(a, Surd.number), 1e-18))
        form = self.writer().matrix(mine)
        self.put("matrix", Line("matrix", (self.a_name(),), (form,), judge), slipped=what)

    def polynomial_line(self) -> None:
        """The characteristic polynomial, in one of its forms."""
        rng, case = self.rng, self.case
        true = _polynomial(self.case.chains)
        mine, what = self.slipping("polynomial", true, lambda c: c == true)
        z = self.pen.spectral
        i = rng.choice(("I", r"\mathbf{I}", r"\mathrm{I}", "I_" + str(case.size)))
        a = self.a_name()
        left, sign = rng.choice(
            (
                (rf"\det({z} {i}-{a})", 1),
                (rf"\left|{z} {i}-{a}\right|", 1),
                (f"p({z})", 1),
                (rf"\chi({z})", 1),
                (rf"\det\left({a}-{z} {i}\right)", (-1) ** case.size),
                ("", 1),
            )
        )
        writer = self.writer()
        if not what and mine == true and rng.random() < 0.4:
            form = self._factored(writer)
        else:
            terms = [
                writer.scaled(c, (power(LAMBDA, k),) if k else ())
                for k, c in reversed(list(enumerate(mine)))
                if not c.is_zero
            ]
            form = add(*terms)
        if sign == -1:
            form = forms.neg(form) if form.op != "add" else add(*(forms.neg(t) for t in form.args))
        tail = "=0" if rng.random() < 0.4 or not left else ""
        judge = reference.polynomial_judge(case, sign)
        stated = not left
        line = Line("characteristic polynomial", (left,), (form,), judge, tail=tail, stated=stated)
        self.put("polynomial", line, slipped=what)

    def _factored(self, writer: Writer) -> F:
        factors, done = [], set()
        for chain in self.case.chains:
            rate = chain.rate
            if rate in done:
                continue
            count = sum(len(c.columns) for c in self.case.chains if c.rate == rate)
            done |= {rate, rate.conjugate}
            if rate.imag.is_zero:
                root = writer.real(-rate)
                factor = LAMBDA if rate.is_zero else add(LAMBDA, root)
            else:
                square = rate.imag * rate.imag
                shifted = power(
                    LAMBDA if rate.real.is_zero else add(LAMBDA, writer.real(-rate.real)), 2
                )
                factor = add(shifted, writer.real(square))
            factors.append(power(factor, count))
        return mul(*factors)

    def eigenvalue_line(self) -> None:
        """The eigenvalues, in the order of the chains."""
        rng = self.rng
        true = [c.rate for c in self.chains for _ in c.columns]
        mine, what = self.slipping(
            "eigenvalues", list(true), lambda m: sorted(map(_key, m)) == sorted(map(_key, true))
        )
        rounded = any(x.d != 1 for x in mine) and rng.random() < 0.4
        writer = self.writer(rounded=rounded)
        letter = self.pen.spectral if self.pen.spectral != "s" else "s"
        lefts, values, counts, k = [], [], [], 0
        while k < len(mine):
            x = mine[k]
            paired = (
                k + 1 < len(mine)
                and not x.imag.is_zero
                and x.imag.sign > 0
                and mine[k + 1] == x.conjugate
            ) or (
                k + 1 < len(mine)
                and x.imag.is_zero
                and x.b > 0
                and mine[k + 1] == surd(x.a, -x.b, 0, 0, x.d)
            )
            same = 1
            while k + same < len(mine) and mine[k + same] == x:
                same += 1
            if paired and rng.random() < 0.7:
                lefts.append(rf"{letter}_{{{k + 1},{k + 2}}}")
                self.paired.append(k + 1)
                values.append(writer.pair(x))
                counts.append(1)
                k += 2
                continue
            if same > 1:
                style = rng.random()
                if style < 0.5:
                    left = "=".join(f"{letter}_{k + 1 + m}" for m in range(same))
                else:
                    left = f"{letter}_{{{','.join(str(k + 1 + m) for m in range(same))}}}"
                lefts.append(left)
                values.append(writer.complex(x))
                counts.append(same)
                k += same
                continue
            lefts.append(f"{letter}_{k + 1}")
            values.append(writer.complex(x))
            counts.append(1)
            k += 1
        base = reference.list_judge([x.number() for x in true])

        def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
            full = tuple(m for m, n in zip(members, counts, strict=True) for _ in range(n))
            return base(full, exact)

        head = tail = ""
        self.indexed = True
        once = all(n == 1 for n in counts) and not any(f.op == "pm" for f in values)
        if once and len(values) > 1 and rng.random() < 0.25:
            self.indexed = False
            if rng.random() < 0.5 or rounded:
                lefts = ["\\lambda"] * len(values)
            else:
                head, tail = rng.choice(((r"\sigma(A)=\{", r"\}"), (r"\lambda\in\{", r"\}")))
                lefts = [""] * len(values)
        line = Line(
            "eigenvalues",
            tuple(lefts),
            tuple(values),
            judge,
            signs=(r"\approx",) if rounded and rng.random() < 0.7 else ("=",),
            gap=", "
            if head
            else rng.choice((r",\quad ", ", ", r",\ ", r";\ ", r",\; ", r"\qquad ")),
            head=head,
            tail=tail,
        )
        self.put("eigenvalues", line, slipped=what)
        if what and self.carry and not self.real_form:
            self._rebuilt(mine)

    def _rebuilt(self, rates: list[Surd]) -> None:
        """Go on with eigenvalues that are wrong: J, e^(Jt) and what follows from these."""
        at, chains = 0, []
        for chain in self.chains:
            chains.append(Chain(rates[at], chain.columns))
            at += len(chain.columns)
        self.p, self.j = columns_matrix(self.chains), jordan(chains)
        self.exp_j = jordan_exponential(chains)
        self.q = inverse(self.p)
        self.kept = (self.p, jordan(self.chains), jordan_exponential(self.chains))
        self._after_exp_j()

    def vector_lines(self) -> None:
        """Eigenvectors and chains, one to a line."""
        rng, at = self.rng, 0
        letter = rng.choice(("v", "v", "u", r"\mathbf{v}", r"\xi", "q", r"\vec{v}"))
        if letter.strip("\\") in self.case.states or letter[0] in "".join(self.case.states):
            letter = "v" if "v" not in self.case.states else r"\xi"
        for n, chain in enumerate(self.chains):
            for k, vector in enumerate(chain.columns):
                at += 1
                stated = rng.random() < 0.5 or k > 0
                known = stated or self.indexed
                own = self.chains[n : n + 1] if known else self.chains[n:]
                if at in self.paired and not stated:
                    own = self.chains[n : n + 2]
                judge = reference.vector_judge(self.case, [c.rate.number() for c in own], k + 1)

                def holds(v, judge=judge) -> bool:
                    return judge((Writer(Random(0)).matrix(column(v)),), True)[0]

                mine, what = self.slipping("vector", vector, holds)
                if k and not what and rng.random() < 0.3:
                    continue
                form = self.writer().matrix(column(mine))
                says = "eigenvector" if k == 0 else "generalized eigenvector"
                line = Line(
                    says,
                    (f"{letter}_{at}",),
                    (form,),
                    judge,
                    of=_typed(chain.rate, "j" if "i" in self.case.states else "i"),
                    stated=stated,
                    strict=k == 0,
                )
                self.put("vector", line, slipped=what)
                if what and self.carry and not self.real_form:
                    columns = [list(c) for c in zip(*self.p, strict=True)]
                    if tuple(columns[at - 1]) == tuple(vector):
                        columns[at - 1] = list(mine)
                        try:
                            self._with_p(tuple(zip(*columns, strict=True)))
                        except ZeroDivisionError:
                            self.carry = False


def _key(x: Surd) -> tuple:
    return (x.a, x.b, x.c, x.e)


def _polynomial(chains: tuple[Chain, ...]) -> list[Surd]:
    """Return the coefficients of the characteristic polynomial, the constant first."""
    result = [ONE]
    for chain in chains:
        for _ in chain.columns:
            shifted = [ZERO, *result]
            for k, c in enumerate(result):
                shifted[k] = shifted[k] - chain.rate * c
            result = shifted
    return result


def _typed(x: Surd, unit: str) -> str:
    """Return a number as it is typed."""
    parts = [f"({x.a})"]
    for factor, what in ((x.b, f"sqrt({x.d})"), (x.c, unit), (x.e, f"sqrt({x.d})*{unit}")):
        if factor:
            parts.append(f"({factor})*{what}")
    return " + ".join(parts)
