"""Hand-made derivations of every shape that the templates have to set."""

from __future__ import annotations

from fractions import Fraction

from closedform.derivation.step import IMAGINARY_UNIT, Derivation, Step, Symbol
from closedform.notation.expression import Call, Number, Power, Quotient
from tests.document.making import (
    CAUTIONS,
    LAM,
    P_INVERSE,
    TRANSITION,
    J,
    P,
    T,
    add,
    checks,
    column,
    exp,
    matrix,
    model,
    neg,
    polynomial,
    prod,
    q,
    root,
    row,
    says,
    scalar,
    vector,
    vectors,
)
from tests.document.wide_samples import many_states, six_wide, ten_named


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
                {"field": "Q", "named": False, "rows": [row(q(-1), "-1"), row(q("-5/2"), "-2.5")]},
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
            vectors(
                q("-5/2"),
                says("eigenvector", vector("v", "2"), column(1, -2)),
                numbers=(2,),
            ),
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
                {"diagonal": True, "real": False, "chained": False},
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
                    "named": False,
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
                numbers=(1, 2),
                kind="circular",
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
                {"chained": False},
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
                {"diagonal": False, "real": True, "chained": False},
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
                {"route": "form"},
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
                {
                    "field": "Q",
                    "named": False,
                    "rows": [row(q(-2), "-2", multiplicity=3, blocks=(3,))],
                },
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
            Step(
                "exponential_of_form",
                (says("exp J", Symbol("exponential"), expj),),
                {"diagonal": False, "real": False, "chained": True},
            ),
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
                {"route": "form"},
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
                {"field": "Q", "named": False, "rows": [row(q("-1/4"), "-0.25")]},
            ),
            vectors(q("-1/4"), says("eigenvector", vector("v", "1"), column(1))),
            Step("transition", (says("exp A", TRANSITION, matrix((e,))),), {"route": "resolvent"}),
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
