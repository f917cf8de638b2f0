"""Building the tree of what was written while the grammar is followed."""

# ruff: noqa: D102  a method is the rule of the grammar that bears its name

from __future__ import annotations

from fractions import Fraction
from functools import partial
from typing import Any

from lark import Token, Transformer

from closedform.notation.written.building_parts import (
    ONE,
    Chain,
    Part,
    RefusedError,
    application,
    differentiated,
    folded,
    indexed,
    only_name,
    part_of,
    range_of,
    with_signs,
)
from closedform.notation.written.tree import (
    IMAGINARY,
    PI,
    Apply,
    Array,
    Evaluated,
    Integral,
    Jet,
    Limit,
    Listing,
    Literal,
    Negation,
    Piecewise,
    Power,
    Product,
    Quotient,
    Sum,
    SumOver,
    Symbol,
    Transform,
    changed,
)

__all__ = ["Building"]


class Building(Transformer[Token, Any]):
    """Turns what a rule of the grammar found into a `Part`; its methods bear the rules' names."""

    def statement(self, children: list[Any]) -> Part:
        members = tuple(child.node for child in children[::2])
        relations = tuple(str(child.value) for child in children[1::2])
        return Part(members[0], children[0].depth, members, relations)

    def addition(self, children: list[Token]) -> str:
        return children[0].type

    def added(self, children: list[Any]) -> Part:
        parts = [children[0]]
        parts += [
            with_signs((sign,), part)
            for sign, part in zip(children[1::2], children[2::2], strict=True)
        ]
        return part_of(Sum(tuple(part.node for part in parts)), *parts)

    def signed(self, children: list[Any]) -> Part:
        return with_signs((children[0],), children[1])

    def times(self, children: list[Any]) -> tuple[str, tuple[str, ...]]:
        return children[0].type, tuple(children[1:])

    def open(self, children: list[Any]) -> Chain:
        return self._chain(children)

    def closed(self, children: list[Any]) -> Chain:
        return self._chain(children)

    def argument(self, children: list[Any]) -> Chain:
        return self._chain(children)

    def _chain(self, children: list[Any]) -> Chain:
        chain, operator, signs = Chain(), "TIMES", ()
        for child in children:
            if isinstance(child, Chain):
                chain = child
            elif isinstance(child, Part):
                chain.links.append((operator, signs, child))
            elif isinstance(child, tuple):
                operator, signs = child
        return chain

    def product(self, children: list[Chain]) -> Part:
        return folded(children[0])

    def times_big(self, children: list[Any]) -> Part:
        if len(children) == 2:
            first, last = children
            return part_of(Product((first.node, last.node)), first, last)
        chain: Chain = children[0]
        chain.links.append((*children[1], children[2]))
        return folded(chain)

    def applied(self, children: list[Any]) -> Part:
        exponent = children[2] if len(children) == 4 else None
        last = children[-1]
        argument = folded(last) if isinstance(last, Chain) else last
        return application(children[0].value, [argument], exponent)

    def applied_signed(self, children: list[Any]) -> Part:
        argument = with_signs((children[-2],), folded(children[-1]))
        return application(
            children[0].value, [argument], children[2] if len(children) > 3 else None
        )

    def called(self, children: list[Any]) -> Part:
        exponent = children[2] if len(children) == 4 else None
        return application(children[0].value, children[-1], exponent)

    def arguments(self, children: list[Any]) -> list[Part]:
        return [child for child in children if isinstance(child, Part)]

    def bracket(self, children: list[Any]) -> Part:
        items = [child for child in children if isinstance(child, Part)]
        if len(items) == 1:
            return items[0]
        nodes = tuple(item.node for item in items)
        listed = children[0].value not in ("(", "[")
        return part_of(Listing(nodes) if listed else Array((nodes,)), *items)

    def group(self, children: list[Any]) -> Part:
        part: Part = children[1]
        return part

    def operand(self, children: list[Token]) -> Part:
        return Part(children[0].value)

    def power(self, children: list[Any]) -> Part:
        base, exponent = children[0], children[2]
        return part_of(Power(base.node, exponent.node), base, exponent)

    def exponential(self, children: list[Any]) -> Part:
        return part_of(Power(children[0].value, children[2].node), children[2])

    def postfix(self, children: list[Any]) -> Part:
        part, sign = children[0], children[1].value
        node = part.node
        match sign:
            case "degree":
                return part_of(Product((node, Quotient(PI, Literal(Fraction(180))))), part)
            case "percent":
                return part_of(Quotient(node, Literal(Fraction(100))), part)
            case "inverse":
                return part_of(Power(node, Negation(ONE)), part)
            case "adjoint":
                inner = part_of(Apply("transpose", (node,)), part)
                return part_of(Apply("conj", (inner.node,)), inner)
        return part_of(Apply(sign, (node,)), part)

    def jet(self, children: list[Any]) -> Part:
        function, arguments = children[0].value, children[1]
        if len(arguments) != 1:
            raise RefusedError(f"{function.name} is a function of the time alone")
        at = arguments[0].node
        instant = None if at == function.at else at
        return part_of(Jet(function.name, function.order, instant), arguments[0])

    def fraction(self, children: list[Any]) -> Part:
        _, top, bottom = children
        return part_of(Quotient(top.node, bottom.node), top, bottom)

    def root(self, children: list[Any]) -> Part:
        _, degree, radicand = children
        if degree.node == Literal(Fraction(2)):
            return part_of(Apply("sqrt", (radicand.node,)), radicand)
        return part_of(Power(radicand.node, Quotient(ONE, degree.node)), radicand, degree)

    def bars(self, children: list[Any]) -> Part:
        return application("abs", [children[1]])

    def norm(self, children: list[Any]) -> Part:
        return application("norm", [children[1]])

    def row(self, children: list[Any]) -> list[Part]:
        return children[::2]

    def rows(self, children: list[Any]) -> list[list[Part]]:
        return children[::2]

    def matrix(self, children: list[Any]) -> Part:
        rows: list[list[Part]] = children[1]
        short = [len(row) for row in rows if len(row) != len(rows[0])]
        if short:
            raise RefusedError(
                f"the rows of the matrix have {len(rows[0])} and {short[0]} entries; "
                "give each row as many entries, a zero where there is nothing"
            )
        inside = [part for row in rows for part in row]
        part = part_of(Array(tuple(tuple(entry.node for entry in row) for row in rows)), *inside)
        return application(children[0].value, [part]) if children[0].value else part

    def piece(self, children: list[Any]) -> tuple[Part, list[Part] | None]:
        conditions = children[2] if len(children) == 3 else None
        return children[0], conditions if isinstance(conditions, list) else None

    def conditions(self, children: list[Any]) -> list[Part]:
        return children[::2]

    def range(self, children: list[Any]) -> Part:
        members = tuple(child.node for child in children[::2])
        signs = tuple(str(child.value) for child in children[1::2])
        return Part(members[0], max(child.depth for child in children[::2]), members, signs)

    def cases(self, children: list[Any]) -> Part:
        pieces: list[tuple[Part, list[Part] | None]] = children[1:-1:2]
        if any(conditions is None for _, conditions in pieces[:-1]):
            raise RefusedError(
                "only the last line of cases may go without a condition; say when each holds"
            )
        built = tuple(
            (part.node, None if found is None else tuple(map(range_of, found)))
            for part, found in pieces
        )
        inside = [part for part, _ in pieces]
        inside += [c for _, conditions in pieces for c in conditions or ()]
        return part_of(Piecewise(built), *inside)

    def sum_over(self, children: list[Any]) -> tuple[str, Part, Part]:
        start, upper = children[2], children[4]
        variable = Symbol("i") if start.node == IMAGINARY else start.node
        if start.relations != ("=",) or not isinstance(variable, Symbol | Jet):
            raise RefusedError("below the sum there must be its variable and where it starts: n=0")
        return variable.name, Part(start.members[1], start.depth), upper

    def limit(self, children: list[Any]) -> tuple[str, Part]:
        if not isinstance(children[2].node, Symbol) or children[3].value != "→":
            raise RefusedError(r"below the limit there must be a variable and its point: t\to 0")
        return children[2].node.name, children[4]

    def derivative(self, children: list[Token]) -> tuple[str, int, str]:
        found: tuple[str, int, str] = children[0].value
        return found

    def big(self, children: list[Any]) -> Part:
        body: Part = children[1]
        match children[0]:
            case (str(variable), Part() as lower, Part() as upper):
                summand = changed(body.node, partial(indexed, variable))
                node = SumOver(summand, variable, lower.node, upper.node)
                return part_of(node, body, lower, upper)
            case (str(variable), Part() as point):
                return part_of(Limit(body.node, variable, point.node), body, point)
            case (variable, order, time):
                return part_of(differentiated(body.node, variable, order, time), body)
        raise ValueError(children)

    def transformed(self, children: list[Any]) -> Part:
        if len(children[1]) != 1:
            raise RefusedError("the transform is that of one function")
        return part_of(Transform(children[1][0].node, children[0].value), children[1][0])

    def integral(self, children: list[Any]) -> Part:
        body = children[1] if len(children) == 3 else Part(ONE)
        return part_of(Integral(body.node, children[-1].value), body)

    def definite(self, children: list[Any]) -> Part:
        _, lower, upper, *rest, last = children
        body = rest[0] if rest else Part(ONE)
        node = Integral(body.node, last.value, lower.node, upper.node)
        return part_of(node, body, lower, upper)

    def evaluated(self, children: list[Any]) -> Part:
        body, bar, _, point, *rest = children
        upper: Part | None = rest[-1] if isinstance(rest[-1], Part) else None
        node, time = body.node, bar.value
        if len(point.members) == 1:
            name, at = only_name(node, time) if upper else time, point.node
        elif point.relations == ("=",) and isinstance(point.node, Symbol):
            name, at = point.node.name, point.members[1]
        else:
            raise RefusedError("below the bar there must be a variable and its value: t=0")
        if upper is not None:
            return part_of(Evaluated(node, name, upper.node, at), body, point, upper)
        if isinstance(node, Jet) and node.at is None and name == time:
            return part_of(Jet(node.name, node.order, at), body, point)
        return part_of(Evaluated(node, name, at), body, point)
