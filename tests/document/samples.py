"""Hand-made derivations of every shape that the templates have to set."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from closedform.derivation.step import (
    IMAGINARY_UNIT,
    Derivation,
    Matrix,
    Side,
    Statement,
    Step,
    Symbol,
)
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    number,
)

T, LAM = Name("t"), Name("lambda")
A, X, V = Symbol("matrix", letter="A"), Symbol("vector", letter="x"), Symbol("vector", letter="v")
P, J, P_INVERSE = Symbol("matrix", letter="P"), Symbol("matrix", letter="J"), Symbol("inverse")
TRANSITION = Symbol("transition")
CAUTIONS = Step("cautions")


def q(value: str | int | Expression) -> Expression:
    """A number from "3/2", a name from "x1"; a formula is left alone."""
    if isinstance(value, int):
        return number(value)
    if isinstance(value, str):
        return number(Fraction(value)) if value.lstrip("-")[0].isdigit() else Name(value)
    return value


def prod(*factors: str | int | Expression) -> Expression:
    return Product(tuple(map(q, factors)))


def add(*terms: str | int | Expression) -> Expression:
    return Sum(tuple(map(q, terms)))


def neg(term: str | int | Expression) -> Expression:
    return Negation(q(term))


def exp(*factors: str | int | Expression) -> Expression:
    if isinstance(factors[0], int) and factors[0] < 0:
        return Call("exp", neg(prod(-factors[0], *factors[1:], T)))
    return Call("exp", prod(*factors, T))


def root(value: str | int | Expression) -> Expression:
    return Call("sqrt", q(value))


def cos(*factors: str | int | Expression) -> Expression:
    return Call("cos", prod(*factors, T))


def sin(*factors: str | int | Expression) -> Expression:
    return Call("sin", prod(*factors, T))


def matrix(*rows: Sequence[str | int | Expression]) -> Matrix:
    return Matrix(tuple(tuple(map(q, row)) for row in rows))


def column(*entries: str | int | Expression) -> Matrix:
    return matrix(*((entry,) for entry in entries))


def vector(letter: str, *indices: str, t: Expression | None = None) -> Symbol:
    return Symbol("vector", indices, t, letter)


def scalar(letter: str, *indices: str, t: Expression | None = None) -> Symbol:
    return Symbol("scalar", indices, t, letter)


def says(what: str, *sides: Side) -> Statement:
    return Statement(what, sides)


def model(
    title: str,
    states: tuple[str, ...],
    a: Matrix,
    x0: Matrix,
    *,
    outputs: tuple[Statement, ...] = (),
    summary: str = "",
) -> Step:
    return Step(
        "model",
        (
            says("system", Symbol("derivative", letter="x"), (A, X)),
            says("matrix", A, a),
            says("initial", vector("x", t=number(0)), vector("x", "0"), x0),
            *outputs,
        ),
        {
            "title": title,
            "summary": summary,
            "states": states,
            "time": "t",
            "n": len(states),
            "outputs": [statement.says for statement in outputs],
        },
    )


def polynomial(*sides: Expression) -> Step:
    return Step(
        "characteristic_polynomial",
        (
            says(
                "characteristic polynomial",
                Symbol("characteristic polynomial"),
                Symbol("determinant"),
                *sides,
            ),
        ),
    )


def row(
    eigenvalue: Side,
    decimal: str,
    *,
    multiplicity: int = 1,
    blocks: tuple[int, ...] = (1,),
    meaning: str = "real",
) -> dict[str, object]:
    return {
        "eigenvalue": eigenvalue,
        "multiplicity": multiplicity,
        "index": max(blocks),
        "blocks": blocks,
        "meaning": meaning,
        "decimal": decimal,
    }


def vectors(
    eigenvalue: Expression,
    *statements: Statement,
    multiplicity: int = 1,
    index: int = 1,
    geometric: int = 1,
    conjugate: bool = False,
) -> Step:
    return Step(
        "eigenvectors",
        statements,
        {
            "eigenvalue": eigenvalue,
            "multiplicity": multiplicity,
            "index": index,
            "geometric multiplicity": geometric,
            "conjugate": conjugate,
        },
        ("eigenvalues",),
    )


def checks(*items: str) -> Step:
    rows: list[dict[str, object]] = [
        {
            "item": says("", Symbol("derivative", argument=T), (A, vector("x", t=T))),
            "outcome": "proved",
            "how": "Every function in the solution was differentiated and the difference of both "
            "sides collected by independent functions of t: all coefficients vanish.",
        },
        {
            "item": says("", vector("x", t=number(0)), vector("x", "0")),
            "outcome": "proved",
            "how": "t = 0 was put into the solution; the difference is the zero vector.",
        },
    ]
    rows += [{"item": item, "outcome": "not attempted", "how": "There is none."} for item in items]
    return Step("verification", (), {"rows": rows})


def two_real() -> Derivation:
    """Two distinct real eigenvalues, -1 and -5/2."""
    a = matrix(("-3/2", "1/2"), (1, -2))
    e1, e2 = exp(-1), Call("exp", neg(prod("5/2", T)))
    third = Number(Fraction(1, 3))
    return Derivation(
        "Two tanks with a return line",
        (
            model(
                "",
                ("h_1", "h_2"),
                a,
                column(3, 0),
                outputs=(says("output", scalar("h_sum"), add("h_1", "h_2")),),
                summary="Levels above rest of two tanks that exchange water & lose 50 % per hour.",
            ),
            polynomial(
                add(Power(LAM, q(2)), prod("7/2", LAM), "5/2"),
                prod(add(LAM, 1), add(LAM, "5/2")),
            ),
            Step(
                "eigenvalues",
                (
                    says("eigenvalues", scalar("lambda", "1"), q(-1)),
                    says("eigenvalues", scalar("lambda", "2"), q("-5/2")),
                ),
                {"field": "Q", "rows": [row(q(-1), "-1"), row(q("-5/2"), "-2.5")]},
            ),
            vectors(
                q(-1),
                says(
                    "eigenvector equation",
                    (Symbol("shifted", argument=q(-1)), vector("v", "1")),
                    Symbol("zero"),
                ),
                says("eigenvector", vector("v", "1"), column(1, 1)),
            ),
            vectors(q("-5/2"), says("eigenvector", vector("v", "2"), column(1, -2))),
            Step(
                "jordan_form",
                (
                    says("P", P, matrix((1, 1), (1, -2))),
                    says("J", J, matrix((-1, 0), (0, "-5/2"))),
                    says("P inverse", P_INVERSE, matrix(("2/3", "1/3"), ("1/3", "-1/3"))),
                ),
                {"diagonal": True},
                ("eigenvectors",),
            ),
            Step(
                "exponential_of_form",
                (says("exp J", Symbol("exponential"), matrix((e1, 0), (0, e2))),),
                {"diagonal": True, "real": False},
            ),
            Step(
                "transition",
                (
                    says(
                        "exp A",
                        TRANSITION,
                        (P, Symbol("exponential"), P_INVERSE),
                        matrix(
                            (
                                prod(third, add(prod(2, e1), e2)),
                                prod(third, add(e1, neg(e2))),
                            ),
                            (
                                prod(third, add(prod(2, e1), neg(prod(2, e2)))),
                                prod(third, add(e1, prod(2, e2))),
                            ),
                        ),
                    ),
                ),
                {"route": "form"},
            ),
            Step(
                "solution",
                (
                    says(
                        "solution",
                        vector("x", t=T),
                        (TRANSITION, vector("x", "0")),
                        column(add(prod(2, e1), e2), add(prod(2, e1), neg(prod(2, e2)))),
                    ),
                    says("solution of state", scalar("h_1", t=T), add(prod(2, e1), e2)),
                    says(
                        "solution of state",
                        scalar("h_2", t=T),
                        add(prod(2, e1), neg(prod(2, e2))),
                    ),
                ),
            ),
            Step(
                "outputs",
                (says("output", scalar("h_sum", t=T), add(prod(4, e1), neg(e2))),),
            ),
            Step(
                "values",
                (),
                {
                    "header": [T, scalar("h_1", t=T), scalar("h_2", t=T)],
                    "rows": [
                        ["0", "3", "0"],
                        ["0.5", "1.499566", "0.6400508"],
                        ["10", "9.079986e-5", "9.079983e-5"],
                        ["12", "-1.228842e-5", "\u22120.00001228842"],
                    ],
                    "digits": 7,
                },
            ),
            checks(),
            CAUTIONS,
        ),
    )


def oscillator() -> Derivation:
    """A damped oscillator in real form, eigenvalues -1/2 +- i sqrt(23)/2."""
    w = Quotient(root(23), q(2))
    wt = prod(w, T)
    c, s = Call("cos", wt), Call("sin", wt)
    e = Call("exp", neg(prod("1/2", T)))
    over = Quotient(q(1), root(23))
    jr = Symbol("matrix", ("R",), letter="J")
    ejr = Symbol("exponential", ("R",), letter="J")
    lam = add("-1/2", prod(IMAGINARY_UNIT, w))
    return Derivation(
        "Mass on a spring with a dashpot",
        (
            model("", ("x", "v"), matrix((0, 1), (-6, -1)), column(1, 0)),
            polynomial(add(Power(LAM, q(2)), LAM, 6)),
            Step(
                "eigenvalues",
                (
                    says(
                        "eigenvalues",
                        scalar("lambda", "1", "2"),
                        Symbol("pair", ("1", "2"), parts=(q("-1/2"), w)),
                    ),
                ),
                {
                    "field": "Q",
                    "rows": [
                        row(
                            Symbol("pair", parts=(q("-1/2"), w)),
                            "-0.5 ± 2.397916i",
                            meaning="conjugate pair",
                        )
                    ],
                },
            ),
            vectors(
                lam,
                says("eigenvector", vector("u"), column(1, lam)),
                conjugate=True,
            ),
            Step(
                "real_form",
                (
                    says("P", P, matrix((1, 0), ("-1/2", w))),
                    says("real form", jr, matrix(("-1/2", w), (neg(w), "-1/2"))),
                    says(
                        "P inverse",
                        P_INVERSE,
                        matrix((1, 0), (over, Quotient(q(2), root(23)))),
                    ),
                ),
                {"why": "The model is real, and so is the motion."},
            ),
            Step(
                "exponential_of_form",
                (
                    says(
                        "exp J",
                        ejr,
                        matrix((prod(e, c), prod(e, s)), (neg(prod(e, s)), prod(e, c))),
                    ),
                ),
                {"diagonal": False, "chains": False, "real": True},
            ),
            Step(
                "transition",
                (
                    says(
                        "exp A",
                        TRANSITION,
                        (P, ejr, P_INVERSE),
                        matrix(
                            (
                                prod(e, add(c, prod(over, s))),
                                prod(e, Quotient(q(2), root(23)), s),
                            ),
                            (
                                neg(prod(e, Quotient(q(12), root(23)), s)),
                                prod(e, add(c, neg(prod(over, s)))),
                            ),
                        ),
                    ),
                ),
            ),
            Step(
                "solution",
                (
                    says("solution of state", scalar("x", t=T), prod(e, add(c, prod(over, s)))),
                    says(
                        "solution of state",
                        scalar("v", t=T),
                        neg(prod(e, Quotient(q(12), root(23)), s)),
                    ),
                ),
            ),
            checks("Stability of the plant"),
            CAUTIONS,
        ),
    )


def defective() -> Derivation:
    """One eigenvalue -2 with one chain of three."""
    e = exp(-2)
    shifted = Symbol("shifted", argument=q(-2))
    half = prod("1/2", Power(T, q(2)))
    jordan = matrix((-2, 1, 0), (0, -2, 1), (0, 0, -2))
    expj = matrix(
        (e, prod(T, e), prod("1/2", Power(T, q(2)), e)),
        (0, e, prod(T, e)),
        (0, 0, e),
    )
    return Derivation(
        "Three equal stages in series",
        (
            model(
                "",
                ("q_1", "q_2", "q_3"),
                matrix((-2, 0, 0), (1, -2, 0), (0, 1, -2)),
                column(1, 0, 0),
            ),
            polynomial(
                add(Power(LAM, q(3)), prod(6, Power(LAM, q(2))), prod(12, LAM), 8),
                Power(add(LAM, 2), q(3)),
            ),
            Step(
                "eigenvalues",
                (says("eigenvalues", scalar("lambda", "1"), q(-2)),),
                {"field": "Q", "rows": [row(q(-2), "-2", multiplicity=3, blocks=(3,))]},
            ),
            vectors(
                q(-2),
                says("eigenvector equation", (shifted, vector("v", "1")), Symbol("zero")),
                says("eigenvector", vector("v", "1"), column(0, 0, 1)),
                says(
                    "generalized eigenvector equation",
                    (shifted, vector("v", "2")),
                    vector("v", "1"),
                ),
                says("generalized eigenvector", vector("v", "2"), column(0, 1, 0)),
                says(
                    "generalized eigenvector equation",
                    (shifted, vector("v", "3")),
                    vector("v", "2"),
                ),
                says("generalized eigenvector", vector("v", "3"), column(1, 0, 0)),
                multiplicity=3,
                index=3,
            ),
            Step(
                "jordan_form",
                (
                    says("P", P, matrix((0, 0, 1), (0, 1, 0), (1, 0, 0))),
                    says("J", J, jordan),
                    says("P inverse", P_INVERSE, matrix((0, 0, 1), (0, 1, 0), (1, 0, 0))),
                ),
                {"diagonal": False},
            ),
            Step("exponential_of_form", (says("exp J", Symbol("exponential"), expj),)),
            Step(
                "transition",
                (
                    says(
                        "exp A",
                        TRANSITION,
                        (P, Symbol("exponential"), P_INVERSE),
                        matrix((e, 0, 0), (prod(T, e), e, 0), (prod(half, e), prod(T, e), e)),
                    ),
                ),
            ),
            Step(
                "solution",
                (
                    says("solution of state", scalar("q_1", t=T), e),
                    says("solution of state", scalar("q_2", t=T), prod(T, e)),
                    says("solution of state", scalar("q_3", t=T), prod(half, e)),
                ),
            ),
            checks(),
            CAUTIONS,
        ),
    )


def one_state() -> Derivation:
    """x' = -x/tau of one state; n = 1 in every sentence."""
    e = Call("exp", neg(prod("1/4", T)))
    return Derivation(
        "Discharge of a capacitor",
        (
            model("", ("v_C",), matrix(("-1/4",)), column(5)),
            polynomial(add(LAM, "1/4")),
            Step(
                "eigenvalues",
                (says("eigenvalues", scalar("lambda", "1"), q("-1/4")),),
                {"field": "Q", "rows": [row(q("-1/4"), "-0.25")]},
            ),
            vectors(q("-1/4"), says("eigenvector", vector("v", "1"), column(1))),
            Step("transition", (says("exp A", TRANSITION, matrix((e,))),), {"route": "known"}),
            Step("solution", (says("solution of state", scalar("v_C", t=T), prod(5, e)),)),
            checks(),
            CAUTIONS,
        ),
    )


