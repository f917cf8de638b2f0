"""Hand-made reports on derivations, of every shape that has to be shown."""

from __future__ import annotations

from fractions import Fraction

from closedform.checking.claim import SourceLine
from closedform.checking.verdict import CheckReport, LineVerdict, Slip, Word
from closedform.errors import Place
from closedform.notation.written.tree import (
    EULER,
    Array,
    Jet,
    Listing,
    Literal,
    Negation,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Range,
    Statement,
    Sum,
    Symbol,
    Written,
)

T = Symbol("t")
LAMBDA = Symbol("lambda")


def num(text: str) -> Literal:
    """Return a number as it is printed."""
    if "." not in text:
        return Literal(Fraction(text))
    places = len(text.partition(".")[2])
    return Literal(Fraction(text), Fraction(1, 10**places), is_decimal=True)


def decay(rate: str) -> Written:
    """Return e^(-rate t)."""
    inside = T if rate == "1" else Product((num(rate), T))
    return Power(EULER, Negation(inside))


def rows(*given: tuple[str, ...]) -> Array:
    """Return a matrix of numbers; a leading minus is a sign."""
    return Array(
        tuple(
            tuple(Negation(num(x[1:])) if x.startswith("-") else num(x) for x in row)
            for row in given
        )
    )


def judged(
    number: int,
    verdict: Word,
    says: str,
    text: str,
    *members: Written,
    relations: tuple[str, ...] | None = None,
    reason: str = "",
    right: Written | None = None,
    slip: Slip | None = None,
    carried_from: int | None = None,
    notes: tuple[str, ...] = (),
) -> LineVerdict:
    """Return a verdict on one line, read as the chain of its members."""
    signs = relations if relations is not None else ("=",) * (len(members) - 1)
    read = (Statement(members, signs),) if members else ()
    place = Place("notes/tanks.tex", line=10 + 4 * number, column=3)
    line = SourceLine(number, text, place, label="eq:trace" if number == 3 else "")
    return LineVerdict(line, says, verdict, reason, right, slip, carried_from, notes, read)


def sound() -> CheckReport:
    """Every line holds, each in another sense."""
    lines = (
        judged(
            1,
            "holds",
            "matrix",
            r"A = \begin{pmatrix}…",
            Symbol("A"),
            rows(("-2", "1"), ("1", "-2")),
        ),
        judged(
            2,
            "holds up to order",
            "eigenvalues",
            r"\lambda = -3, -1",
            LAMBDA,
            Listing((Negation(num("3")), Negation(num("1")))),
            reason="The eigenvalues are -1 and -3; their order is free.",
        ),
        judged(
            3,
            "holds up to scale",
            "eigenvector",
            r"v = (2, 2)^T",
            Symbol("v"),
            rows(("2",), ("2",)),
            reason="It is 2 times the eigenvector (1, 1).",
        ),
        judged(
            4,
            "holds to the digits shown",
            "value x1",
            r"x_1(1) \approx 0.3181",
            Jet("x1", 0, num("1")),
            num("0.3181"),
            relations=("≈",),
        ),
    )
    return CheckReport(
        "tanks", "Two tanks, worked by hand", "notes/tanks.tex", "tanks.toml", "Two tanks", lines
    )


def slipped() -> CheckReport:
    """A sign is lost in line 4; lines 5 to 7 follow from it, and the last could not be read."""
    polynomial = Sum((Power(LAMBDA, num("2")), Product((num("5"), LAMBDA)), num("4")))
    wrong = Listing((num("1"), Negation(num("4"))))
    right = Listing((Negation(num("1")), Negation(num("4"))))
    growing = Power(EULER, T)
    state = Jet("x1")
    lines = (
        judged(1, "holds", "matrix", "A = …", Symbol("A"), rows(("-2", "1"), ("2", "-3"))),
        judged(
            2,
            "holds",
            "characteristic polynomial",
            r"\det(\lambda I - A) = …",
            Product((Sum((LAMBDA, num("2"))), Sum((LAMBDA, num("3"))))),
            polynomial,
        ),
        judged(3, "holds", "", "tr A = -5", Symbol("tr"), Negation(num("5"))),
        judged(
            4,
            "fails",
            "eigenvalues",
            r"\lambda_{1,2} = \frac{5 \pm 3}{2}",
            LAMBDA,
            Quotient(Sum((num("5"), PlusMinus(num("3")))), num("2")),
            wrong,
            reason="The first eigenvalue is -1, not 1. The sum of the eigenvalues has to be the "
            "trace of A, which is -5.",
            right=right,
            slip=Slip("a sign was lost", "before 5 in the numerator", right),
        ),
        judged(
            5,
            "carried",
            "eigenvector v1",
            "v_1 = …",
            Symbol("v_1"),
            rows(("1",), ("3",)),
            reason="It belongs to the value 1 of line 4, which is no eigenvalue.",
            right=rows(("1",), ("1",)),
            carried_from=4,
        ),
        judged(
            6,
            "carried",
            "solution x1",
            "x_1 = 2e^{t} + e^{-4t}",
            state,
            Sum((Product((num("2"), growing)), decay("4"))),
            reason="With the eigenvalues of line 4 this is what follows.",
            right=Sum((Product((num("2"), decay("1"))), decay("4"))),
            carried_from=4,
            notes=("e was read as Euler's number; it is no parameter of the model.",),
        ),
        judged(
            7,
            "carried",
            "value x1",
            r"x_1(0.5) \approx 3.43",
            Jet("x1", 0, num("0.5")),
            num("3.43"),
            relations=("≈",),
            reason="The line before, at t = 0.5.",
            right=num("1.35"),
            carried_from=4,
        ),
        judged(
            8,
            "not read",
            "",
            r"x \overset{!}{\mapsto} \mathfrak{X}^{\dagger}(t)",
            reason="The sign \\overset has no meaning that could be checked. Write the line "
            "without it, or leave it out of the check.",
        ),
    )
    return CheckReport(
        "tanks",
        "Two tanks, worked by hand",
        "notes/tanks.tex",
        "tanks.toml",
        "Two tanks",
        lines,
        case="c^2 < 4*k*m",
    )


