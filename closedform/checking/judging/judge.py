"""Judging one claim, whatever it says, and what its author has stated afterwards."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from fractions import Fraction

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.balls.enclosing import NoValueError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.judging.amplitude import judge_amplitude
from closedform.checking.judging.canonical import judge_canonical
from closedform.checking.judging.consequences import carried_from
from closedform.checking.judging.constants import (
    constants_put_in,
    is_constant_of_integration,
    opens,
    rests_on_constants,
)
from closedform.checking.judging.eigenvectors import judge_eigenvector
from closedform.checking.judging.equations import judge_equation
from closedform.checking.judging.exponentials import (
    judge_block_exponential,
    judge_resolvent,
    judge_transition,
)
from closedform.checking.judging.free_solutions import judge_homogeneous, judge_particular
from closedform.checking.judging.judgement import Judgement, named_by, wrong_names
from closedform.checking.judging.numbers import (
    QUANTITIES,
    judge_definition,
    judge_identity,
    judge_quantity,
    judge_value,
)
from closedform.checking.judging.solutions import judge_solution
from closedform.checking.judging.spectrum import (
    judge_characteristic,
    judge_eigenvalues,
    judge_matrix,
)
from closedform.checking.judging.steady import judge_steady
from closedform.checking.judging.transfer import judge_transfer
from closedform.checking.judging.transformations import judge_inverse, judge_transformation
from closedform.checking.judging.transformed import judge_transform
from closedform.checking.recognising.naming import EARLIER, used_names
from closedform.checking.recognising.order import is_order, judge_order
from closedform.checking.standing.author import Author
from closedform.checking.standing.cuts import with_cuts
from closedform.checking.standing.instants import at_instants
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.standing.units import in_base_units, in_model_units, other_time_unit
from closedform.notation.written.tree import Literal, Symbol, Written, walk

__all__ = ["judge", "judged"]

Judge = Callable[[Claim, Setting], Finding]
JUDGES: Mapping[str, Judge] = {
    "matrix": judge_matrix,
    "characteristic polynomial": judge_characteristic,
    "eigenvalues": judge_eigenvalues,
    "eigenvector": judge_eigenvector,
    "generalized eigenvector": judge_eigenvector,
    "P": judge_transformation,
    "P inverse": judge_inverse,
    "J": judge_canonical,
    "real form": judge_canonical,
    "exp J": judge_block_exponential,
    "exp A": judge_transition,
    "solution": judge_solution,
    "output": judge_solution,
    "particular solution": judge_particular,
    "homogeneous solution": judge_homogeneous,
    "steady state": judge_steady,
    "transform": judge_transform,
    "transfer function": judge_transfer,
    "resolvent": judge_resolvent,
    "equation": judge_equation,
    "value": judge_value,
    "initial value": judge_value,
    "identity": judge_identity,
    "definition": judge_definition,
    "amplitude": judge_amplitude,
    **dict.fromkeys(QUANTITIES, judge_quantity),
}
"""What judges each kind of claim; kinds that are not here are judged as identities."""
OUTSIDE = (NotJudgedError, NotElementaryError, NoValueError, ZeroDivisionError)


def judge(claim: Claim, setting: Setting) -> Finding:
    """Return the finding on a claim by itself, whatever came before it.

    What cannot be decided is `not read`, with the reason.
    """
    scaled = in_model_units(claim, setting.ground.truth.units)
    if isinstance(scaled, str):
        return Finding("fails", scaled)
    other = other_time_unit(claim.line.text, setting.ground.truth.units)
    if claim.at is not None and other is not None:
        return Finding("not read", f"its instant is in {other}, the time of the model is not")
    claim = scaled
    judge_it, setting = JUDGES.get(claim.says, judge_identity), with_cuts(claim, setting)
    if claim.says == "identity" and any(map(is_order, claim.statements)):
        judge_it = judge_order
    names = used_names(claim) - setting.author.definitions.keys()
    if any(is_constant_of_integration(name, setting) for name in names) and not opens(
        claim, setting
    ):
        setting = constants_put_in(setting)
    try:
        try:
            return judge_it(claim, setting)
        except UnknownNameError as error:
            if claim.says == "identity" and error.name in FREE:
                return judge_it(_in_free_name(claim, error.name, setting), setting)
            found = judge_it(claim, replace(setting, general=True, author=_with_later(setting)))
            return found if found.passes else Finding("not read", str(error))
    except ZeroDivisionError:
        return Finding("fails", "it divides by zero")
    except OUTSIDE as error:
        return Finding("not read", str(error))


FREE = ("s", "omega")
"""Names that nobody defines, as in det(K - omega^2 M) or adj(s I - A): any value is meant."""


def _in_free_name(claim: Claim, name: str, setting: Setting) -> Claim:
    """Return an identity in the spectral variable for a free name, without "= 0" at its end."""
    groups = []
    for group in claim.groups:
        values = tuple(setting.renamed(setting.opened(v), (name,)) for v in group.values)
        if len(values) > 2 and values[-1] == Literal(Fraction(0)):
            values = values[:-1]
        groups.append(replace(group, values=values))
    return replace(claim, groups=tuple(groups))


def _with_later(setting: Setting) -> Author:
    """Return the author with names that later lines define, as tau, for a line that uses them."""
    author, names = setting.author, dict[str, Written]()
    for claim in setting.later:
        if claim.says == "definition" or claim.says in QUANTITIES:
            names = {**dict(named_by(claim, author)), **names}
    return replace(author, definitions={**names, **author.definitions})


def judged(claim: Claim, setting: Setting) -> Judgement:
    """Return the finding on a claim, carried where it follows from an earlier wrong line."""
    finding = judge(claim, setting)
    scaled = in_model_units(claim, setting.ground.truth.units)
    claim = claim if isinstance(scaled, str) else scaled
    if finding.passes and claim.says in ("definition", "identity"):
        return _resting(claim, finding, setting)
    if finding.word != "fails":
        return Judgement(claim, finding)
    for name, there in at_instants(claim, setting):
        other = judge(there, setting)
        if other.passes:
            return Judgement(claim, replace(other, notes=(*other.notes, f"meant at {name}")))
    base = in_base_units(claim, setting.ground.truth.units)
    if base is not None:
        other = judge(base, setting)
        if other.passes:
            note = "it holds in units without prefix, as of the SI; the model names none for it"
            return Judgement(base, replace(other, notes=(*other.notes, note)))
    if setting.author.alternatives:
        other = judge(claim, replace(setting, author=setting.author.otherwise()))
        if other.passes:
            note = "it holds with the other angle that an earlier line allows"
            return Judgement(claim, replace(other, notes=(*other.notes, note)))
        if _hangs_on_an_angle(claim, setting):
            reason = "the line that gives the angle leaves its quadrant open"
            return Judgement(claim, Finding("not read", reason))
    if _ends_right(claim, setting):
        return Judgement(claim, _with_right_names(claim, setting) or finding)
    root = _root(claim, setting)
    if root is None:
        return Judgement(claim, finding)
    return Judgement(claim, replace(finding, word="carried"), root)


def _root(claim: Claim, setting: Setting) -> int | None:
    """Return the number of the wrong line that a failing claim rests on."""
    for rule in (carried_from, rests_on_constants, _by_mended_names):
        try:
            root = rule(claim, setting)
        except OUTSIDE:
            continue
        if root is not None:
            return root
    return None


def _ends_right(claim: Claim, setting: Setting) -> bool:
    """Whether the last members of a failing chain are right: the slip is inside the line."""
    if all(len(group.values) < 2 for group in claim.groups):
        return False
    ends = tuple(replace(group, values=group.values[-1:]) for group in claim.groups)
    return claim.says not in EARLIER and judge(replace(claim, groups=ends), setting).passes


def _with_right_names(claim: Claim, setting: Setting) -> Finding | None:
    """Return the finding on a claim that holds with the right values of names given wrongly."""
    wrong = wrong_names(claim, setting.author)
    if not wrong:
        return None
    found = judge(claim, replace(setting, author=setting.author.mended(wrong)))
    note = f"it holds with the right value of {', '.join(wrong)}"
    return replace(found, notes=(*found.notes, note)) if found.passes else None


def _resting(claim: Claim, finding: Finding, setting: Setting) -> Judgement:
    """Return the judgement of what holds, carried if it does so by names that are wrong only."""
    author = setting.author
    wrong = wrong_names(claim, author)
    if not wrong:
        return Judgement(claim, finding)
    right = judge(claim, replace(setting, author=author.mended(wrong)))
    if right.passes:
        return Judgement(claim, finding)
    root = min(author.definition_roots[name] for name in wrong)
    return Judgement(claim, replace(right, word="carried"), root)


def _hangs_on_an_angle(claim: Claim, setting: Setting) -> bool:
    """Whether an angle occurs whose tangent, sine or cosine has parameters of any sign in it."""
    author, parameters = setting.author, set(setting.ground.truth.parameters)
    used = {node.name for v in claim.values for node in walk(v) if isinstance(node, Symbol)}
    angles = [author.alternatives[name] for name in used & set(author.alternatives)]
    inside = {n.name for tree in angles for n in walk(tree) if isinstance(n, Symbol)}
    return bool(inside & parameters) and setting.ground.truth.values is None


def _by_mended_names(claim: Claim, setting: Setting) -> int | None:
    """Return the root of a wrong definition with whose right value the claim would hold."""
    author = setting.author
    mended = wrong_names(claim, author)
    if not mended:
        return None
    if not judge(claim, replace(setting, author=author.mended(mended))).passes:
        return None
    return min(author.definition_roots[name] for name in mended)