def hostile() -> Derivation:
    """A title and a summary full of TeX commands, and letters that TeX has no glyph for."""
    words = r"\input{/etc/passwd} \write18{x} % # _ { } ~ ^ $ & << 7*7 >> <% raw %> \end{document}"
    plain = one_state()
    step = plain.steps[0]
    changed = Step(step.kind, step.statements, {**step.facts, "summary": f"{words} ωΩ 漢 \x07 “é”"})
    return Derivation(words + " " + "W" * 200, (changed, *plain.steps[1:]))


def wide_terms(seed: int, count: int) -> Expression:
    """A long sum of modes with coefficients that differ from entry to entry."""
    terms: list[str | int | Expression] = []
    for k in range(count):
        coefficient = Fraction((seed * 7919 + 31 * k) % 9973 + 1, 1009 + 2 * k)
        mode = exp(-(k + 1)) if k % 2 else prod(exp(-(k + 1)), cos(root(k + 2)))
        term = prod(number(coefficient), mode)
        terms.append(neg(term) if (seed + k) % 3 == 0 else term)
    return add(*terms)


def six_wide() -> Derivation:
    """Six states; entries of e^(At) long enough to need the entry-by-entry list."""
    n = 6
    a = matrix(*(tuple((i * j) % 5 - 2 for j in range(1, n + 1)) for i in range(1, n + 1)))
    entries = [[wide_terms(6 * i + j + 1, 6) for j in range(n)] for i in range(n)]
    entries[0][5] = q(0)
    entries[5][0] = entries[2][3] = entries[1][1]
    p = matrix(
        *(tuple(add(i + 1, prod(j + 2, root(3 + i + j))) for j in range(n)) for i in range(n))
    )
    names = tuple(f"x{i}" for i in range(1, n + 1))
    return Derivation(
        "Six coupled compartments",
        (
            model("", names, a, column(*range(1, n + 1))),
            polynomial(add(*(prod(1234 + k, Power(LAM, q(n - k))) for k in range(n)), 77)),
            Step("eigenvalues", (), {"rows": [row(wide_terms(1, 1), "-1")]}),
            Step("jordan_form", (says("P", P, p), says("J", J, a))),
            Step(
                "transition",
                (
                    says(
                        "exp A",
                        TRANSITION,
                        (P, Symbol("exponential"), P_INVERSE),
                        Matrix(tuple(map(tuple, entries))),
                    ),
                ),
            ),
            Step(
                "solution",
                (
                    says("solution", vector("x", t=T), column(*(entry[0] for entry in entries))),
                    *(
                        says(
                            "solution of state",
                            scalar(name, t=T),
                            prod(exp(-9), wide_terms(i, 12)),
                        )
                        for i, name in enumerate(names)
                    ),
                    says(
                        "solution of state",
                        scalar("x_sum", t=T),
                        Quotient(wide_terms(3, 9), q("1234567")),
                    ),
                ),
            ),
            Step(
                "values",
                (),
                {
                    "header": [T, *(scalar(name, t=T) for name in names), scalar("x_sum", t=T)],
                    "rows": [
                        [f"{k / 10}", *(f"-{k}.0123456789e-{k}" for _ in range(n + 1))]
                        for k in range(60)
                    ],
                    "digits": 11,
                },
            ),
            checks(),
            CAUTIONS,
        ),
    )


