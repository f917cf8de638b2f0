"""Judging transfer functions: what the transform of a state is to that of the input, from rest."""

from __future__ import annotations

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.held import held_against
from closedform.checking.judging.transforms import laplace_in_pieces
from closedform.checking.recognising.left_sides import left_of
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.matrices import ExactMatrix, column, identity
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Symbol, Written, walk

__all__ = ["judge_transfer"]

LARGEST = 8


def judge_transfer(claim: Claim, setting: Setting) -> Finding:
    """Judge G(s) = X(s)/U(s) for a model with one input, whatever function of time that is.

    Raises:  NotJudgedError where it is not told which state or input is meant, or the input
             has no transform: an impulse is none that is given in pieces.
    """
    state = _state(claim, setting)

    def true(ground: Ground) -> Value:
        return _transfer(state, ground)

    def prepare(member: Written) -> Written:
        names = {n.name for n in walk(member) if isinstance(n, Symbol)} - ground_names
        if len(names) != 1:
            raise NotJudgedError("it is not told which name is the variable of the transform")
        return setting.renamed(member, names)

    ground_names = setting.ground.facts.names
    right = {SPECTRAL: "s"}
    return held_against(
        claim, setting, true, lambda g: written_back(true(g), right), prepare=prepare
    )


def _state(claim: Claim, setting: Setting) -> int:
    """Return which state a claim is about, from its subject, its names, or as the only unknown."""
    ground = setting.ground
    subjects = [claim.subject, claim.line.of.strip()]
    for name in claim.names:
        left = left_of(name, ground.facts)
        subjects.append(left.subject if left is not None else "")
    for subject in subjects:
        if subject in ground.truth.states:
            return ground.truth.states.index(subject)
    if claim.line.of.strip() or len({name for name, _ in ground.truth.jets}) != 1:
        raise NotJudgedError("it is not told which state it is about; let of name it")
    return [order for _, order in ground.truth.jets].index(0)


def _transfer(state: int, ground: Ground) -> Element:
    if len(ground.facts.inputs) != 1 or ground.size > LARGEST:
        raise NotJudgedError("a transfer function is judged for one input with a name")
    (name,) = ground.facts.inputs
    given = [ground.input(name, stretch) for stretch in ground.stretches]
    values = [value for value in given if value is not None]
    if len(values) != len(given) or not ground.stretches[0].start.is_zero:
        raise NotJudgedError("the input is not known from the time 0 on")
    source = laplace_in_pieces(values, ground)
    if not isinstance(source, Element) or source.is_zero:
        raise NotJudgedError("the input is zero between its impulses")
    drive = laplace_in_pieces(
        [column(ground.field, ground.drive(s)) for s in ground.stretches], ground
    )
    assert isinstance(drive, ExactMatrix)  # noqa: S101  a column for columns
    variable = identity(ground.field, ground.size).scaled(ground.field.name(SPECTRAL))
    response = (variable - ground.matrix).inverse() @ drive
    return response.rows[state][0] / source
