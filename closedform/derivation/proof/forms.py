"""The way by eigenvectors: every vector, P, J, P^(-1), e^(Jt) and e^(At), as printed."""

from __future__ import annotations

from collections.abc import Iterator

from flint import acb, acb_mat

from closedform.derivation.proof.evaluation import ball_at, matrix_at, unit
from closedform.derivation.proof.finding import Comparison, Fault, Finding, agreeing, whether
from closedform.derivation.proof.ground import Ground, letter_of
from closedform.derivation.proof.spectrum import formula_in, structure
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import Name

__all__ = [
    "basis_statement",
    "eigenvector_facts",
    "eigenvector_statement",
    "exponential_statement",
    "form_statement",
    "inverse_statement",
    "transition_statement",
    "vector_equation",
]


def eigenvector_facts(ground: Ground, step: Step) -> Iterator[Finding]:
    """The eigenvalue a step is about, with its multiplicity and number of eigenvectors."""
    facts = step.facts
    numbers = facts["numbers"]
    eigenvalue = ground.numbered.get(numbers) if isinstance(numbers, tuple) else None
    if eigenvalue is None:
        yield Fault("eigenvectors", f"no eigenvalue is numbered {numbers}")
        return
    place = f"eigenvectors of eigenvalue {eigenvalue.numbers[0]}"
    printed = ball_at(formula_in(facts["eigenvalue"]), ground.names)
    yield Comparison(place, printed, ground.eigenvalues[eigenvalue.numbers[0]])
    yield from structure(ground, place, eigenvalue.factor, facts)
    yield from whether(
        facts["geometric multiplicity"] == len(eigenvalue.factor.blocks),
        place,
        "they are miscounted",
    )
    signs = 2 if facts["kind"] == "hyperbolic" else 1
    for says, count in (
        ("eigenvector", signs * len(eigenvalue.factor.blocks)),
        ("generalized eigenvector", signs * sum(s - 1 for s in eigenvalue.factor.blocks)),
    ):
        found = [s for s in step.statements if s.says == says]
        yield from whether(len(found) == count, place, f"it has {len(found)} of the kind {says}")


