"""Random models with everything about them known: built from P and J, or from their roots."""
# ruff: noqa: PLR0912, PLR1714

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from math import isqrt
from random import Random
from typing import Any

from tests.checking.generated.surds import (
    ONE,
    ZERO,
    Matrix,
    Surd,
    added,
    column,
    inverse,
    product,
    surd,
    times,
)
from tests.checking.generated.waves import Wave, block_exponential, constant, convolved, wave

__all__ = ["Case", "Chain", "case_of", "exponential"]


@dataclass(frozen=True)
class Chain:
    """An eigenvalue with the columns of a Jordan chain, the eigenvector first."""

    rate: Surd
    columns: tuple[tuple[Surd, ...], ...]


@dataclass(frozen=True)
class Case:
    """A model with its chains and its solution; `text` is what a model file would say."""

    kind: str
    text: dict[str, Any]
    states: tuple[str, ...]
    names: dict[str, str]
    matrix: Matrix
    initial: tuple[Surd, ...]
    chains: tuple[Chain, ...]
    transition: tuple[tuple[Wave, ...], ...]
    solution: tuple[Wave, ...]
    drive: tuple[Wave, ...] = ()
    particular: tuple[Wave, ...] = ()
    second_order: bool = False
    equations: tuple[str, ...] = field(default=())

    @property
    def size(self) -> int:
        """The number of states."""
        return len(self.states)


NAMINGS = (
    lambda n: [f"x_{k + 1}" for k in range(n)],
    lambda n: [f"x{k + 1}" for k in range(n)],
    lambda n: [f"h_{k + 1}" for k in range(n)],
    lambda n: [f"T_{k + 1}" for k in range(n)],
    lambda n: [f"N_{k + 1}" for k in range(n)],
    lambda n: ["x", "y", "z", "w"][:n],
    lambda n: ["u", "v", "w", "q"][:n],
    lambda n: ["i_L", "v", "q", "w"][:n],
    lambda n: ["theta", "omega", "phi", "q"][:n],
)
LETTERS = {"theta": r"\theta", "omega": r"\omega", "phi": r"\varphi", "psi": r"\psi"}


def latex_name(name: str, rng: Random) -> str:
    """Return a name as it is set."""
    letter, _, index = name.partition("_")
    if not index and len(name) > 1 and name[-1].isdigit():
        letter, index = name[:-1], name[-1]
    letter = LETTERS.get(letter, letter)
    if not index:
        return letter
    return (
        f"{letter}_{index}" if len(index) == 1 and rng.random() < 0.6 else f"{letter}_{{{index}}}"
    )


def small(rng: Random, low: int = -3, high: int = 3, *, fractions: bool = True) -> Fraction:
    """Return a small number."""
    value = Fraction(rng.randint(low, high))
    if fractions and rng.random() < 0.2:
        value += Fraction(1, rng.choice((2, 2, 4, 5, 10)))
    return value


def _integer_matrix(rng: Random, n: int) -> Matrix:
    """Return an invertible matrix of small integers with a small determinant."""
    while True:
        rows = tuple(tuple(surd(rng.randint(-2, 3)) for _ in range(n)) for _ in range(n))
        try:
            inner = inverse(rows)
        except ZeroDivisionError:
            continue
        if max(x.a.denominator for row in inner for x in row) <= 6:
            return rows


def exponential(chains: Sequence[Chain]) -> tuple[tuple[Wave, ...], ...]:
    """Return e^(At) as P e^(Jt) P^(-1)."""
    p = columns_matrix(chains)
    return conjugated(p, jordan_exponential(chains), inverse(p))


def columns_matrix(chains: Sequence[Chain]) -> Matrix:
    """Return P: the columns of the chains side by side."""
    columns = [c for chain in chains for c in chain.columns]
    return tuple(zip(*columns, strict=True))


def jordan_exponential(chains: Sequence[Chain]) -> tuple[tuple[Wave, ...], ...]:
    """Return e^(Jt)."""
    size = sum(len(chain.columns) for chain in chains)
    rows = [[Wave()] * size for _ in range(size)]
    at = 0
    for chain in chains:
        block = block_exponential(chain.rate, len(chain.columns))
        for i, row in enumerate(block):
            for j, entry in enumerate(row):
                rows[at + i][at + j] = entry
        at += len(block)
    return tuple(map(tuple, rows))


