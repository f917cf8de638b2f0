"""The names of numbers: of roots that do not hang on the parameters, and of amounts at them.

Each is defined exactly, and given with certified decimals.
"""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from closedform.algebra.enclosure import certified_decimal
from closedform.algebra.field import Polynomial
from closedform.algebra.known_roots import KnownRoot, over_numbers
from closedform.algebra.value_field import FieldWithPi
from closedform.derivation.formulas import ZERO
from closedform.derivation.parametric.formulas import (
    factored_formula,
    named_or_written,
    polynomial_formula,
)
from closedform.derivation.parametric.spectrum import known_value
from closedform.derivation.parametric.variables import variables_of
from closedform.derivation.step import Side, Statement, Symbol
from closedform.notation.expression import Name, names_in
from closedform.response.names import ResiduePart, RootPart
from closedform.response.parametric.case import Case
from closedform.response.parametric.modes import Mode, Residue
from closedform.response.parametric.quantities import Part
from closedform.response.parametric.response import ParametricResponse
from closedform.response.sampling import isolating_interval

__all__ = ["amount_rows", "known_rows"]


def known_rows(
    response: ParametricResponse, case: Case, told: set[object], digits: int
) -> Iterator[dict[str, object]]:
    """Yield a row for each factor whose roots are numbers: its names and what they are."""
    field, variables = response.model.field, variables_of(response)
    for mode in _known_modes(case):
        if _key(mode) in told:
            continue
        told.add(_key(mode))
        base, (p,) = over_numbers(field, mode.factor.p)
        table: list[dict[str, object]] = []
        for root, rate, frequency in mode.named_roots:
            named: list[tuple[str | None, Part]] = [(rate, "real"), (frequency, "imaginary")]
            for name, part in named:
                if name is None:
                    continue
                definition = RootPart(base, p, root.which, part)
                table.append(
                    {
                        "name": Name(name),
                        "place": root.which,
                        "part": part,
                        "real": root.is_real,
                        "of": _value(response, case, mode, root),
                        "interval": isolating_interval(definition),
                        "decimal": _decimal(definition, digits),
                    }
                )
        polynomial = polynomial_formula(field, mode.factor.polynomial, variables.root)
        yield {
            "statement": Statement("known zeros", (polynomial, ZERO)),
            "table": table,
            "digits": digits,
            "cases": _holding(response, mode),
            "degree": mode.factor.degree,
            "told": case.branch.number == 0,
        }


def amount_rows(
    response: ParametricResponse, case: Case, told: set[object], digits: int
) -> Iterator[dict[str, object]]:
    """Yield a row for each root and numerator r: the constants that r/p' gives there.

    `shown` says whether one of them is in the solution or the outputs of the case, and not only
    in the transition matrix.
    """
    field, variables = response.model.field, variables_of(response)
    used, r = _used(case), Symbol("scalar", letter="r", argument=variables.root)
    factors = case.branch.spectrum.factors
    for mode in _known_modes(case):
        key = ("amounts", _key(mode))
        if key in told:
            continue
        told.add(key)
        polynomial = polynomial_formula(field, mode.factor.polynomial, variables.root)
        roots = {root.which: root for root in mode.regime.roots}
        for (_, which), found in _gathered(mode).items():
            root, parts = roots[which], [(r.part, r.name or "") for r in found]
            numerator, beside = found[0].numerator, found[0].beside
            written = factored_formula(field, found[0].above, variables.root)
            constants = [
                {
                    "name": Name(name),
                    "part": part,
                    "weight": _weight(root, part),
                    "decimal": _decimal(_definition(response, mode, root, part, numerator), digits),
                }
                for part, name in parts
            ]
            yield {
                "statement": Statement("amount", (r, written)),
                "polynomial": Statement("factor", (polynomial, ZERO)),
                "whole": beside.degree() > 0 or len(factors) == mode.factor.multiplicity == 1,
                "factor": factors.index(mode.factor) + 1,
                "place": which,
                "at": _value(response, case, mode, root),
                "real": root.is_real,
                "constants": constants,
                "digits": digits,
                "shown": any(name in used for _, name in parts),
                "cases": _holding(response, mode),
            }


def _known_modes(case: Case) -> Iterator[Mode]:
    return (mode for mode in case.modes if mode.regime.kind == "known roots")


def _key(mode: Mode) -> object:
    return (mode.names, mode.factor.polynomial, mode.residues)


def _holding(response: ParametricResponse, mode: Mode) -> tuple[int, ...]:
    """The cases in which the names mean the same."""
    keys = {case.number: [_key(m) for m in case.modes] for case in response.cases}
    return tuple(number for number, found in keys.items() if _key(mode) in found)


def _value(response: ParametricResponse, case: Case, mode: Mode, root: KnownRoot) -> Side:
    names = {r.which: (rate, frequency) for r, rate, frequency in mode.named_roots}
    rate, frequency = names[root.which]
    centre = named_or_written(response.model.field, case, mode.factor.roots.centre)
    return known_value(centre, rate, frequency)


def _gathered(mode: Mode) -> dict[tuple[Polynomial, int], list[Residue]]:
    """The named parts by numerator and root, the numerators in their order."""
    found: dict[tuple[Polynomial, int], list[Residue]] = {}
    numerators = list(dict.fromkeys(r.numerator for r in mode.residues))
    for residue in sorted(mode.residues, key=lambda r: numerators.index(r.numerator)):
        if residue.name is not None:
            found.setdefault((residue.numerator, residue.which), []).append(residue)
    return found


def _weight(root: KnownRoot, part: Part) -> int:
    if root.is_real:
        return 1
    return 2 if part == "real" else -2


def _definition(
    response: ParametricResponse, mode: Mode, root: KnownRoot, part: Part, numerator: Polynomial
) -> ResiduePart:
    base, (p, r) = over_numbers(response.model.field, mode.factor.p, numerator)
    return ResiduePart(base, p, root.which, r, Fraction(_weight(root, part)), part)


def _decimal(definition: RootPart | ResiduePart, digits: int) -> str:
    """A certified decimal; a number with pi in its definition is taken for one on no tie."""
    equals = None if isinstance(definition.base, FieldWithPi) else definition.equals
    return certified_decimal(definition.enclosure, digits, equals=equals)


def _used(case: Case) -> frozenset[str]:
    """The names in the solution and the outputs, and in what else was asked for."""
    formulas = (*case.solution, *case.outputs, *(f for row in case.further_formulas for f in row))
    return frozenset().union(*map(names_in, formulas))
