"""The steps from the model to its eigenvalues."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from flint import arb

from closedform.algebra.enclosure import ball_of, certified_decimal
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.derivation.formulas import (
    ZERO,
    A,
    column,
    eigenvalue_symbol,
    number_formula,
    polynomial_formula,
    root_of,
    surd_matrix,
)
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation.expression import Expression, Name, number, power_of, product
from closedform.notation.terms import opened, sum_of, surd_formula, weighted
from closedform.response.modes import Mode
from closedform.response.names import NamedConstant, Radical, RootPart
from closedform.response.response import Response
from closedform.response.sampling import constant_decimal, isolating_interval, surd_decimal

__all__ = [
    "Eigenvalue",
    "characteristic_polynomial_step",
    "eigenvalues_of",
    "eigenvalues_step",
    "model_step",
    "named_roots_steps",
]


@dataclass(frozen=True)
class Eigenvalue:
    """A mode with the numbers under which its one or two eigenvalues are printed."""

    factor: Factor
    mode: Mode
    numbers: tuple[int, ...]


def eigenvalues_of(response: Response) -> tuple[Eigenvalue, ...]:
    """Return the eigenvalues in the order of printing, pairs together."""
    found, number_ = [], 1
    for factor, modes in zip(response.spectrum.factors, response.closed_forms.modes, strict=True):
        for mode in modes:
            size = 1 if mode.kind == "real" else 2
            found.append(Eigenvalue(factor, mode, tuple(range(number_, number_ + size))))
            number_ += size
    return tuple(found)


def model_step(response: Response) -> Step:
    """State the model as the user gave it."""
    model = response.model
    x, t = Symbol("vector", letter="x"), Name(model.time)
    statements = [
        Statement("system", (Symbol("derivative", letter="x", argument=t), (A, _at(x, t)))),
        Statement("matrix", (A, surd_matrix(model.matrix))),
        Statement(
            "initial",
            (
                Symbol("vector", letter="x", argument=number(0)),
                Symbol("vector", letter="x", indices=("0",)),
                column([surd_formula(value) for value in model.initial]),
            ),
        ),
    ]
    for output in model.outputs:
        terms = [
            weighted(w, [Name(state)], [])
            for w, state in zip(output.weights, model.states, strict=True)
            if not w.is_zero
        ]
        statements.append(Statement("output", (Name(output.name), opened(sum_of(terms)))))
    facts = {
        "title": model.title,
        "summary": model.summary,
        "states": model.states,
        "time": model.time,
        "n": len(model.states),
        "outputs": [output.name for output in model.outputs],
    }
    return Step("model", tuple(statements), facts, depth="summary")


def _at(symbol: Symbol, t: Expression) -> Symbol:
    return Symbol(symbol.kind, symbol.indices, t, symbol.letter)


def characteristic_polynomial_step(response: Response) -> Step:
    """det(lambda I - A), expanded and factored."""
    field, spectrum, root = response.field, response.spectrum, root_of(response)
    expanded = polynomial_formula(field, spectrum.characteristic_polynomial, root)
    sides: list[Side] = [
        Symbol("characteristic polynomial", argument=root),
        Symbol("determinant", argument=root, letter="A"),
        expanded,
    ]
    factored = _factored(response)
    if factored != expanded:
        sides.append(factored)
    return Step(
        "characteristic_polynomial",
        (Statement("characteristic polynomial", tuple(sides)),),
        {"degree": len(response.model.states)},
        rests_on=("model",),
    )


def _factored(response: Response) -> Expression:
    root = root_of(response)
    return product(
        power_of(polynomial_formula(response.field, factor.p, root), factor.multiplicity)
        for factor in response.spectrum.factors
    )


def eigenvalues_step(response: Response, digits: int) -> Step:
    """List the eigenvalues with multiplicity, index and blocks."""
    statements, rows, root = [], [], root_of(response)
    for eigenvalue in eigenvalues_of(response):
        mode, factor = eigenvalue.mode, eigenvalue.factor
        symbol = eigenvalue_symbol(root, eigenvalue.numbers)
        value = _value(mode)
        if value is not None:
            statements.append(Statement("eigenvalues", (symbol, value)))
        rows.append(
            {
                "eigenvalue": symbol,
                "multiplicity": factor.multiplicity,
                "index": factor.index,
                "blocks": factor.blocks,
                "meaning": _MEANINGS[mode.kind],
                "decimal": _decimal(response, mode, digits),
            }
        )
    for constant in response.closed_forms.constants:
        if isinstance(constant.definition, Radical):
            sides: tuple[Side, ...] = (Name(constant.name), constant.definition.formula)
            statements.append(Statement("eigenvalues", sides))
    facts: dict[str, object] = {
        "rows": rows,
        "field": _field_name(response),
        "named": any(isinstance(c.definition, RootPart) for c in response.closed_forms.constants),
    }
    rests_on = ("characteristic_polynomial",)
    return Step("eigenvalues", tuple(statements), facts, rests_on, "summary")


_MEANINGS = {"real": "real", "circular": "conjugate pair", "hyperbolic": "real pair"}


def _value(mode: Mode) -> Side | None:
    if mode.kind == "real":
        return None if isinstance(mode.rate, str) else surd_formula(mode.rate)
    if mode.frequency is None:
        raise TypeError("a pair has a frequency")
    kind = "pair" if mode.kind == "circular" else "real pair"
    return Symbol(kind, parts=(number_formula(mode.rate), number_formula(mode.frequency)))


def _decimal(response: Response, mode: Mode, digits: int) -> str:
    constants = {c.name: c for c in response.closed_forms.constants}

    def shown(value: SurdSum | str) -> str:
        if isinstance(value, str):
            return constant_decimal(constants[value], digits)
        return surd_decimal(value, digits)

    if mode.kind == "real" or mode.frequency is None:
        return shown(mode.rate)
    if mode.kind == "hyperbolic":
        return " and ".join(_sum_decimal(mode, constants, sign, digits) for sign in (1, -1))
    rate, turn = shown(mode.rate), shown(mode.frequency)
    return f"±{turn}i" if rate == "0" else f"{rate} ± {turn}i"


def _sum_decimal(mode: Mode, constants: Mapping[str, NamedConstant], sign: int, digits: int) -> str:
    """One eigenvalue of a real pair: the sum is rounded, not its parts."""

    def ball(value: SurdSum | str | None) -> arb:
        if isinstance(value, str):
            return constants[value].definition.enclosure()
        return ball_of(value or SurdSum(()))

    return certified_decimal(lambda: ball(mode.rate) + sign * ball(mode.frequency), digits)


def _field_name(response: Response) -> str:
    radicands = response.field.radicands
    return "Q" if not radicands else f"Q({', '.join(f'sqrt({d})' for d in radicands)})"


def named_roots_steps(response: Response, digits: int) -> Iterator[Step]:
    """Say what each named root is: one step for every factor that needs names."""
    constants, root = {c.name: c for c in response.closed_forms.constants}, root_of(response)
    for factor in response.spectrum.factors:
        named = [
            (eigenvalue, constants[name])
            for eigenvalue in eigenvalues_of(response)
            if eigenvalue.factor == factor
            for name in (eigenvalue.mode.rate, eigenvalue.mode.frequency)
            if isinstance(name, str) and isinstance(constants[name].definition, RootPart)
        ]
        if not named:
            continue
        polynomial = polynomial_formula(response.field, factor.p, root)
        statements = [Statement("polynomial", (polynomial, ZERO))]
        even = factor.roots.form == "even"
        if even and factor.roots.squares is not None:
            statements = _even_statements(response, factor, root)
        yield Step(
            "named_roots",
            tuple(statements),
            {
                "even": even,
                "degree": factor.degree,
                "whole": factor.degree == len(response.model.states),
                "rows": [
                    _row(root, eigenvalue, constant, digits) for eigenvalue, constant in named
                ],
            },
            rests_on=("eigenvalues",),
            depth="summary",
        )


def _even_statements(response: Response, factor: Factor, root: Name) -> list[Statement]:
    """The polynomial in mu = (lambda - a)^2."""
    polynomial = polynomial_formula(response.field, factor.roots.squares, Name("mu"))
    centre = response.field.surds(factor.roots.centre)
    base: Expression = root
    if not centre.is_zero:
        base = sum_of([root, surd_formula(-centre)])
    square = power_of(base, 2)
    return [
        Statement("substitution", (Name("mu"), square)),
        Statement("polynomial", (polynomial, number(0))),
    ]


def _row(
    root: Name, eigenvalue: Eigenvalue, constant: NamedConstant, digits: int
) -> dict[str, object]:
    definition = constant.definition
    if not isinstance(definition, RootPart):
        raise TypeError("only parts of roots have rows here")
    return {
        "name": Name(constant.name),
        "interval": isolating_interval(definition),
        "part": definition.part,
        "eigenvalue": eigenvalue_symbol(root, eigenvalue.numbers),
        "real": eigenvalue.mode.kind == "real",
        "decimal": constant_decimal(constant, digits),
    }