def jordan(chains: Sequence[Chain]) -> Matrix:
    """Return J."""
    size = sum(len(chain.columns) for chain in chains)
    rows = [[ZERO] * size for _ in range(size)]
    at = 0
    for chain in chains:
        for k in range(len(chain.columns)):
            rows[at + k][at + k] = chain.rate
            if k + 1 < len(chain.columns):
                rows[at + k][at + k + 1] = ONE
        at += len(chain.columns)
    return tuple(map(tuple, rows))


def conjugated(p: Matrix, waves, q: Matrix) -> tuple[tuple[Wave, ...], ...]:
    """Return p W q for a matrix of functions W."""
    left = times(p, constant)
    return product(product(left, waves, Wave()), times(q, constant), Wave())


def _from_blocks(rng: Random, n: int, kind: str) -> tuple[Matrix, tuple[Chain, ...]]:
    """Return A and its chains for real P and blocks of the kind."""
    p = _integer_matrix(rng, n)
    columns = tuple(zip(*p, strict=True))
    chains: list[Chain] = []
    at = 0
    if kind in ("pair", "repeated pair"):
        length = 2 if kind == "repeated pair" else 1
        rate = surd(small(rng, -3, 0), 0, rng.choice((1, 2, 3, 4, Fraction(1, 2), Fraction(3, 2))))
        vectors = []
        for _ in range(length):
            re, im = columns[at], columns[at + 1]
            vectors.append(tuple(x + y * surd(0, 0, 1) for x, y in zip(re, im, strict=True)))
            at += 2
        chains.append(Chain(rate, tuple(vectors)))
        chains.append(Chain(rate.conjugate, tuple(tuple(x.conjugate for x in v) for v in vectors)))
    if kind == "chain":
        length = rng.choice([2, 2, 3]) if n > 2 else 2
        chains.append(Chain(surd(small(rng, -3, 0)), columns[:length]))
        at = length
    used = {chain.rate for chain in chains}
    while at < n:
        rate = surd(small(rng, -5, 1 if rng.random() < 0.2 else 0))
        if rate not in used:
            used.add(rate)
            chains.append(Chain(rate, (columns[at],)))
            at += 1
    full = columns_matrix(chains)
    return product(product(full, jordan(chains)), inverse(full)), tuple(chains)


def _surd_chains(matrix: Matrix) -> tuple[Chain, ...] | None:
    """Return the chains of a 2 x 2 matrix by the quadratic formula; None if a root is too large."""
    (a, b), (c, d) = [[x.a for x in row] for row in matrix]
    half, disc = (a + d) / 2, (a - d) ** 2 / 4 + b * c
    top = abs(disc.numerator * disc.denominator)
    outside, inside = 1, top
    for k in range(2, isqrt(top) + 1):
        while inside % (k * k) == 0:
            inside //= k * k
            outside *= k
    size = Fraction(outside, disc.denominator)
    if inside > 40:
        return None
    root = (surd(size) if inside == 1 else surd(0, size, 0, 0, inside)) if disc else ZERO
    if disc < 0:
        root = root * surd(0, 0, 1)
    if not b and not c and a == d:
        return tuple(
            Chain(surd(a), (tuple(ONE if i == k else ZERO for i in range(2)),)) for k in range(2)
        )
    chains = []
    for sign in (1, -1) if disc else (1,):
        rate = surd(half) + root * surd(sign)
        vector = (surd(b), rate - surd(a)) if b else (rate - surd(d), surd(c))
        if not b and not c:
            vector = (ONE, ZERO) if rate == surd(a) else (ZERO, ONE)
        elif not b and vector[0].is_zero:
            vector = (ZERO, ONE)
        if disc:
            chains.append(Chain(rate, (vector,)))
            continue
        free = (ZERO, ONE) if b else (ONE, ZERO)
        image = [x - rate * free[i] for i, x in enumerate(_times(matrix, free))]
        chains.append(Chain(rate, (tuple(image), free)))
    return tuple(chains)


def _times(matrix: Matrix, vector: Sequence[Surd]) -> tuple[Surd, ...]:
    return tuple(row[0] for row in product(matrix, column(vector)))


KINDS = (
    *("real", "real", "pair", "chain", "repeated pair", "quadratic", "quadratic", "markov"),
    *("second order", "second order", "driven second order", "driven second order"),
    *("driven", "driven", "first order", "three compartments"),
)


def case_of(rng: Random) -> Case:
    """Return a random model."""
    while True:
        kind = rng.choice(KINDS)
        found = _case(kind, rng)
        if found is not None:
            return found


