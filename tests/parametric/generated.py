"""Models with parameters whose exceptional sets are known before anybody asks for them.

A = T B T^(-1), T a product of integer row operations and B block diagonal, its blocks made
from eigenvalues that are linear in the parameters, from quadratic factors of known
discriminant, or both.  So the equations at which eigenvalues meet are differences of
eigenvalues, discriminants, and quadratic factors taken at an eigenvalue.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from itertools import combinations, product

from hypothesis import strategies as st

from tests.parametric.admissible import assumed
from tests.parametric.plain_reader import exact_value, parse
from tests.parametric.record_reader import holds

__all__ = ["Block", "GeneratedModel", "build", "generated_models", "points"]

Texts = tuple[tuple[str, ...], ...]
Steps = tuple[tuple[int, int, int], ...]
Values = dict[str, Fraction]


@dataclass(frozen=True)
class Block:
    """A block: its rows, its real linear eigenvalues, and its quadratic factor, if any.

    `quadratic` is (b, c) for lambda^2 + b lambda + c.
    """

    rows: Texts
    linear: tuple[str, ...]
    quadratic: tuple[str, str] | None = None


@dataclass(frozen=True)
class GeneratedModel:
    """A model, and the equations `meetings`, each `text` = 0, at which eigenvalues meet.

    Eigenvalues that are one and the same function are no meeting.  Equations that hold
    nowhere in the domain may be among them.
    """

    matrix: Texts
    initial: tuple[str, ...]
    parameters: tuple[tuple[str, str], ...]
    blocks: tuple[Block, ...]
    meetings: tuple[str, ...]

    @property
    def mapping(self) -> dict[str, object]:
        """The keys of a model file."""
        return {
            "title": "Generated",
            "states": [f"x{i + 1}" for i in range(len(self.matrix))],
            "matrix": [list(row) for row in self.matrix],
            "initial": list(self.initial),
            "parameters": {name: {"assume": assume} for name, assume in self.parameters},
        }

    def met_at(self, values: Mapping[str, Fraction]) -> tuple[str, ...]:
        """Return the equations that hold at these values."""
        return tuple(text for text in self.meetings if exact_value(parse(text), values) == 0)

    def matrix_at(self, values: Mapping[str, Fraction]) -> list[list[Fraction]]:
        return [[exact_value(parse(text), values) for text in row] for row in self.matrix]


# --- blocks -----------------------------------------------------------------------------------


def chain(eigenvalues: tuple[str, ...], couplings: tuple[str, ...]) -> Block:
    """Return an upper bidiagonal block: eigenvalues, and what couples each to the next."""
    n = len(eigenvalues)
    rows = [["0"] * n for _ in range(n)]
    for i, text in enumerate(eigenvalues):
        rows[i][i] = text
        if i + 1 < n:
            rows[i][i + 1] = couplings[i]
    return Block(tuple(map(tuple, rows)), eigenvalues)


def companion(eigenvalues: tuple[str, ...], quadratic: tuple[str, str] | None = None) -> Block:
    """Return the companion matrix of prod (s - eigenvalue) (s^2 + b s + c)."""
    coefficients = ["1"]  # lowest first
    factors = [[f"-({text})", "1"] for text in eigenvalues]
    if quadratic:
        factors.append([quadratic[1], quadratic[0], "1"])
    for factor in factors:
        coefficients = _times(coefficients, factor)
    n = len(coefficients) - 1
    rows = [["1" if j == i + 1 else "0" for j in range(n)] for i in range(n)]
    rows[-1] = [f"-({c})" for c in coefficients[:-1]]
    return Block(tuple(map(tuple, rows)), eigenvalues, quadratic)


def _times(p: list[str], q: list[str]) -> list[str]:
    terms: list[list[str]] = [[] for _ in range(len(p) + len(q) - 1)]
    for i, a in enumerate(p):
        for j, b in enumerate(q):
            if "0" not in (a, b):
                terms[i + j].append(b if a == "1" else a if b == "1" else f"({a})*({b})")
    return [" + ".join(f"({t})" if len(found) > 1 else t for t in found) or "0" for found in terms]


def rotation(shift: str, frequency: str) -> Block:
    """Return [[a, -w], [w, a]], with the eigenvalues a +/- i w."""
    rows = ((shift, f"-({frequency})"), (frequency, shift))
    return Block(rows, (), (f"-2*({shift})", f"({shift})^2 + ({frequency})^2"))


# --- models -----------------------------------------------------------------------------------


def build(
    blocks: tuple[Block, ...],
    steps: Steps,
    parameters: dict[str, str],
    initial: tuple[str, ...] = (),
) -> GeneratedModel:
    """Return T B T^(-1); a step (i, j, c) adds c times row j to row i of T.

    Parameters that nothing uses are left out.
    """
    n = sum(len(block.rows) for block in blocks)
    inner = [["0"] * n for _ in range(n)]
    at = 0
    for block in blocks:
        for i, row in enumerate(block.rows):
            inner[at + i][at : at + len(row)] = row
        at += len(block.rows)
    forward, backward = _unit(n), _unit(n)
    for i, j, c in steps:  # T becomes E T, its inverse T^(-1) E^(-1)
        forward[i] = [x + c * y for x, y in zip(forward[i], forward[j], strict=True)]
        for row in backward:
            row[j] -= c * row[i]
    matrix = tuple(
        tuple(_combined(forward[i], inner, [row[k] for row in backward]) for k in range(n))
        for i in range(n)
    )
    initial = initial or ("1",) + ("0",) * (n - 1)
    words = " ".join(text for row in (*matrix, initial) for text in row)
    used = tuple((name, assume) for name, assume in parameters.items() if name in words)
    return GeneratedModel(matrix, initial, used, blocks, _meetings(blocks))


def _unit(n: int) -> list[list[int]]:
    return [[int(i == j) for j in range(n)] for i in range(n)]


def _combined(left: list[int], inner: list[list[str]], right: list[int]) -> str:
    weights: dict[str, int] = {}
    for x, row in zip(left, inner, strict=True):
        for text, y in zip(row, right, strict=True):
            if text != "0" and x * y:
                weights[text] = weights.get(text, 0) + x * y
    terms = [text if c == 1 else f"({c})*({text})" for text, c in weights.items() if c]
    return " + ".join(f"({t})" for t in terms) if len(terms) > 1 else "".join(terms) or "0"


def _meetings(blocks: tuple[Block, ...]) -> tuple[str, ...]:
    linear = [text for block in blocks for text in block.linear]
    quadratics = [block.quadratic for block in blocks if block.quadratic]
    found = [f"({a}) - ({b})" for a, b in combinations(linear, 2)]
    for b, c in quadratics:
        found.append(f"({b})^2 - 4*({c})")
        found += [f"({text})^2 + ({b})*({text}) + ({c})" for text in linear]
    for (b, c), (d, e) in combinations(quadratics, 2):  # the resultant of two quadratics
        found.append(f"(({c}) - ({e}))^2 - (({b}) - ({d}))*(({c})*({d}) - ({e})*({b}))")
    return tuple(text for text in dict.fromkeys(found) if not _vanishes(text))


def _vanishes(text: str) -> bool:
    """Whether a polynomial of low degree is 0: it is so at points in general position."""
    points = ((2, 3, 5, 7), (11, -13, 17, 19), (-23, 29, 31, -37), (41, 43, -47, 53))
    return all(
        exact_value(parse(text), dict(zip(NAMES, map(Fraction, point), strict=True))) == 0
        for point in points
    )


# --- values -----------------------------------------------------------------------------------

NAMES = ("a", "b", "c", "w")
GRID = tuple(map(Fraction, (1, 2, "1/2", 3, 0, -1, -2, "-3/2", 4)))


def points(model: GeneratedModel, each: int = 1) -> Iterator[tuple[tuple[str, ...], Values]]:
    """Yield (equations that hold, values): admissible ones, `each` for every set of equations."""
    names = [name for name, _ in model.parameters]
    conditions = assumed(dict(model.parameters))
    seen: dict[tuple[str, ...], int] = {}
    for numbers in product(GRID, repeat=len(names)):
        values = dict(zip(names, numbers, strict=True))
        if all(holds(text, values) for text in conditions):
            met = model.met_at(values)
            seen[met] = seen.get(met, 0) + 1
            if seen[met] <= each:
                yield met, values


# --- strategies -------------------------------------------------------------------------------

RATES = ("-a", "-b", "-c", "-(a + b)", "-2*a", "b - a", "a - c", "-1", "0", "a", "-a - 1")
ASSUMPTIONS = ("positive", "real", "nonzero", "nonnegative")


@st.composite
def _blocks(draw: st.DrawFn, largest: int, with_quadratic: st.SearchStrategy[bool]) -> Block:
    if largest >= 2 and draw(with_quadratic):
        shift = draw(st.sampled_from(("-a", "-b", "0", "-1")))
        kind = draw(st.sampled_from(("rotation", "oscillator", "product")))
        if kind == "rotation":
            return rotation(shift, "w")
        quadratic = draw(st.sampled_from((("2*b", "w"), ("a", "b"), ("0", "w"), ("c", "w^2"))))
        rest = draw(st.integers(1, largest - 2)) if kind == "product" and largest > 2 else 0
        rates = draw(st.tuples(*[st.sampled_from(RATES)] * rest))
        return companion(rates, quadratic)
    size = draw(st.integers(1, largest))
    rates = draw(st.tuples(*[st.sampled_from(RATES)] * size))
    if draw(st.booleans()):
        return companion(rates)
    couplings = draw(st.tuples(*[st.sampled_from(("1", "c", "a", "0"))] * max(size - 1, 0)))
    return chain(rates, couplings)


@st.composite
def generated_models(draw: st.DrawFn, largest: int = 4) -> GeneratedModel:
    """Models of order 2 to `largest` with one to four parameters, at most one quadratic."""
    rest = draw(st.integers(2, largest))
    n, blocks, quadratic = rest, [], False
    while rest:
        once = st.just(value=False) if quadratic else st.booleans()
        block = draw(_blocks(rest, once))
        quadratic = quadratic or block.quadratic is not None
        blocks.append(block)
        rest -= len(block.rows)
    if not any(name in "".join(map(str, block.rows)) for block in blocks for name in NAMES):
        blocks[0] = chain(("-a",) * len(blocks[0].rows), ("1",) * len(blocks[0].rows))
    place = st.integers(0, n - 1)
    step = st.tuples(place, place, st.sampled_from((-1, 1))).filter(lambda s: s[0] != s[1])
    steps = tuple(draw(st.lists(step, max_size=n))) if n > 1 else ()
    parameters = {name: draw(st.sampled_from(ASSUMPTIONS)) for name in NAMES}
    return build(tuple(blocks), steps, parameters)
