"""The record of a model in numbers, as plain data.

The layout is that of templates/record/record.schema.json, where every key is described.
"""

from __future__ import annotations

from typing import Any

from closedform.algebra.exponential import ModalTerm
from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.surds import SurdSum
from closedform.document.parametric_record import checks_as_data
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula
from closedform.response.names import Definition, NamedConstant, Radical, ResiduePart
from closedform.response.response import LARGEST_WRITTEN_OUT, Response
from closedform.response.sampling import constant_decimal
from closedform.verification.record import VerificationRecord

__all__ = ["numeric_record"]


def numeric_record(response: Response, record: VerificationRecord, digits: int) -> dict[str, Any]:
    """Return all of the record but its layout; `digits` are those of the named constants."""
    model, forms = response.model, response.closed_forms
    written: dict[str, Any] = {
        "title": model.title,
        "time": model.time,
        "states": list(model.states),
        "matrix": [[_number(value) for value in row] for row in model.matrix],
        "initial": [_number(value) for value in model.initial],
        "characteristic_polynomial": [
            _scalar(response.field, c) for c in response.spectrum.characteristic
        ],
        "eigenvalues": [
            {
                "polynomial": _polynomial(response.field, factor.p),
                "multiplicity": factor.multiplicity,
                "index": factor.index,
                "blocks": list(factor.blocks),
            }
            for factor in response.spectrum.factors
        ],
        "names": {c.name: _constant(c, digits) for c in forms.constants},
    }
    if len(model.states) <= LARGEST_WRITTEN_OUT:
        written["transition"] = [[plain(entry) for entry in row] for row in forms.transition]
    else:
        written["spectral"] = [_term(response.field, term) for term in response.exponential.terms]
    written["solution"] = [plain(formula) for formula in forms.solution]
    written["outputs"] = {
        output.name: plain(formula)
        for output, formula in zip(model.outputs, forms.outputs, strict=True)
    }
    written["verification"] = checks_as_data(record)
    return written


def _number(value: SurdSum) -> str:
    return plain(surd_formula(value))


def _scalar(field: BaseField, value: Scalar) -> str:
    return _number(field.surds(value))


def _polynomial(field: BaseField, polynomial: Polynomial) -> list[str]:
    return [_scalar(field, c) for c in polynomial.to_list()]


def _constant(constant: NamedConstant, digits: int) -> dict[str, Any]:
    return {
        "definition": _definition(constant.definition),
        "value": constant_decimal(constant, digits),
    }


def _definition(definition: Definition) -> dict[str, Any]:
    if isinstance(definition, Radical):
        return {"formula": plain(definition.formula)}
    root: dict[str, Any] = {
        "polynomial": _polynomial(definition.base, definition.polynomial),
        "which": definition.which,
        "part": definition.part,
    }
    if isinstance(definition, ResiduePart):
        root["numerator"] = _polynomial(definition.base, definition.numerator)
        root["weight"] = str(definition.weight)
    return root


def _term(field: BaseField, term: ModalTerm) -> dict[str, Any]:
    """One factor of the spectral form, its entries divided by p'(lambda) as the schema says."""
    return {
        "polynomial": _polynomial(field, term.factor.p),
        "divisor": _polynomial(field, term.factor.p.diff()),
        "powers": [
            _entries([_texts(field, matrix) for matrix in residue.coefficients])
            for residue in term.residues
        ],
    }


def _texts(field: BaseField, matrix: FieldMatrix) -> list[list[str]]:
    return [[_scalar(field, value) for value in row] for row in matrix.to_list()]


def _entries(coefficients: list[list[list[str]]]) -> list[list[list[str]]]:
    """From matrices by power of lambda, lowest first, to coefficients by entry, highest first."""
    rows, columns = len(coefficients[0]), len(coefficients[0][0])
    return [
        [_stripped([m[i][k] for m in reversed(coefficients)]) for k in range(columns)]
        for i in range(rows)
    ]


def _stripped(coefficients: list[str]) -> list[str]:
    kept = next((i for i, c in enumerate(coefficients) if c != "0"), len(coefficients) - 1)
    return coefficients[kept:]