def _case(kind: str, rng: Random) -> Case | None:
    if kind in ("second order", "driven second order"):
        return _second_order(kind, rng)
    if kind in ("real", "chain", "pair", "repeated pair"):
        n = {"repeated pair": 4, "pair": rng.choice((2, 2, 3))}.get(kind, rng.choice((2, 2, 3)))
        matrix, chains = _from_blocks(rng, n, kind)
        if max(x.a.denominator for row in matrix for x in row) > 12:
            return None
    elif kind == "three compartments":
        built = _triangular(rng)
        if built is None:
            return None
        matrix, chains = built
        n = 3
    elif kind in ("driven", "quadratic", "markov"):
        n = 2
        matrix = _two_by_two(kind, rng)
        quadratic = _surd_chains(matrix)
        if quadratic is None:
            return None
        chains = quadratic
    else:
        n, rate = 1, surd(small(rng, -4, -1))
        matrix, chains = ((rate,),), (Chain(rate, ((ONE,),)),)
    names = rng.choice(NAMINGS)(n)
    if kind == "markov":
        initial = tuple(surd(x) for x in rng.choice(((1, 0), (0, 1))))
    else:
        initial = tuple(surd(small(rng, -3, 5)) for _ in range(n))
    if all(x.is_zero for x in initial):
        return None
    drive: tuple[Wave, ...] = ()
    typed: list[str] = [""] * n
    if kind == "driven" or (kind == "first order"):
        drive, typed = _drive(rng, n, chains)
    equations = [_first_order(names, k, row, typed[k]) for k, row in enumerate(matrix)]
    if drive or rng.random() < 0.5:
        text = {
            "title": kind,
            "equations": equations,
            "states": names,
            "initial": {s: str(x.a) for s, x in zip(names, initial, strict=True)},
        }
    else:
        text = {
            "title": kind,
            "states": names,
            "matrix": [[str(x.a) for x in row] for row in matrix],
            "initial": [str(x.a) for x in initial],
        }
    setting = {name: latex_name(name, rng) for name in names}
    return _solved(Case(kind, text, tuple(names), setting, matrix, initial, chains, (), (), drive))


def _triangular(rng: Random) -> tuple[Matrix, tuple[Chain, ...]] | None:
    """Return a cascade of three compartments with different rates."""
    k1, k2 = (Fraction(x) for x in rng.sample((1, 2, 3, 4, 5), 2))
    k3 = rng.choice((Fraction(0), Fraction(6)))
    matrix = (
        (surd(-k1), ZERO, ZERO),
        (surd(k1), surd(-k2), ZERO),
        (ZERO, surd(k2), surd(-k3)),
    )
    last = surd(k2 / (k3 - k2))
    first = surd(k1 / (k2 - k1))
    chains = (
        Chain(surd(-k1), ((ONE, first, first * surd(k2 / (k3 - k1))),)),
        Chain(surd(-k2), ((ZERO, ONE, last),)),
        Chain(surd(-k3), ((ZERO, ZERO, ONE),)),
    )
    return matrix, chains


def _two_by_two(kind: str, rng: Random) -> Matrix:
    if kind == "markov":
        p, q = (surd(Fraction(rng.randint(1, 9), rng.choice((1, 2, 10)))) for _ in range(2))
        return ((-p, q), (p, -q))
    while True:
        entries = [small(rng, -4, 3) for _ in range(4)]
        if entries[0] + entries[3] <= 0:
            return tuple(tuple(map(surd, entries[k : k + 2])) for k in (0, 2))


def _first_order(names: Sequence[str], k: int, row: Sequence[Surd], extra: str) -> str:
    terms = [f"({x.a})*{name}" for x, name in zip(row, names, strict=True) if not x.is_zero]
    return f"{names[k]}' = " + (" + ".join(terms + ([extra] if extra else [])) or "0")


def _drive(rng: Random, n: int, chains: Sequence[Chain]) -> tuple[tuple[Wave, ...], list[str]]:
    """Return an input for some of the equations, as functions and as typed."""
    drive, typed = [Wave()] * n, [""] * n
    for k in rng.sample(range(n), rng.choice((1, n))):
        drive[k], typed[k] = _input(rng, [chain.rate for chain in chains])
    return tuple(drive), typed