HOSTILE = (
    r"\input{/etc/passwd}\write18{touch owned}\def\x{\x}\x % # _ { } ~ ^ $ & \end{document} "
    "]]> <!-- <![CDATA[ << 7*7 >> <% raw %> {{ 7*7 }} \x00\x07\x1b[31m\x9b \udcff 漢 🚀 é “x” "
    "-- --- ``''"
)


def hostile() -> CheckReport:
    """Text that would break out of LaTeX, XML, a terminal or a template, in every place."""
    line = SourceLine(
        1,
        HOSTILE + "\r\n" + r"\begin{verbatim}" + "W" * 3000 + "\\end{verbatim}",
        Place(HOSTILE, HOSTILE, 3, 4),
    )
    unread = LineVerdict(line, HOSTILE, "not read", HOSTILE + "W" * 300, notes=(HOSTILE,))
    statement = Statement(
        (Symbol("x"), num("2")),
        ("=",),
        unit=HOSTILE,
        conditions=(Range((T, num("2")), ("≥",)),),
        note=HOSTILE,
    )
    failing = LineVerdict(
        SourceLine(2, HOSTILE),
        "solution x",
        "fails",
        HOSTILE,
        num("3"),
        Slip(HOSTILE, HOSTILE, num("3")),
        read=(statement,),
    )
    return CheckReport(
        "hostile", HOSTILE, HOSTILE, HOSTILE, HOSTILE, (unread, failing), case=HOSTILE
    )


def wide() -> CheckReport:
    """Formulas that no line can hold: sums, products, fractions, lists, matrices, deep nesting."""
    many = Sum(tuple(Product((Symbol(f"c_{k}"), decay(str(k)))) for k in range(1, 40)))
    negative = Sum(tuple(Negation(term) for term in many.terms))
    long = Power(Symbol("alpha_beta"), Sum(tuple(Symbol(f"k_{k}") for k in range(1, 90))))
    deep: Written = T
    for _ in range(90):
        deep = Power(EULER, Sum((deep, num("1"))))
    square = Array(tuple(tuple(decay(str(9 * i + j)) for j in range(1, 7)) for i in range(6)))
    broad = Array(tuple(tuple(Sum(many.terms[i : i + 3]) for i in range(4)) for _ in range(2)))
    tall = Array(tuple((num(str(k % 5)),) for k in range(1, 31)))
    shown: tuple[Written, ...] = (
        many,
        Product((num("2"), decay("3"), negative, num("7"))),
        Product((many, many)),
        Product(tuple(decay(str(10**k)) for k in range(12))),
        Quotient(many, Sum((Symbol("a"), Symbol("b")))),
        Quotient(many, negative),
        Quotient(num("1"), Sum(many.terms[:14])),
        Listing(many.terms),
        Negation(many),
        Sum((Symbol("a"), many, Negation(negative))),
        long,
        deep,
        num("7" * 400),
        square,
        broad,
        tall,
        Product((square, Symbol("x"), tall)),
        Sum(tuple(Symbol(f"c_{k}") for k in range(3000))),
        Power(EULER, many),
    )
    lines = tuple(
        judged(
            number,
            "fails",
            "generalized eigenvector of the eigenvalue lambda_12345",
            "…",
            Symbol("y"),
            formula,
            formula,
            right=formula,
        )
        for number, formula in enumerate(shown, start=1)
    )
    return CheckReport("wide", "Wide " + "W" * 40, "w" * 120 + ".tex", "wide.toml", "", lines)


def one_line() -> CheckReport:
    """A report with one line that holds."""
    return CheckReport("one", "One line", "one.toml", "one.toml", "", (sound().lines[0],))


CHECKED_SAMPLES = {
    "sound": sound,
    "slipped": slipped,
    "hostile": hostile,
    "wide": wide,
    "one line": one_line,
}