def vector_equation(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """(A - lambda I) v_k = v_(k-1) or 0, with the vectors in print."""
    left, below = statement.sides
    match left:
        case (Symbol("shifted", letter="A", argument=argument), vector) if argument is not None:
            eigenvalue = ball_at(argument, ground.names)
        case _:
            raise TypeError(f"{left} is not the product of A - lambda I and a vector")
    v = _vector(ground, vector)
    product = _less(ground, eigenvalue) * v
    is_zero = isinstance(below, Symbol) and below.kind == "zero"
    expected = acb_mat(v.nrows(), 1) if is_zero else _vector(ground, below)
    yield from agreeing(f"{statement.says} of {_named(vector)}", product, expected)


def eigenvector_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """v_k = …: it steps down under A less its eigenvalue as J has it, and is in P."""
    symbol = statement.sides[0]
    place, number = f"vector {_named(symbol)}", int(letter_of(symbol)[2][0])
    v = _vector(ground, symbol)
    p, j = _needed(ground, "P"), _needed(ground, "J")
    yield from agreeing(f"{place} in P", v, _column(p, number))
    expected = acb_mat(v.nrows(), 1)
    if number > 1:
        expected = _column(p, number - 1) * j[number - 2, number - 1]
    yield from agreeing(place, _less(ground, j[number - 1, number - 1]) * v, expected)


def _vector(ground: Ground, symbol: Side) -> acb_mat:
    found = ground.printed(*letter_of(symbol))
    if found is None:
        raise LookupError(f"{symbol} is used and not given")
    return found


def _named(symbol: Side) -> str:
    _, letter, indices = letter_of(symbol)
    return f"{letter}_{','.join(indices)}"


def _less(ground: Ground, eigenvalue: acb) -> acb_mat:
    return ground.matrix - unit(ground.matrix.nrows()) * eigenvalue


def _column(matrix: acb_mat, number: int) -> acb_mat:
    return acb_mat([[matrix[i, number - 1]] for i in range(matrix.nrows())])


def _needed(ground: Ground, letter: str, indices: tuple[str, ...] = ()) -> acb_mat:
    found = ground.printed("matrix", letter, indices)
    if found is None:
        raise LookupError(f"{letter} is used and not given")
    return found


def basis_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """A P = P J, and P is invertible."""
    indices = letter_of(statement.sides[0])[2]
    p, j = _needed(ground, "P", indices), _needed(ground, "J", indices)
    yield from agreeing(f"A P = P J{_mark(indices)}", ground.matrix * p, p * j)
    determinant = p.det()
    yield from whether(not determinant.is_zero(), "P", "it has no inverse")
    if determinant.contains(0):  # then it has to be settled by a finer look
        nothing = Comparison(f"det P{_mark(indices)}", determinant, determinant)
        yield from whether(not nothing.is_settled, "P", "it has no inverse")
        yield nothing
    if indices:
        for letter, matrix in (("P", p), ("J", j)):
            real = all(entry.imag == 0 for entry in matrix.entries())
            yield from whether(real, f"{letter}{_mark(indices)}", "it is not real")


def form_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """J has blocks along its diagonal; that it is similar to A is proved with P."""
    indices = letter_of(statement.sides[0])[2]
    j = _needed(ground, "J", indices)
    place = f"J{_mark(indices)}"
    reach = 3 if indices else 1  # a pair's cells stand side by side
    for i in range(j.nrows()):
        for k in range(j.ncols()):
            beyond = k - i > reach or i - k > (1 if indices else 0)
            if beyond:
                yield from whether(j[i, k] == 0, f"{place}, entry {(i + 1, k + 1)}", "it is not 0")
            elif k == i + 1 and not indices:
                yield from whether(
                    j[i, k] == 0 or (j[i, k] == 1 and j[i, i].overlaps(j[k, k])),
                    f"{place}, entry {(i + 1, k + 1)}",
                    "it is no 1 within a block",
                )


def inverse_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """P P^(-1) = I."""
    indices = letter_of(statement.sides[0])[2]
    inverse = ground.printed("inverse", "P", indices)
    if inverse is None:
        raise LookupError("the inverse is no matrix")
    product = _needed(ground, "P", indices) * inverse
    yield from agreeing(f"P P^(-1) = I{_mark(indices)}", product, unit(product.nrows()))


def exponential_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """e^(Jt) is the exponential of the J in print, and P e^(Jt) P^(-1) that of A t."""
    symbol, matrix = statement.sides
    indices = letter_of(symbol)[2]
    if not isinstance(matrix, Matrix) or not isinstance(symbol, Symbol):
        raise TypeError("e^(Jt) is no matrix")
    yield from whether(
        symbol.argument == Name(ground.response.model.time), "e^(Jt)", "its time is another letter"
    )
    p, j = _needed(ground, "P", indices), _needed(ground, "J", indices)
    inverse = ground.printed("inverse", "P", indices)
    if inverse is None:
        raise LookupError("P^(-1) is used and not given")
    for instant in ground.instants:
        printed = matrix_at(matrix, instant.names)
        yield from agreeing(f"e^(Jt){_mark(indices)}", printed, (j * instant.time).exp())
        yield from agreeing("P e^(Jt) P^(-1) = e^(At)", p * printed * inverse, instant.transition)


def transition_statement(ground: Ground, statement: Statement) -> Iterator[Finding]:
    """e^(At) entry by entry, and the letters of the product beside it."""
    t = Name(ground.response.model.time)
    first, *between, last = statement.sides
    yield from whether(first == Symbol("transition", argument=t), "e^(At)", "it is another letter")
    for product in between:
        indices = letter_of(product[0])[2] if isinstance(product, tuple) else ()
        letters = (
            Symbol("matrix", indices, letter="P"),
            Symbol("exponential", indices, t, letter="J"),
            Symbol("inverse", indices, letter="P"),
        )
        yield from whether(
            product == letters and all(letter_of(letter) in ground.letters for letter in letters),
            "e^(At) = P e^(Jt) P^(-1)",
            "it names what is not given",
        )
    if not isinstance(last, Matrix):
        raise TypeError("e^(At) is no matrix")
    for instant in ground.instants:
        yield from agreeing("e^(At)", matrix_at(last, instant.names), instant.transition)


def _mark(indices: tuple[str, ...]) -> str:
    return f" ({','.join(indices)})" if indices else ""
