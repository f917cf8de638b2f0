"""The steps from eigenvectors to the exponential of the canonical form.

They are given when every eigenvalue has a short form (factors of degree one and two) and
the matrices fit on a page; otherwise the resolvent is printed instead.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import factorial, lcm

from closedform.algebra.canonical import JordanChain
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.surds import SurdSum
from closedform.derivation.formulas import (
    ONE,
    ZERO,
    chain_vector,
    column,
    complex_formula,
    eigenvalue_formula,
    frequency_formula,
    in_order,
)
from closedform.derivation.spectrum_steps import Eigenvalue, eigenvalues_of
from closedform.derivation.step import Depth, Matrix, Statement, Step, Symbol
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    number,
)
from closedform.response.amounts import negated, surd_formula, weighted
from closedform.response.closed_form import exponential_of_rate
from closedform.response.modes import Mode
from closedform.response.response import Response

__all__ = ["canonical_steps"]

_UNIT = SurdSum.rational(1)
Entry = tuple[SurdSum, SurdSum]
"""x + y w, where w is the square root that belongs to the eigenvalue (w^2 = D)."""
Rows = tuple[tuple[Expression, ...], ...]
Cell = tuple[tuple[Expression, Expression], tuple[Expression, Expression]]


@dataclass(frozen=True)
class _Block:
    """One Jordan chain with its eigenvalue, right and left vectors, and column number."""

    eigenvalue: Eigenvalue
    vectors: tuple[tuple[Entry, ...], ...]
    left: tuple[tuple[Entry, ...], ...]
    first: int

    @property
    def size(self) -> int:
        """The size of the Jordan block of one eigenvalue."""
        return len(self.vectors)

    @property
    def is_pair(self) -> bool:
        """Whether two eigenvalues a ± sqrt(D) share the chain."""
        return len(self.eigenvalue.numbers) == 2


def canonical_steps(response: Response) -> Iterator[Step]:
    """Eigenvectors and chains, P and J, the real form if needed, and its exponential."""
    blocks = _blocks(response)
    for eigenvalue in eigenvalues_of(response):
        yield _eigenvectors_step(eigenvalue, [b for b in blocks if b.eigenvalue == eigenvalue])
    yield _jordan_step(response, blocks)
    is_complex = any(b.eigenvalue.mode.kind == "circular" for b in blocks)
    if is_complex:
        yield _real_form_step(blocks)
    form = Symbol("exponential", letter="J", argument=Name(response.model.time))
    if is_complex:
        form = Symbol("exponential", letter="J", indices=("R",), argument=Name(response.model.time))
    exponential = _block_diagonal([_exponential_rows(b, response.model.time) for b in blocks])
    yield Step(
        "exponential_of_form",
        (Statement("exp J", (form, Matrix(exponential))),),
        {
            "diagonal": all(b.size == 1 for b in blocks) and not is_complex,
            "real": is_complex,
            "chained": any(b.size > 1 for b in blocks),
        },
        rests_on=("real_form" if is_complex else "jordan_form",),
    )


def _blocks(response: Response) -> list[_Block]:
    values = {e.factor.p: e for e in eigenvalues_of(response)}
    blocks, first = [], 1
    chains = zip(response.jordan.chains, response.jordan.left_chains, strict=True)
    for chain, left in chains:
        blocks.append(
            _Block(
                values[chain.factor.p],
                tuple(_entries(chain, vector) for vector in chain.vectors),
                tuple(_entries(chain, row) for row in left),
                first,
            )
        )
        first += chain.size * chain.factor.degree
    return blocks


def _entries(chain: JordanChain, vector: RootMatrix) -> tuple[Entry, ...]:
    """The entries r_0 + r_1 lambda as (r_0 + r_1 a) + r_1 w."""
    field, roots = vector.field, chain.factor.roots
    found = []
    rows, columns = vector.shape
    for i in range(rows):
        for k in range(columns):
            entry = vector.entry(i, k)
            slope = entry.nth(1) if chain.factor.degree == 2 else field.domain.zero
            found.append((field.surds(entry.nth(0) + roots.centre * slope), field.surds(slope)))
    if chain.factor.degree == 1:
        return tuple((field.surds(_only(vector, i)), SurdSum(())) for i in range(rows * columns))
    return tuple(found)


def _only(vector: RootMatrix, place: int) -> object:
    rows, _ = vector.shape
    return vector.coefficients[0][place if rows > 1 else 0, 0 if rows > 1 else place].element


def _eigenvectors_step(eigenvalue: Eigenvalue, blocks: Sequence[_Block]) -> Step:
    mode, factor = eigenvalue.mode, eigenvalue.factor
    argument = eigenvalue_formula(mode)
    shifted = Symbol("shifted", letter="A", argument=argument)
    statements: list[Statement] = []
    for block in blocks:
        for place in range(block.size):
            vector = chain_vector(_number(block, place))
            below = Symbol("zero") if place == 0 else chain_vector(_number(block, place - 1))
            says = "eigenvector" if place == 0 else "generalized eigenvector"
            statements.append(Statement(f"{says} equation", ((shifted, vector), below)))
            statements.append(Statement(says, (vector, column(_vector_formulas(block, place, 1)))))
            if block.is_pair and mode.kind == "hyperbolic":
                other = chain_vector(_number(block, place, -1))
                statements.append(
                    Statement(says, (other, column(_vector_formulas(block, place, -1))))
                )
    facts = {
        "eigenvalue": argument,
        "numbers": eigenvalue.numbers,
        "multiplicity": factor.multiplicity,
        "index": factor.index,
        "geometric multiplicity": len(factor.blocks),
        "blocks": factor.blocks,
        "kind": mode.kind,
        "conjugate": mode.kind == "circular",
    }
    return Step("eigenvectors", tuple(statements), facts, rests_on=("eigenvalues",))


def _number(block: _Block, place: int, sign: int = 1) -> int:
    """The column of P in which a vector stands; pairs take the columns of + first."""
    offset = block.size if sign < 0 else 0
    return block.first + place + offset


def _vector_formulas(block: _Block, place: int, sign: int) -> list[Expression]:
    return [_entry_formula(block, entry, sign) for entry in block.vectors[place]]


def _entry_formula(block: _Block, entry: Entry, sign: int) -> Expression:
    x, y = entry
    mode = block.eigenvalue.mode
    turn = y if sign > 0 else -y
    if mode.kind == "circular":
        return complex_formula(x, turn, mode)
    if isinstance(mode.frequency, SurdSum):
        return surd_formula(x + turn * mode.frequency)
    parts = [] if x.is_zero else [surd_formula(x)]
    if not turn.is_zero:
        parts.append(frequency_formula(turn, mode))
    return in_order(parts)


def _jordan_step(response: Response, blocks: Sequence[_Block]) -> Step:
    columns: list[list[Expression]] = []
    diagonal: list[Rows] = []
    for block in blocks:
        for sign in (1, -1) if block.is_pair else (1,):
            columns += [_vector_formulas(block, place, sign) for place in range(block.size)]
            diagonal.append(
                _jordan_rows(eigenvalue_formula(block.eigenvalue.mode, sign), block.size)
            )
    is_complex = any(b.eigenvalue.mode.kind == "circular" for b in blocks)
    statements = [
        Statement("P", (Symbol("matrix", letter="P"), _from_columns(columns))),
        Statement("J", (Symbol("matrix", letter="J"), Matrix(_block_diagonal(diagonal)))),
    ]
    if not is_complex:
        rows = [row for block in blocks for row in _left_rows(block)]
        statements.append(Statement("P inverse", (Symbol("inverse", letter="P"), _gathered(rows))))
    facts = {
        "complex": is_complex,
        "diagonal": all(block.size == 1 for block in blocks),
        "n": len(response.model.states),
    }
    depth: Depth = "full" if is_complex else "working"
    return Step("jordan_form", tuple(statements), facts, ("eigenvectors",), depth)


def _jordan_rows(value: Expression, size: int) -> Rows:
    return tuple(
        tuple(value if k == i else ONE if k == i + 1 else ZERO for k in range(size))
        for i in range(size)
    )


def _left_rows(block: _Block) -> list[list[Expression]]:
    signs = (1, -1) if block.is_pair else (1,)
    return [
        [_entry_formula(block, entry, sign) for entry in row]
        for sign in signs
        for row in block.left
    ]


def _real_form_step(blocks: Sequence[_Block]) -> Step:
    columns: list[list[Expression]] = []
    rows: list[list[Expression]] = []
    form: list[Rows] = []
    for block in blocks:
        if block.eigenvalue.mode.kind == "circular":
            columns += _real_columns(block)
            rows += _real_rows(block)
            form.append(_real_form_rows(block))
            continue
        for sign in (1, -1) if block.is_pair else (1,):
            columns += [_vector_formulas(block, place, sign) for place in range(block.size)]
            form.append(_jordan_rows(eigenvalue_formula(block.eigenvalue.mode, sign), block.size))
        rows += _left_rows(block)
    p = Symbol("matrix", letter="P", indices=("R",))
    inverse = Symbol("inverse", letter="P", indices=("R",))
    statements = (
        Statement("P", (p, _from_columns(columns))),
        Statement(
            "real form",
            (Symbol("matrix", letter="J", indices=("R",)), Matrix(_block_diagonal(form))),
        ),
        Statement("P inverse", (inverse, _gathered(rows))),
    )
    chained = any(b.size > 1 and b.eigenvalue.mode.kind == "circular" for b in blocks)
    return Step("real_form", statements, {"chained": chained}, rests_on=("eigenvectors",))


def _real_columns(block: _Block) -> list[list[Expression]]:
    """Re v and Im v of every vector of the chain."""
    mode = block.eigenvalue.mode
    columns = []
    for vector in block.vectors:
        columns.append([surd_formula(x) for x, _ in vector])
        columns.append([_turned(y, mode) for _, y in vector])
    return columns


def _turned(value: SurdSum, mode: Mode) -> Expression:
    return ZERO if value.is_zero else frequency_formula(value, mode)


def _real_rows(block: _Block) -> list[list[Expression]]:
    """2 Re w and -2 Im w of every left vector: x = sum of Re v (2 Re w x) + Im v (-2 Im w x).

    With w = x + y sqrt(D) over L, the imaginary part of a left vector is y times omega.
    """
    mode = block.eigenvalue.mode
    rows = []
    for row in block.left:
        rows.append([surd_formula(x + x) for x, _ in row])
        rows.append([_turned(-(y + y), mode) for _, y in row])
    return rows


def _real_form_rows(block: _Block) -> Rows:
    mode = block.eigenvalue.mode
    if mode.frequency is None or isinstance(mode.rate, str):
        raise TypeError("a pair of degree two has a rate and a frequency")
    rate = surd_formula(mode.rate)
    turn = frequency_formula(_UNIT, mode)
    cell = ((rate, turn), (negated(turn), rate))
    cells = {0: cell, 1: ((ONE, ZERO), (ZERO, ONE))}
    return _expanded(block.size, cells.get)


def _expanded(size: int, cell_at: Callable[[int], Cell | None]) -> Rows:
    """A block upper triangular matrix of 2 x 2 cells that depend on the distance only."""
    rows: list[tuple[Expression, ...]] = []
    for i in range(size):
        for half in range(2):
            row: list[Expression] = []
            for k in range(size):
                cell = cell_at(k - i) if k >= i else None
                row += [ZERO, ZERO] if cell is None else list(cell[half])
            rows.append(tuple(row))
    return tuple(rows)


def _exponential_rows(block: _Block, time: str) -> Rows:
    mode, size = block.eigenvalue.mode, block.size
    if mode.kind == "circular":
        return _expanded(size, lambda step: _rotation(block, step, time))
    parts = []
    for sign in (1, -1) if block.is_pair else (1,):
        exponential = _exponential_of(eigenvalue_formula(mode, sign), time)
        parts.append(
            tuple(
                tuple(
                    _chain_entry(k - i, [exponential], time) if k >= i else ZERO
                    for k in range(size)
                )
                for i in range(size)
            )
        )
    return _block_diagonal(parts)


def _exponential_of(value: Expression, time: str) -> Expression:
    if value == ZERO:
        return ONE
    if isinstance(value, Negation):
        return Call("exp", negated(weighted(_UNIT, [value.operand, Name(time)], [])))
    return Call("exp", weighted(_UNIT, [value, Name(time)], []))


def _chain_entry(step: int, factors: Sequence[Expression], time: str) -> Expression:
    """t^step/step! times the factors."""
    t = Name(time)
    powers: list[Expression] = []
    if step:
        powers = [t if step == 1 else Power(t, number(step))]
    kept = [factor for factor in factors if factor != ONE]
    return weighted(SurdSum.rational(Fraction(1, factorial(step))), [*powers, *kept], [])


def _rotation(block: _Block, step: int, time: str) -> Cell:
    mode = block.eigenvalue.mode
    angle = frequency_formula(_UNIT, mode, [Name(time)])
    exponential = exponential_of_rate(mode.rate, time)
    front = [] if exponential is None else [exponential]
    cosine = _chain_entry(step, [*front, Call("cos", angle)], time)
    sine = _chain_entry(step, [*front, Call("sin", angle)], time)
    return ((cosine, sine), (negated(sine), cosine))


def _block_diagonal(
    blocks: Sequence[Rows],
) -> Rows:
    n = sum(len(block) for block in blocks)
    rows: list[tuple[Expression, ...]] = []
    offset = 0
    for block in blocks:
        after = n - offset - len(block)
        rows += [(*[ZERO] * offset, *row, *[ZERO] * after) for row in block]
        offset += len(block)
    return tuple(rows)


def _from_columns(columns: Sequence[Sequence[Expression]]) -> Matrix:
    return Matrix(tuple(zip(*columns, strict=True)))


def _gathered(rows: Sequence[Sequence[Expression]]) -> Matrix:
    """A matrix of rational numbers gets its common denominator in front."""
    values = [[_rational(entry) for entry in row] for row in rows]
    known = [value for row in values for value in row if value is not None]
    common = lcm(*(value.denominator for value in known))
    if common == 1 or len(known) < sum(map(len, rows)):
        return Matrix(tuple(map(tuple, rows)))
    scaled = tuple(
        tuple(number(value * common) for value in row if value is not None) for row in values
    )
    return Matrix(scaled, front=number(Fraction(1, common)))


def _rational(entry: Expression) -> Fraction | None:
    match entry:
        case Number(value):
            return value
        case Negation(Number(value)):
            return -value
    return None
