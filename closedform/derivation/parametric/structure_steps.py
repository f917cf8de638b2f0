"""What the structure of a matrix says about the roots of a factor, as statements for print."""

from __future__ import annotations

from closedform.algebra.factor_structure import FactorStructure
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import SignArgument
from closedform.derivation.parametric.formulas import as_given, sign_statement
from closedform.derivation.step import Statement, Symbol
from closedform.notation.rational_formula import rational_formula

__all__ = ["structure_facts"]


def structure_facts(field: ParameterField, structure: FactorStructure, n: int) -> dict[str, object]:
    """Return what a template needs to say why the roots of a factor are real, negative, simple.

    Entries are numbered as in A, or as in the block of A^2 that is printed with them.
    """
    squared = structure.squared
    letter = "B" if squared else "A"
    places = range(len(structure.places)) if squared else structure.places
    facts: dict[str, object] = {"squared": squared, "letter": letter, "rows": structure.places}
    facts["whole"] = not squared and len(structure.places) == n
    if squared:
        matrix = as_given(field, structure.matrix.to_list())
        block = Statement("block of the square", (Symbol("matrix", letter="B"), matrix))
        facts["block"] = block
        facts["places"] = structure.places
    facts["products"] = [
        Statement(
            "product of entries",
            (
                (
                    _entry(letter, places[e.first], places[e.second]),
                    _entry(letter, places[e.second], places[e.first]),
                ),
                rational_formula(field, e.product.element),
            ),
        )
        for e in (structure.real.edges if structure.real else ())
    ]
    facts["cycles"] = len(structure.real.cycles) if structure.real else 0
    facts["real"] = structure.real is not None
    facts["strict"] = all(
        e.product.sign == "positive" for e in (structure.real.edges if structure.real else ())
    )
    facts["negative"] = structure.decays
    facts["along"] = structure.stable.along if structure.stable else ""
    facts["sums"] = [
        {"place": k, "statement": _signed(field, s)}
        for k, s in enumerate(structure.stable.sums if structure.stable else ())
        if s.element
    ]
    last = structure.coefficients[-1]
    if last.sign != "unknown":
        facts["last"] = sign_statement(field, last.element, last.sign)
    simple = structure.simple
    facts["graph"] = "" if simple is None else simple.graph
    facts["exceptions"] = [
        Statement("apart", tuple(rational_formula(field, d) for d in group))
        for group in (simple.exceptions if simple else ())
    ]
    return facts


def _signed(field: ParameterField, argument: SignArgument) -> Statement:
    statement = sign_statement(field, argument.element, argument.sign)
    return Statement("sum of sizes", statement.sides, statement.relation)


def _entry(letter: str, row: int, column: int) -> Symbol:
    comma = "," if max(row, column) > 8 else ""
    return Symbol("scalar", letter=letter.lower(), indices=(f"{row + 1}{comma}{column + 1}",))
