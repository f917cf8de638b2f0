"""The step that gives the eigenvectors and chains of one eigenvalue."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.algebra.canonical import JordanChain
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.surds import SurdSum
from closedform.derivation.formulas import (
    chain_vector,
    column,
    complex_formula,
    eigenvalue_formula,
    frequency_formula,
    in_order,
)
from closedform.derivation.spectrum_steps import Eigenvalue, eigenvalues_of
from closedform.derivation.step import Statement, Step, Symbol
from closedform.notation.expression import Expression
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula
from closedform.response.response import Response

__all__ = ["Block", "blocks_of", "eigenvectors_step", "entry_formula", "vector_formulas"]

Entry = tuple[SurdSum, SurdSum]
"""x + y w, where w is the square root that belongs to the eigenvalue (w^2 = D)."""
_LONGEST_IN_A_SENTENCE = 32


@dataclass(frozen=True)
class Block:
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

    @property
    def is_circular(self) -> bool:
        """Whether the two eigenvalues are conjugate."""
        return self.eigenvalue.mode.kind == "circular"

    @property
    def signs(self) -> tuple[int, ...]:
        """The signs of the square root, one for each eigenvalue."""
        return (1, -1) if self.is_pair else (1,)


def blocks_of(response: Response) -> list[Block]:
    """Return every Jordan chain of a response, in the order of the columns of P."""
    values = {e.factor.p: e for e in eigenvalues_of(response)}
    blocks, first = [], 1
    chains = zip(response.jordan.chains, response.jordan.left_chains, strict=True)
    for chain, left in chains:
        blocks.append(
            Block(
                values[chain.factor.p],
                tuple(_entries(chain, vector) for vector in chain.vectors),
                tuple(_entries(chain, row) for row in left),
                first,
            )
        )
        first += chain.size * chain.factor.degree
    return blocks


def _entries(chain: JordanChain, vector: RootMatrix) -> tuple[Entry, ...]:
    """The entries r_0 + r_1 lambda as (r_0 + r_1 a) + r_1 w; at a single eigenvalue, r_0."""
    field, factor = vector.field, chain.factor
    rows, columns = vector.shape
    found = []
    for i in range(rows):
        for k in range(columns):
            entry = vector.entry(i, k)
            slope = entry.nth(1) if factor.degree == 2 else field.domain.zero
            found.append(
                (field.surds(entry.nth(0) + factor.roots.centre * slope), field.surds(slope))
            )
    return tuple(found)


def eigenvectors_step(eigenvalue: Eigenvalue, blocks: Sequence[Block]) -> Step:
    """Each chain of an eigenvalue, from its eigenvector upwards."""
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
            statements.append(Statement(says, (vector, column(vector_formulas(block, place, 1)))))
            if block.is_pair and mode.kind == "hyperbolic":
                other = chain_vector(_number(block, place, -1))
                statements.append(
                    Statement(says, (other, column(vector_formulas(block, place, -1))))
                )
    facts = {
        "eigenvalue": argument,
        "long": len(plain(argument)) > _LONGEST_IN_A_SENTENCE,
        "numbers": eigenvalue.numbers,
        "multiplicity": factor.multiplicity,
        "index": factor.index,
        "geometric multiplicity": len(factor.blocks),
        "blocks": factor.blocks,
        "kind": mode.kind,
        "conjugate": mode.kind == "circular",
    }
    return Step("eigenvectors", tuple(statements), facts, rests_on=("eigenvalues",))


def _number(block: Block, place: int, sign: int = 1) -> int:
    """The column of P in which a vector stands; pairs take the columns of + first."""
    offset = block.size if sign < 0 else 0
    return block.first + place + offset


def vector_formulas(block: Block, place: int, sign: int) -> list[Expression]:
    """Return a vector of a chain (counted from 0) at the eigenvalue with this sign."""
    return [entry_formula(block, entry, sign) for entry in block.vectors[place]]


def entry_formula(block: Block, entry: Entry, sign: int) -> Expression:
    """Return an entry of a vector at the eigenvalue with this sign."""
    x, y = entry
    mode = block.eigenvalue.mode
    turn = y if sign > 0 else -y
    if block.is_circular:
        return complex_formula(x, turn, mode)
    if isinstance(mode.frequency, SurdSum):
        return surd_formula(x + turn * mode.frequency)
    parts = [] if x.is_zero else [surd_formula(x)]
    if not turn.is_zero:
        parts.append(frequency_formula(turn, mode))
    return in_order(parts)
