"""The frame of a derivation: its objects, what is left free, and where a slip is made."""
# ruff: noqa: FBT003, ARG002

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from itertools import pairwise
from random import Random

from tests.checking.generated import reference
from tests.checking.generated.cases import (
    Case,
    Chain,
    columns_matrix,
    conjugated,
    jordan,
    jordan_exponential,
)
from tests.checking.generated.lines import Line
from tests.checking.generated.object_slips import SLIPS
from tests.checking.generated.pen import Pen
from tests.checking.generated.surds import (
    ONE,
    ZERO,
    Matrix,
    column,
    inverse,
    product,
    surd,
    times,
)
from tests.checking.generated.waves import Wave, constant
from tests.checking.generated.writing import Writer

__all__ = ["Sheet", "is_real"]


class Sheet:
    """A derivation in the making.

    `slip` is the stage at which something is to be got wrong, or empty; with `carry` what
    comes after is worked out from that.
    """

    def __init__(self, rng: Random, case: Case, pen: Pen, slip: str = "", *, carry: bool) -> None:
        self.rng, self.case, self.pen = rng, case, pen
        self.slip, self.carry, self.made = slip, carry, ""
        self.lines: list[Line] = []
        self.indexed = False
        self.chained = False
        self.paired: list[int] = []
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
                    for w, v in pairwise(columns)
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

    def _after_exp_j(self) -> None:
        self.exp_a = conjugated(self.p, self.exp_j, self.q)
        self._after_exp_a()

    def _after_exp_a(self) -> None:
        if not self.case.drive and self.exp_a:
            free = product(self.exp_a, times(column(self.case.initial), constant), Wave())
            found = tuple(row[0] for row in free)
            if all(map(is_real, found)):
                self.solution = found

    def _with_p(self, p: Matrix) -> None:
        self.q = inverse(p)
        self.p = p
        self._after_exp_j()

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


def is_real(w: Wave) -> bool:
    return all(
        (k, x.conjugate) in w.terms and w.terms[k, x.conjugate] == c.conjugate
        for (k, x), c in w.terms.items()
    )