def ten_named() -> Derivation:
    """Ten states whose eigenvalues are named roots; e^(At) through the resolvent."""
    n = 10
    names = tuple(f"x_{i}" for i in range(1, n + 1))
    band = matrix(
        *(tuple(-2 if i == j else 1 if abs(i - j) == 1 else 0 for j in range(n)) for i in range(n))
    )
    omegas = [f"omega_{k}" for k in range(1, n // 2 + 1)]
    g = add(*(Quotient(sin(w), prod(w, add(1, prod(3, Power(q(w), q(2)))))) for w in omegas))
    entries = tuple(
        tuple(
            add(*(prod(f"{(i + 2 * j + k) % 7 + 1}/{k + 3}", f"c_{k + 1}", cos(w))
                  for k, w in enumerate(omegas)))
            for j in range(n)
        )
        for i in range(n)
    )  # fmt: skip
    g_symbol = Symbol("scalar", argument=T, letter="g")
    return Derivation(
        "A chain of five equal masses",
        (
            model("", names, band, column(1, *([0] * (n - 1)))),
            polynomial(add(*(prod(k * k + 11, Power(LAM, q(n - k))) for k in range(0, n, 2)), 1)),
            Step("eigenvalues", (), {"field": "Q(sqrt(2), sqrt(3))", "rows": []}),
            Step(
                "named_roots",
                (
                    says(
                        "polynomial",
                        Symbol("characteristic polynomial"),
                        add(*(prod(k * k + 11, Power(LAM, q(n - k))) for k in range(0, n, 2)), 1),
                    ),
                ),
                {
                    "rows": [
                        {
                            "name": Name(w),
                            "interval": ("1.21", "1.22") if i else None,
                            "decimal": f"1.2{i}34567",
                        }
                        for i, w in enumerate(omegas)
                    ],
                    "even": True,
                },
            ),
            Step(
                "resolvent",
                (
                    says(
                        "expansion",
                        TRANSITION,
                        Symbol(
                            "sum",
                            parts=tuple(
                                (
                                    Symbol("matrix", (str(k),), letter="R"),
                                    Symbol("scalar", argument=T, letter="g", order=k),
                                )
                                for k in range(n)
                            ),
                        ),
                    ),
                    says("impulse response", g_symbol, g),
                    says(
                        "residue matrix", Symbol("matrix", ("9",), letter="R"), Symbol("identity")
                    ),
                    says("residue matrix", Symbol("matrix", ("8",), letter="R"), band),
                ),
            ),
            Step(
                "transition",
                (says("exp A", TRANSITION, Matrix(entries)),),
                {"layout": "entries", "route": "resolvent"},
            ),
            Step(
                "solution",
                (
                    says("solution", vector("x", t=T), column(*(entry[0] for entry in entries))),
                    *(
                        says("solution of state", scalar(name, t=T), entries[i][0])
                        for i, name in enumerate(names)
                    ),
                ),
            ),
            Step(
                "abbreviations",
                (),
                {
                    "rows": [
                        {
                            "name": Name(f"c_{k}"),
                            "definition": Quotient(q(1), add(1, prod(3, Power(q(w), q(2))))),
                            "decimal": "0.1234567",
                        }
                        for k, w in enumerate(omegas, start=1)
                    ]
                },
            ),
            checks(),
            CAUTIONS,
        ),
    )


def many_states() -> Derivation:
    """Forty-two states: matrices taller than a page and wider than the line, mostly zero."""
    n = 42
    chain = matrix(
        *(tuple(-2 if i == j else "1/3" if i == j + 1 else 0 for j in range(n)) for i in range(n))
    )
    full = matrix(*(tuple((i * j) % 9 - 4 for j in range(24)) for i in range(24)))
    names = tuple(f"x_{i}" for i in range(1, n + 1))
    return Derivation(
        "A cascade",
        (
            model("", names, chain, column(*range(n))),
            Step(
                "jordan_form",
                (
                    says("P", P, full),
                    says("J", J, chain),
                    says(
                        "P inverse", P_INVERSE, matrix(*((f"{k}/7",) * 24 for k in range(90, 114)))
                    ),
                ),
            ),
            Step(
                "solution",
                (
                    says(
                        "solution", vector("x", t=T), column(*(prod(k, exp(-k)) for k in range(n)))
                    ),
                ),
            ),
            Step(
                "outputs",
                (
                    says("output", scalar("y", t=T), add(*names, *names)),
                    says("output", scalar("z", t=T), q(-1)),
                ),
            ),
        ),
    )


SAMPLES = {
    "many states": many_states,
    "two real": two_real,
    "oscillator": oscillator,
    "defective": defective,
    "one state": one_state,
    "hostile": hostile,
    "six wide": six_wide,
    "ten named": ten_named,
}
