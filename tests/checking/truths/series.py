"""Written trees as Taylor series in balls: arithmetic that no module of the engine does."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from flint import acb, arb, arb_mat, arb_series, ctx, fmpq

from closedform.checking.truth import Truth
from closedform.derivation.formulas import root_variable
from closedform.notation.written.tree import (
    Apply,
    Constant,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
)

BITS, LENGTH = 200, 4
TINY = arb(2) ** -100


def series(  # noqa: PLR0912  a branch for each kind of node
    tree: Written, names: Mapping[str, arb_series]
) -> arb_series:
    """Return a formula as a power series, names as given."""
    match tree:
        case Literal(value):
            return constant(arb(fmpq(value.numerator, value.denominator)))
        case Constant("pi"):
            return constant(arb.pi())
        case Symbol(name):
            return names[name]
        case Negation(operand):
            return -series(operand, names)
        case Sum(terms):
            return sum((series(t, names) for t in terms), constant(arb(0)))
        case Product(factors):
            total = constant(arb(1))
            for factor in factors:
                total = total * series(factor, names)
            return total
        case Quotient(above, below):
            return series(above, names) / series(below, names)
        case Power(Constant("e"), exponent):
            return series(exponent, names).exp()
        case Power(base, Literal(value)) if value.denominator == 1:
            total = constant(arb(1))
            for _ in range(int(value)):
                total = total * series(base, names)
            return total
        case Apply(function, (argument,)):
            inside = series(argument, names)
            if function in ("sinh", "cosh"):
                sign = 1 if function == "cosh" else -1
                return (inside.exp() + sign * (-inside).exp()) / 2
            return getattr(inside, function)()
    raise AssertionError(tree)


def constant(value: arb) -> arb_series:
    """Return a number as a series."""
    return arb_series([value], prec=LENGTH)


def names_at(truth: Truth, values: Mapping[str, Written], t: arb) -> dict[str, arb_series]:
    """Return every name of a truth at values of its parameters, the time around t."""
    names = {name: series(value, {}) for name, value in values.items()}
    open_names = truth.enclosures_at(values) if truth.parameters else truth.enclosures()
    for name, formula in truth.quantities:
        names[name] = constant(open_names[name]) if formula is None else series(formula, names)
    names[truth.time] = arb_series([t, 1], prec=LENGTH)
    return names


def settings(truth: Truth) -> Sequence[Mapping[str, Written]]:
    """Return the values of parameters at which a truth is tried."""
    given = [] if truth.values is None else [truth.values]
    return [*truth.samples[:2], *given] if truth.parameters else [{}]


def same(one: arb, other: arb) -> bool:
    """Whether two balls hold one number, as far as many digits tell."""
    apart = abs(one - other)
    return bool(apart.contains(0) and apart < TINY * (1 + abs(one)))


def number(tree: Written, names: Mapping[str, arb_series]) -> acb:
    """Return a formula without the time as a complex number, i among its constants."""
    match tree:
        case Constant("i"):
            return acb(0, 1)
        case Negation(operand):
            return -number(operand, names)
        case Sum(terms):
            return sum((number(t, names) for t in terms), acb(0))
        case Product(factors):
            total = acb(1)
            for factor in factors:
                total = total * number(factor, names)
            return total
        case _:
            return acb(series(tree, names)[0])


def derived(value: arb_series) -> list[arb]:
    """Return value and first derivatives at the centre, as coefficients of the derivative."""
    return [value[k + 1] * (k + 1) for k in range(LENGTH - 1)]


def check_transition(truth: Truth) -> None:
    """e^(At) is I at 0 and its derivative is A e^(At)."""
    assert truth.transition is not None
    n = len(truth.states)
    with ctx.workprec(BITS):
        for values in settings(truth):
            for t in (arb(0), arb("0.7")):
                names = names_at(truth, values, t)
                e = [[series(x, names) for x in row] for row in truth.transition]
                a = [[series(x, names) for x in row] for row in truth.matrix]
                for i in range(n):
                    for k in range(n):
                        if t == 0:
                            assert same(e[i][k][0], arb(int(i == k)))
                        total = sum((a[i][j] * e[j][k] for j in range(n)), constant(arb(0)))
                        assert all(same(x, total[m]) for m, x in enumerate(derived(e[i][k]))), (
                            i,
                            k,
                        )


def check_motion(truth: Truth) -> None:
    """In every interval x' = A x + B u; initial values and joins hold; derivatives are such."""
    n = len(truth.states)
    with ctx.workprec(BITS):
        for values in settings(truth):
            spans = [p.between for p in truth.solution[truth.states[0]]]
            for place, (start, end) in enumerate(spans):
                names = names_at(truth, values, arb(0))
                low = series(start, names)[0]
                high = low + 1 if end is None else series(end, names)[0]
                for t in (low, (low + high) / 2):
                    check_equations(truth, names_at(truth, values, t), place)
                names = names_at(truth, values, low)
                for i in range(n):
                    now = series(truth.solution[truth.states[i]][place].formula, names)[0]
                    if place:
                        before = truth.solution[truth.states[i]][place - 1].formula
                        assert same(now, series(before, names)[0])
                    elif truth.initial is not None:
                        assert same(now, series(truth.initial[i], names)[0])


def check_equations(truth: Truth, names: Mapping[str, arb_series], place: int) -> None:
    """x' = A x + B u at an instant, for the solution and the particular response."""
    for functions in (truth.solution, truth.particular):
        if not functions:
            continue
        x = [series(functions[s][place].formula, names) for s in truth.states]
        for i, state in enumerate(truth.states):
            row = [series(entry, names) for entry in truth.matrix[i]]
            total = sum((a * b for a, b in zip(row, x, strict=True)), constant(arb(0)))
            if truth.drive:
                total = total + series(truth.drive[i][place].formula, names)
            assert all(same(d, total[m]) for m, d in enumerate(derived(x[i]))), state
        for name, pieces in functions.items():
            if name + "'" in functions:
                above = series(functions[name + "'"][place].formula, names)
                below = derived(series(pieces[place].formula, names))
                assert all(same(d, above[m]) for m, d in enumerate(below)), name


def check_eigenvalues(truth: Truth) -> None:
    """The product of (z - lambda) over all eigenvalues is the characteristic polynomial."""
    with ctx.workprec(BITS):
        for values in settings(truth):
            if any(e.value is None for e in truth.eigenvalues) and truth.parameters:
                continue
            names = names_at(truth, values, arb(0))
            for z in (arb(2), arb("-0.3"), arb(7)):
                product = acb(1)
                for e in truth.eigenvalues:
                    root = acb(*e.ball()) if e.value is None else number(e.value, names)
                    product = product * (z - root) ** e.algebraic
                root = root_variable(truth.parameters).text
                whole = series(truth.characteristic, {**names, root: constant(z)})[0]
                assert same(product.real, whole)
                assert same(product.imag, arb(0))
                minor = _determinant(truth, names, z)
                assert same(whole, minor)


def _determinant(truth: Truth, names: Mapping[str, arb_series], z: arb) -> arb:

    n = range(len(truth.states))
    entries = [[(z if i == k else 0) - series(truth.matrix[i][k], names)[0] for k in n] for i in n]
    return arb_mat(entries).det()


def check(truth: Truth) -> None:
    """Everything of a truth that holds of any model."""
    if truth.transition is not None:
        check_transition(truth)
    check_motion(truth)
    check_eigenvalues(truth)
