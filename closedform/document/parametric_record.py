"""The record of a model with parameters: every case of its solution as plain data.

The layout is that of templates/record/record.schema.json, where every key is described.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any

from closedform.algebra.exponential import ModalTerm
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.algebra.regimes import Regime
from closedform.algebra.surds import SurdSum
from closedform.model.parametric import Condition, Parameter
from closedform.notation.plain import plain
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import surd_formula
from closedform.response.parametric.case import Case, WrittenQuantity
from closedform.response.parametric.numbers import NumbersAt
from closedform.response.parametric.quantities import ResidueDefinition
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import VerificationRecord

__all__ = ["checks_as_data", "parametric_record"]


def parametric_record(
    response: ParametricResponse, records: CaseRecords, numbers: Sequence[NumbersAt] = ()
) -> dict[str, Any]:
    """Return all of the record but its layout; `numbers` are the results at given values."""
    model, field = response.model, response.model.field
    written: dict[str, Any] = {
        "title": model.title,
        "time": model.time,
        "states": list(model.states),
        "matrix": [_texts(field, row) for row in model.matrix],
        "initial": _texts(field, model.initial),
        "parameters": {parameter.name: _parameter(parameter) for parameter in model.parameters},
        "restated": {d.name: _text(field, d.value) for d in model.restated},
        "conditions": [_condition(condition) for condition in model.conditions],
        "characteristic_polynomial": _texts(field, response.branches[0].spectrum.characteristic),
        "cases": [
            _case(response, case, record)
            for case, record in zip(response.cases, records.cases, strict=True)
        ],
        "not_covered": [
            " and ".join(map(str, comparisons)) for comparisons in response.not_covered
        ],
    }
    if numbers:
        written["values"] = [_numbers(response, row) for row in numbers]
    written["verification"] = checks_as_data(records.whole)
    return written


def checks_as_data(record: VerificationRecord) -> list[dict[str, str]]:
    """Return what was proved, item by item."""
    return [
        {"item": check.item, "outcome": check.outcome, "how": check.how} for check in record.checks
    ]


def _text(field: ParameterField, element: Scalar) -> str:
    return plain(rational_formula(field, element))


def _texts(field: ParameterField, elements: Iterable[Scalar]) -> list[str]:
    return [_text(field, element) for element in elements]


def _number(value: SurdSum) -> str:
    return plain(surd_formula(value))


def _parameter(parameter: Parameter) -> dict[str, str]:
    told = {"assume": str(parameter.assume)}
    if parameter.value is not None:
        told["value"] = _number(parameter.value)
    more = {"unit": parameter.unit, "meaning": parameter.meaning}
    return told | {key: text for key, text in more.items() if text}


def _condition(condition: Condition) -> str:
    relation = "==" if condition.relation == "=" else condition.relation
    return f"{plain(condition.left)} {relation} {plain(condition.right)}"


def _case(response: ParametricResponse, case: Case, record: VerificationRecord) -> dict[str, Any]:
    model, branch = response.model, case.branch
    return {
        "condition": case.condition,
        "names": {q.name: _quantity(model.field, q) for q in case.quantities},
        "eigenvalues": [
            _eigenvalue(model.field, term, regime, branch.relation)
            for term, regime in zip(branch.exponential.terms, case.regimes, strict=True)
        ],
        "transition": [[plain(entry) for entry in row] for row in case.transition],
        "solution": [plain(formula) for formula in case.solution],
        "outputs": {
            output.name: plain(formula)
            for output, formula in zip(model.outputs, case.outputs, strict=True)
        },
        "verification": checks_as_data(record),
    }


def _quantity(field: ParameterField, quantity: WrittenQuantity) -> dict[str, Any]:
    if quantity.formula is not None:
        return {"definition": plain(quantity.formula)}
    if quantity.root is None:
        raise TypeError(f"{quantity.name} has no definition")
    root = quantity.root
    told: dict[str, Any] = {"polynomial": _texts(field, root.polynomial), "which": root.which}
    told["part"] = root.part or "real"
    if isinstance(root, ResidueDefinition):
        told |= {"numerator": _texts(field, root.numerator), "weight": str(root.weight)}
        told |= {"beside": _texts(field, root.beside)}
    return told


def _eigenvalue(
    field: ParameterField, term: ModalTerm, regime: Regime, relation: Scalar | None
) -> dict[str, Any]:
    """A factor with its multiplicity and block sizes, as far as these are known.

    Where a relation among the parameters holds, the spectrum knows multiplicities only;
    the index is then told by the powers of t that do not vanish.
    """
    factor = term.factor
    index = factor.index if relation is None else _index(term, relation)
    blocks: tuple[int, ...] = factor.blocks
    if relation is not None:
        blocks = (index, *[1] * (factor.multiplicity - index))
    told: dict[str, Any] = {
        "polynomial": _texts(field, factor.polynomial),
        "multiplicity": factor.multiplicity,
        "index": index,
        "blocks": list(blocks),
    }
    if relation is not None and 1 < index < factor.multiplicity - 1:
        del told["blocks"]
    if regime.kind == "double":  # both roots are one: (lambda - a)^2 with blocks twice as long
        told["polynomial"] = _texts(field, (field.domain.one, -factor.roots.centre))
        told["multiplicity"], told["index"] = 2 * factor.multiplicity, 2 * index
        if "blocks" in told:
            told["blocks"] = [2 * size for size in blocks]
    return told


def _index(term: ModalTerm, relation: Scalar) -> int:
    standing = [
        power
        for power, residue in enumerate(term.residues, start=1)
        for matrix in residue.coefficients
        for row in matrix.to_list()
        if not all(vanishes_under(element, relation) for element in row)
    ]
    return max(standing)


def _numbers(response: ParametricResponse, row: NumbersAt) -> dict[str, Any]:
    n, model = len(response.model.states), response.model
    columns = (*model.states, *(output.name for output in model.outputs))
    return {
        "label": row.label,
        "parameters": {name: _number(value) for name, value in row.values},
        "case": row.case,
        "names": {quantity.name: quantity.decimal for quantity in row.quantities},
        "times": [_number(time) for time in row.times],
        "solution": {
            name: [decimals[k] for decimals in row.rows] for k, name in enumerate(columns[:n])
        },
        "outputs": {
            name: [decimals[k] for decimals in row.rows]
            for k, name in enumerate(columns[n:], start=n)
        },
    }