def _input(rng: Random, rates: Sequence[Surd]) -> tuple[Wave, str]:
    size = Fraction(rng.choice((1, 2, 3, 4, 6, 8, 10)))
    what = rng.choice(("constant", "exponential", "sine", "ramp", "resonance"))
    if what == "resonance":
        rate = rng.choice(list(rates))
        if rate.d != 1:
            what = "constant"
        elif rate.imag.is_zero and not rate.is_zero:
            return wave({(0, rate): surd(size)}), f"{size}*exp(({rate.a})*t)"
        elif rate.real.is_zero and not rate.is_zero:
            return _sine(size, abs(rate.c), rng)
        else:
            what = "sine"
    if what == "constant":
        return constant(surd(size)), str(size)
    if what == "ramp":
        return wave({(1, ZERO): surd(size)}), f"{size}*t"
    if what == "exponential":
        rate = rng.randint(1, 4)
        return wave({(0, surd(-rate)): surd(size)}), f"{size}*exp(-{rate}*t)"
    return _sine(size, Fraction(rng.randint(1, 4)), rng)


def _sine(size: Fraction, omega: Fraction, rng: Random) -> tuple[Wave, str]:
    up, down = surd(0, 0, omega), surd(0, 0, -omega)
    half = surd(size / 2)
    if rng.random() < 0.5:
        return wave({(0, up): half, (0, down): half}), f"{size}*cos(({omega})*t)"
    return (
        wave({(0, up): half * surd(0, 0, -1), (0, down): half * surd(0, 0, 1)}),
        f"{size}*sin(({omega})*t)",
    )


def _second_order(kind: str, rng: Random) -> Case | None:
    b = Fraction(rng.choice((0, 0, 1, 2, 2, 3, 4, 5, 6, Fraction(1, 2), Fraction(2, 5))))
    c = Fraction(rng.choice((1, 2, 4, 5, 8, 9, 10, 13, 16, 17, 25, Fraction(1, 4), 3, 6)))
    matrix = ((ZERO, ONE), (surd(-c), surd(-b)))
    chains = _surd_chains(matrix)
    if chains is None:
        return None
    name = rng.choice(("x", "y", "q", "theta", "w", "z", "u"))
    initial = tuple(surd(small(rng, -2, 4)) for _ in range(2))
    drive, typed = (), "0"
    if kind.startswith("driven"):
        wave_, typed = _input(rng, [chain.rate for chain in chains])
        drive = (Wave(), wave_)
    elif all(x.is_zero for x in initial):
        return None
    m = rng.choice((1, 1, 1, 2, 5))
    right = typed if m == 1 or typed == "0" else f"{m}*({typed})"
    equation = f"{m}*{name}'' + {m * b}*{name}' + {m * c}*{name} = {right}"
    text = {
        "title": kind,
        "equations": [equation],
        "states": [name],
        "initial": {name: str(initial[0].a), f"{name}'": str(initial[1].a)},
    }
    return _solved(
        Case(
            kind,
            text,
            (name, f"{name}'"),
            {name: LETTERS.get(name, name)},
            matrix,
            initial,
            chains,
            (),
            (),
            drive,
            second_order=True,
        )
    )


def _solved(case: Case) -> Case:
    """Return a model with its transition matrix and solution, proved by substitution."""
    transition = exponential(case.chains)
    free = product(transition, times(column(case.initial), constant), Wave())
    solution, particular = free, ()
    if case.drive:
        forced = [
            sum(
                (convolved(e, u) for e, u in zip(row, case.drive, strict=True)),
                start=Wave(),
            )
            for row in transition
        ]
        solution = added(free, tuple((w,) for w in forced))
        rates = {chain.rate for chain in case.chains}
        particular = tuple(
            wave({key: c for key, c in w.terms.items() if key[1] not in rates}) for w in forced
        )
        if not _satisfies(case, particular):
            particular = ()
    answer = tuple(row[0] for row in solution)
    assert _satisfies(case, answer), case
    assert all(w.at_zero() == x for w, x in zip(answer, case.initial, strict=True))
    return Case(
        **{
            **{slot: getattr(case, slot) for slot in case.__dataclass_fields__},
            "transition": transition,
            "solution": answer,
            "particular": particular,
        }
    )


def _satisfies(case: Case, answer: Sequence[Wave]) -> bool:
    rates = product(times(case.matrix, constant), tuple((w,) for w in answer), Wave())
    drive = case.drive or (Wave(),) * case.size
    return all(
        (w.derivative() - rate[0] - u).is_zero
        for w, rate, u in zip(answer, rates, drive, strict=True)
    )
