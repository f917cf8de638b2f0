"""Whole derivations for models without parameters: line after line, as people go about it."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from random import Random

from tests.checking.generated import forms, reference
from tests.checking.generated.cases import (
    Case,
    Chain,
    columns_matrix,
    conjugated,
    jordan,
    jordan_exponential,
)
from tests.checking.generated.forms import F, add, mul, name, power
from tests.checking.generated.lines import Line
from tests.checking.generated.object_slips import SLIPS, exponential_of
from tests.checking.generated.pen import Pen
from tests.checking.generated.surds import (
    ONE,
    ZERO,
    Matrix,
    Surd,
    column,
    inverse,
    product,
    surd,
    times,
)
from tests.checking.generated.waves import Wave, constant
from tests.checking.generated.writing import Writer

__all__ = ["Sheet"]

LAMBDA = name("lambda")


class Sheet:
    """A derivation in the making.

    `slip` is the stage at which something is to be got wrong, or empty; with `carry` what
    comes after is worked out from that.
    """

    def __init__(self, rng: Random, case: Case, pen: Pen, slip: str = "", *, carry: bool) -> None:
        self.rng, self.case, self.pen = rng, case, pen
        self.slip, self.carry, self.made = slip, carry, ""
        self.lines: list[Line] = []
        self.bold = pen.bold
        self.transition_at = reference.transition_at(case)
        self.chains = self._freed_chains()
        self.real_form = (
            case.kind in ("pair", "repeated pair", "quadratic", "second order")
            and any(not c.rate.imag.is_zero for c in self.chains)
            and rng.random() < 0.5
        )
        self.p, self.j, self.exp_j = self._canonical(self.chains)
        self.q = inverse(self.p)
        self.exp_a = case.transition
        self.solution = case.solution

    # freedoms

    def _freed_chains(self) -> tuple[Chain, ...]:
        """Return the chains in another order, rescaled, with what a chain leaves free."""
        rng, chains = self.rng, list(self.case.chains)
        pairs = [c for c in chains if c.rate.imag.sign > 0]
        singles = [c for c in chains if c.rate.imag.is_zero]
        groups: list[list[Chain]] = [[c] for c in singles]
        for chain in pairs:
            freed = self._freed(chain)
            both = [freed, self._conjugate(freed)]
            if rng.random() < 0.2:
                both.reverse()
            groups.append(both)
        rng.shuffle(groups)
        return tuple(
            self._freed(c) if c.rate.imag.is_zero else c for group in groups for c in group
        )

    @staticmethod
    def _conjugate(chain: Chain) -> Chain:
        columns = tuple(tuple(x.conjugate for x in v) for v in chain.columns)
        return Chain(chain.rate.conjugate, columns)

    def _freed(self, chain: Chain) -> Chain:
        rng = self.rng
        columns = list(chain.columns)
        factor = surd(rng.choice((1, 1, 1, -1, 2, -3, Fraction(1, 2))))
        if not chain.rate.imag.is_zero and rng.random() < 0.3:
            factor = factor * surd(rng.randint(1, 2), 0, rng.choice((1, -1)))
        if rng.random() < 0.6:
            parts = [y for v in columns for x in v for y in (x.a, x.b, x.c, x.e)]
            below = 1
            for y in parts:
                below *= y.denominator // _gcd(below, y.denominator)
            factor = factor * surd(below)
        if len(columns) > 1 and rng.random() < 0.3:
            extra = surd(rng.choice((1, -1, 2)))
            columns = [
                columns[0],
                *(
                    tuple(x + extra * y for x, y in zip(v, w, strict=True))
                    for w, v in zip(columns, columns[1:], strict=False)
                ),
            ]
        return Chain(chain.rate, tuple(tuple(x * factor for x in v) for v in columns))

    def _canonical(self, chains: tuple[Chain, ...]) -> tuple[Matrix, Matrix, tuple]:
        """Return P, J and e^(Jt), real if the derivation is."""
        p, j, e = columns_matrix(chains), jordan(chains), jordan_exponential(chains)
        if not self.real_form:
            if self.rng.random() < 0.15 and any(len(c.columns) > 1 for c in chains):
                order = self._lowered(chains)
                p, j, e = (self._permuted(m, order) for m in (p, j, e))
                p = tuple(tuple(row[k] for k in order) for row in columns_matrix(chains))
            return p, j, e
        mix = self._mix(chains)
        inverse_mix = inverse(mix)
        p = product(p, mix)
        j = product(product(inverse_mix, j), mix)
        return p, j, conjugated(inverse_mix, e, mix)

    @staticmethod
    def _lowered(chains: tuple[Chain, ...]) -> list[int]:
        order, at = [], 0
        for chain in chains:
            n = len(chain.columns)
            order += list(range(at + n - 1, at - 1, -1))
            at += n
        return order

    @staticmethod
    def _permuted(matrix, order: list[int]):
        return tuple(tuple(matrix[i][k] for k in order) for i in order)

    def _mix(self, chains: tuple[Chain, ...]) -> Matrix:
        """Return M with P M = [Re v, Im v, ...], or [Re v, -Im v]."""
        size = self.case.size
        rows = [[ZERO] * size for _ in range(size)]
        half, i_half = surd(Fraction(1, 2)), surd(0, 0, Fraction(1, 2))
        at, done = 0, set()
        to = 0
        places = {}
        for chain in chains:
            places[chain.rate] = at
            at += len(chain.columns)
        for chain in chains:
            if chain.rate in done:
                continue
            done |= {chain.rate, chain.rate.conjugate}
            one, other = places[chain.rate], places[chain.rate.conjugate]
            for k in range(len(chain.columns)):
                if chain.rate.imag.is_zero:
                    rows[one + k][to] = ONE
                    to += 1
                    continue
                rows[one + k][to] = rows[other + k][to] = half
                rows[one + k][to + 1], rows[other + k][to + 1] = -i_half, i_half
                to += 2
        return tuple(map(tuple, rows))

    # lines

    def put(self, stage: str, line: Line, *, slipped: str = "") -> None:
        """Add a line; it is wrong if its values are not true in numbers."""
        right, _ = line.judge(line.forms, True)
        line = replace(line, wrong=not right, slip=slipped, follows=not right and not slipped)
        self.lines.append(line.written(self.pen))

    def slipping(self, stage: str, mine, test):
        """Return a value with a slip if one is to be made here; `test` says whether it is true."""
        if self.slip != stage or self.made:
            return mine, ""
        choices = list(SLIPS[stage])
        self.rng.shuffle(choices)
        for what, change in choices:
            try:
                changed = change(mine, self)
            except ZeroDivisionError:
                continue
            if changed is not None and changed != mine and not test(changed):
                self.made = what
                return changed, what
        return mine, ""

    def writer(self, *, rounded: bool = False) -> Writer:
        """Return a writer of exact values, or of rounded ones."""
        return Writer(self.rng, self.rng.choice((3, 4, 5)) if rounded else None)

    def a_name(self) -> str:
        return r"\mathbf{A}" if self.bold else "A"

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

        line = Line(
            "eigenvalues",
            tuple(lefts),
            tuple(values),
            judge,
            signs=(r"\approx",) if rounded and rng.random() < 0.7 else ("=",),
            gap=rng.choice((r",\quad ", ", ", r",\ ", r";\ ", r",\; ", r"\qquad ")),
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

    def _after_exp_j(self) -> None:
        self.exp_a = conjugated(self.p, self.exp_j, self.q)
        self._after_exp_a()

    def _after_exp_a(self) -> None:
        if not self.case.drive and self.exp_a:
            free = product(self.exp_a, times(column(self.case.initial), constant), Wave())
            found = tuple(row[0] for row in free)
            if all(map(_is_real, found)):
                self.solution = found

    def vector_lines(self) -> None:
        """Eigenvectors and chains, one to a line."""
        rng, at = self.rng, 0
        letter = rng.choice(("v", "v", "u", r"\mathbf{v}", r"\xi", "q", r"\vec{v}"))
        if letter.strip("\\") in self.case.states or letter[0] in "".join(self.case.states):
            letter = "v" if "v" not in self.case.states else r"\xi"
        for chain in self.chains:
            for k, vector in enumerate(chain.columns):
                at += 1
                stated = rng.random() < 0.5 or k > 0
                known = stated or "eigenvalues" in self.planned
                own = [chain] if known else self.chains
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

    def _with_p(self, p: Matrix) -> None:
        self.q = inverse(p)
        self.p = p
        self._after_exp_j()

    def transformation_line(self) -> None:
        """P = ..."""
        told = "J" in self.planned
        judge = reference.transforms_judge(self.case, self.true_j if told else None)

        def holds(m: Matrix) -> bool:
            form = Writer(Random(0)).matrix(m)
            loose = reference.transforms_judge(self.case, None)
            return judge((form,), True)[0] or (not self.real_form and loose((form,), True)[0])

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
        rounded = self.rng.random() < 0.15 and not what
        writer = self.writer(rounded=rounded)
        real = all(_is_real(w) for row in mine for w in row)
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

    # the lines about solutions are in `tests.checking.generated.motion`

    @property
    def true_p(self) -> Matrix:
        return self.kept[0]

    @property
    def stated_p(self) -> Matrix:
        return self.p

    @property
    def true_j(self) -> Matrix:
        return self.kept[1]

    @property
    def true_exp_j(self):
        return self.kept[2]

    def begin(self, planned: tuple[str, ...]) -> None:
        """Fix what will be written, and keep the right objects."""
        self.planned = planned
        self.kept = (self.p, self.j, self.exp_j)
        self.letter = "P"


def _gcd(a: int, b: int) -> int:
    return _gcd(b, a % b) if b else a


def _key(x: Surd) -> tuple:
    return (x.a, x.b, x.c, x.e)


def _is_real(w: Wave) -> bool:
    return all(
        (k, x.conjugate) in w.terms and w.terms[k, x.conjugate] == c.conjugate
        for (k, x), c in w.terms.items()
    )


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
