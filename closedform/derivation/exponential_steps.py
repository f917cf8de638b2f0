"""The step that gives the exponential of the canonical form, block by block."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import factorial

from closedform.algebra.surds import SurdSum
from closedform.derivation.chain_steps import Block
from closedform.derivation.form_steps import Cell, Rows, block_diagonal, expanded
from closedform.derivation.formulas import ONE, ZERO, eigenvalue_formula, frequency_formula
from closedform.derivation.step import Matrix, Statement, Step, Symbol
from closedform.notation.expression import Call, Expression, Name, Negation, power_of
from closedform.notation.terms import negated, weighted
from closedform.response.closed_form import exponential_of_rate

__all__ = ["exponential_step"]

_UNIT = SurdSum.rational(1)


def exponential_step(blocks: Sequence[Block], time: str, *, is_complex: bool) -> Step:
    """e^(Jt), of the real form if there are conjugate eigenvalues."""
    form = Symbol("exponential", ("R",) if is_complex else (), argument=Name(time), letter="J")
    exponential = block_diagonal([_exponential_rows(block, time) for block in blocks])
    return Step(
        "exponential_of_form",
        (Statement("exp J", (form, Matrix(exponential))),),
        {
            "diagonal": all(b.size == 1 for b in blocks) and not is_complex,
            "real": is_complex,
            "reals": any(not b.is_circular for b in blocks),
            "chained": any(b.size > 1 for b in blocks),
        },
        rests_on=("real_form" if is_complex else "jordan_form",),
    )


def _exponential_rows(block: Block, time: str) -> Rows:
    mode, size = block.eigenvalue.mode, block.size
    if block.is_circular:
        return expanded(size, lambda step: _rotation(block, step, time))
    parts = []
    for sign in block.signs:
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
    return block_diagonal(parts)


def _exponential_of(value: Expression, time: str) -> Expression:
    if value == ZERO:
        return ONE
    if isinstance(value, Negation):
        return Call("exp", negated(weighted(_UNIT, [value.operand, Name(time)], [])))
    return Call("exp", weighted(_UNIT, [value, Name(time)], []))


def _chain_entry(step: int, factors: Sequence[Expression], time: str) -> Expression:
    """t^step/step! times the factors."""
    weight = SurdSum.rational(Fraction(1, factorial(step)))
    return weighted(weight, [power_of(Name(time), step), *factors], [])


def _rotation(block: Block, step: int, time: str) -> Cell:
    mode = block.eigenvalue.mode
    angle = frequency_formula(_UNIT, mode, [Name(time)])
    exponential = exponential_of_rate(mode.rate, time)
    front = [] if exponential is None else [exponential]
    cosine = _chain_entry(step, [*front, Call("cos", angle)], time)
    sine = _chain_entry(step, [*front, Call("sin", angle)], time)
    return ((cosine, sine), (negated(sine), cosine))
