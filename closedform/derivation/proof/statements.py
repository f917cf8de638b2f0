"""Every statement and every table of a derivation, proved from what is printed.

Nothing here asks how a statement was made: matrices and formulas are evaluated from
their trees in complex balls, and held against A and x0 as the model has them, the
isolated roots of the factors, and the matrix exponential of ball arithmetic.  Precision
is doubled until all balls are narrow.
Source:  F. Johansson, Arb: efficient arbitrary-precision midpoint-radius interval
         arithmetic, IEEE Transactions on Computers 66 (2017).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence

from flint import ctx

from closedform.derivation.formulas import root_of
from closedform.derivation.proof import forms, resolvent, results, spectrum
from closedform.derivation.proof.evaluation import expressions_in
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    StatementRefutedError,
    undecided,
)
from closedform.derivation.proof.ground import Ground, letters_in, rows_of
from closedform.derivation.step import IMAGINARY_UNIT, Statement, Step
from closedform.notation.expression import Name, names_in
from closedform.response.response import Response
from closedform.verification.enclosures import trial_times
from closedform.verification.record import Check, UnprovedError

__all__ = ["prove_statements"]

_FIRST_BITS = 288
_MOST_BITS = 1 << 14

_STATEMENTS: dict[tuple[str, str], Callable[[Ground, Statement], Iterator[Finding]]] = {
    ("model", "system"): spectrum.system_statement,
    ("model", "matrix"): spectrum.matrix_statement,
    ("model", "initial"): spectrum.initial_statement,
    ("model", "output"): spectrum.output_definition,
    ("characteristic_polynomial", "characteristic polynomial"): spectrum.polynomial_statement,
    ("eigenvalues", "eigenvalues"): spectrum.eigenvalue_statement,
    ("eigenvectors", "eigenvector equation"): forms.vector_equation,
    ("eigenvectors", "generalized eigenvector equation"): forms.vector_equation,
    ("eigenvectors", "eigenvector"): forms.eigenvector_statement,
    ("eigenvectors", "generalized eigenvector"): forms.eigenvector_statement,
    ("jordan_form", "P"): forms.basis_statement,
    ("jordan_form", "J"): forms.form_statement,
    ("jordan_form", "P inverse"): forms.inverse_statement,
    ("real_form", "P"): forms.basis_statement,
    ("real_form", "real form"): forms.form_statement,
    ("real_form", "P inverse"): forms.inverse_statement,
    ("exponential_of_form", "exp J"): forms.exponential_statement,
    ("transition", "exp A"): forms.transition_statement,
    ("solution", "solution of state"): results.function_statement,
    ("outputs", "output"): results.function_statement,
}
"""What proves each statement, by the kind of its step and what it says."""

_TOGETHER: dict[tuple[str, str], Callable[[Ground, Step, Statement], Iterator[Finding]]] = {
    ("named_roots", "polynomial"): spectrum.polynomial_of_roots,
    ("resolvent", "expansion"): resolvent.expansion,
    ("resolvent", "denominator"): resolvent.denominator,
    ("resolvent", "impulse response"): resolvent.impulse_response,
}
"""What proves a statement with others of its step."""

_WITHIN = {
    ("named_roots", "substitution"): "polynomial",
    ("resolvent", "residue matrix"): "expansion",
}
"""A definition is proved where it is used: by which statement of the same step."""

_Facts = dict[str, Callable[[Ground, Step], Iterator[Finding]]]

_FACTS: _Facts = {
    "eigenvalues": spectrum.eigenvalue_rows,
    "named_roots": spectrum.root_rows,
    "eigenvectors": forms.eigenvector_facts,
    "solution": results.shown_functions,
    "outputs": results.shown_functions,
    "abbreviations": results.constant_rows,
    "values": results.value_rows,
}

_OTHERWISE: _Facts = {"values": results.values_by_formula}
"""A second way to prove what a table holds, for entries that the first leaves open."""

_WITH_ROOT = ("characteristic_polynomial", "named_roots", "abbreviations")
"""Steps that use the variable of the characteristic polynomial."""

_VARIABLES = {"named_roots": {"mu"}, "resolvent": {"s"}}
"""Further variables by the kind of step."""


def prove_statements(response: Response, steps: Sequence[Step], digits: int) -> Check:
    """Return the check that every statement and every table of the steps holds as printed.

    `digits` are the significant digits that the tables were asked for.

    Raises:  StatementRefutedError for the first that does not hold, or of which a name or
             a letter is not defined; UnprovedError if there is none, but some are left open;
             ValueError for a kind of statement that nothing proves.
    """
    for finding in _undefined(response, steps):
        raise StatementRefutedError(response.model.name, finding.place, finding.reason)
    times = trial_times(response)
    ground = Ground(response, steps, digits, (times[0], times[2]))
    tables = [step for step in steps if step.kind in _OTHERWISE]
    _require(response, _left_open(ground, [step for step in steps if step not in tables]))
    first = _left_open(ground, tables)
    if first:
        second = _left_open(ground, tables, _OTHERWISE)
        _require(response, [place for place in first if place in second])
    statements = sum(len(step.statements) for step in steps)
    further = (
        f"; {len(first)} values, too small beside others for that, agree with the formulas of "
        "the result"
    )
    return Check(
        "statements of the derivation",
        "enclosed",
        f"{statements} displayed statements and all decimals in tables were evaluated from what "
        "is printed; they agree with the model, the isolated eigenvalues and the matrix "
        f"exponential of ball arithmetic{further if first else ''}",
    )


def _require(response: Response, left_open: Sequence[str]) -> None:
    """Raise UnprovedError if something is left open, by place."""
    if left_open:
        how = f"not settled by {_MOST_BITS} bits"
        checks = (Check(place, "not attempted", how) for place in left_open)
        raise UnprovedError(response.model.name, tuple(checks))


def _left_open(ground: Ground, steps: Sequence[Step], facts: _Facts = _FACTS) -> list[str]:
    """Prove some steps, more and more finely; return the places that are open in the end."""
    bits = _FIRST_BITS
    while True:
        with ctx.workprec(bits):
            wide = list(_wide(ground.afresh(), steps, facts))
        if not wide:
            return []
        if bits >= _MOST_BITS:
            break
        bits = min(2 * bits, _MOST_BITS)
    for comparison in wide:
        if comparison.has_no_value:
            raise StatementRefutedError(
                ground.response.model.name,
                str(comparison),
                f"it has no value, worked to {bits} bits",
            )
    return list(dict.fromkeys(map(str, wide)))


def _wide(ground: Ground, steps: Sequence[Step], facts: _Facts) -> Iterator[Comparison]:
    """Return the comparisons that this precision does not settle.

    Raises StatementRefutedError at the first thing that certainly is wrong.
    """
    if ground.is_coarse:
        yield undecided("eigenvalues")
        return
    for finding in _findings(ground, steps, facts):
        if isinstance(finding, Fault):
            raise StatementRefutedError(ground.response.model.name, finding.place, finding.reason)
        if finding.is_apart:
            raise StatementRefutedError(
                ground.response.model.name,
                str(finding),
                f"printed is {finding.printed.str(8)}, and true {finding.expected.str(8)}",
            )
        if not finding.is_settled:
            yield finding


def _findings(ground: Ground, steps: Sequence[Step], facts: _Facts) -> Iterator[Finding]:
    for step in steps:
        for statement in step.statements:
            if statement.relation != "=":
                yield Fault(statement.says, f"the relation is {statement.relation}")
            yield from _about(ground, step, statement)
        if step.kind in facts:
            yield from facts[step.kind](ground, step)


def _about(ground: Ground, step: Step, statement: Statement) -> Iterator[Finding]:
    key = (step.kind, statement.says)
    if key in _STATEMENTS:
        yield from _STATEMENTS[key](ground, statement)
    elif key in _TOGETHER:
        yield from _TOGETHER[key](ground, step, statement)
    elif key in _WITHIN:
        if _WITHIN[key] not in {other.says for other in step.statements}:
            yield Fault(statement.says, "it is used nowhere")
    else:
        raise ValueError(f"nothing proves {statement.says!r} of the step {step.kind!r}")


def _undefined(response: Response, steps: Sequence[Step]) -> Iterator[Fault]:
    """Every name in a formula is defined in print, and no letter is a matrix twice."""
    model = response.model
    known = {model.time, IMAGINARY_UNIT.text, *_defined(steps)}
    for step in steps:
        allowed = known | _VARIABLES.get(step.kind, set())
        if step.kind in _WITH_ROOT:
            allowed.add(root_of(response).text)
        if step.kind == "model":
            allowed = {*model.states, *(o.name for o in model.outputs), model.time}
        for statement in step.statements:
            for side in statement.sides:
                for formula in expressions_in(side):
                    for name in sorted(names_in(formula) - allowed):
                        yield Fault(statement.says, f"{name} is used and not defined")
    seen = set()
    for letter, _ in letters_in(steps):
        if letter in seen:
            yield Fault(f"{letter[1]}_{','.join(letter[2])}", "it is given twice")
        seen.add(letter)


def _defined(steps: Sequence[Step]) -> Iterator[str]:
    """The names of constants that the steps define, in statements and in tables."""
    for step in steps:
        if step.kind == "eigenvalues":
            for statement in step.statements:
                if isinstance(statement.sides[0], Name):
                    yield statement.sides[0].text
        elif step.kind == "named_roots":
            yield from (row["name"].text for row in rows_of(step))
        elif step.kind == "abbreviations":
            for row in rows_of(step):
                yield from (c[0].text for c in row["constants"] if c is not None)
