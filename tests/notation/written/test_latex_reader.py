"""LaTeX formulas, feature by feature: what they mean, what is refused, and that nothing hangs."""

from __future__ import annotations

import pickle

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from closedform.errors import InputError, Place
from closedform.notation.written.plain_form import plain_statement
from closedform.notation.written.reader import LONGEST, read_latex
from closedform.notation.written.tree import Declared, Identity, Jet, Literal, Symbol, walk
from closedform.notation.written.written_errors import (
    NotReadError,
    UnbalancedError,
    UnexpectedPartError,
    UnknownCommandError,
    UnknownEnvironmentError,
    UnusableNotationError,
    WrittenDepthError,
    WrittenLengthError,
)

DECLARED = Declared(
    states=frozenset({"x", "y", "i", "x_1", "x_2", "xvec"}),
    parameters=frozenset(
        {"k", "m", "c", "omega", "omega_n", "omega_d", "zeta", "tau", "R", "L", "C", "a", "b"}
        | {"k12", "lamda_1", "phi", "F_0", "Bi", "m_eff", "t_1"}
    ),
    inputs=frozenset({"f"}),
    matrices=frozenset({"A", "Phi"}),
)

FEATURES = [
    # products and arguments
    (r"2t\cos 2t", "2*t*cos(2*t)"),
    (r"RC\,t", "R*C*t"),
    (r"\sin 2\omega t\cos\omega t", "sin(2*omega*t)*cos(omega*t)"),
    (r"\cos\tfrac{\sqrt7}{2}t", "cos((sqrt(7)/2)*t)"),
    (r"\sin^2 t+\sin^{-1}x", "sin(t)^2 + asin(x)"),
    (r"\sin t e^{-t}", "sin(t)*exp(-t)"),
    (r"\sin\omega_d(t-t_1)", "sin(omega_d*(t - t_1))"),
    (r"\cos t\,(1+t)", "cos(t)*(1 + t)"),
    (r"\cos(t)(1+t)", "cos(t)*(1 + t)"),
    (r"\sin 2\pi\cdot 50t", "sin(2*pi*50*t)"),
    (r"\cos{\omega t}\,t", "cos(omega*t)*t"),
    (r"\ln\left|\frac{x}{y}\right|", "ln(abs(x/y))"),
    (r"exp(-2t)+sin(t)", "exp(-2*t) + sin(t)"),
    (r"\operatorname{atan2}(b,a)", "atan2(b, a)"),
    (r"-2^2", "-2^2"),
    (r"a/b/c", "(a/b)/c"),
    (r"2\cdot(-3)", "2*(-3)"),
    # fractions and roots
    (r"\frac12+\tfrac{1}{3}+\dfrac ab", "1/2 + 1/3 + a/b"),
    (r"{a \over b}t", "(a/b)*t"),
    (r"e^{-t/RC}", "exp(-t/(R*C))"),
    (r"\sqrt[3]{k/m}\sqrt2", "(k/m)^(1/3)*sqrt(2)"),
    # brackets and spaces
    (r"\Big\{1+\big[2-t\big]\Bigr\}~t", "(1 + (2 - t))*t"),
    (r"\left\lbrace a\right\rbrace\hspace{2pt}b\phantom{x}", "a*b"),
    (r"|a||b|+\lvert c\rvert", "abs(a)*abs(b) + abs(c)"),
    # fonts and accents
    (r"{\rm e}^{-t}\mathrm{e}^{\mathrm{j}\omega t}", "exp(-t)*exp(i*omega*t)"),
    (r"\bar c\hat F_0\dot{x}_1", "cbar*Fhat_0*x_1'"),
    (r"\mathit{Bi}\,m_\mathrm{eff}k_{12}", "Bi*m_eff*k12"),
    (r"\omega_{\mathrm{n},1}T_{1/2}\lambda^*", "omega_n_1*T_1_2*lambda_star"),
    (r"\Delta T=T_1-T_2", "DeltaT = T_1 - T_2"),
    # time
    (r"\ddot x+x''+x^{(3)}", "x'' + x'' + x'''"),
    (r"\frac{\mathrm{d}^2x}{\mathrm{d}t^2}=\frac{d}{dt}y", "x'' = y'"),
    (r"L\frac{di}{dt}=dx/dt", "L*i' = x'"),
    (r"\dot x(0^+)=x(t-2)", "x'(0) = x(t - 2)"),
    (r"\left.\frac{dx}{dt}\right|_{t=0}=\dot y\big|_{t=2}", "x'(0) = y'(2)"),
    (r"k(1-t)\,x(1-t)", "k*(1 - t)*x(1 - t)"),
    (r"3\cdot1(t)+H(t-a)-\sigma(t)", "3*step(t) + step(t - a) - step(t)"),
    (r"\delta(t-a)", "delta(t - a)"),
    # numbers
    (r"0{,}25+1,5", "0.25 + 1.5"),
    (r"12\,000+1~500", "12000 + 1500"),
    (r"1.2\times10^{-3}t", "0.0012*t"),
    (r"\num{1.2e-3}+\ang{30}", "0.0012 + 30*(pi/180)"),
    (r"45^\circ", "45*(pi/180)"),
    (r"3.2\text{e-4}", "0.00032"),
    # matrices
    (r"\begin{bmatrix}1&2\\[6pt]3&4\\\end{bmatrix}", "[[1, 2], [3, 4]]"),
    (r"\left[\begin{array}{c|c}1&2\\\hline 3&4\end{array}\right]", "[[1, 2], [3, 4]]"),
    (r"(1,-2)^T", "transpose([[1, -2]])"),
    (r"[0\;1\;t]^\top", "transpose([[0, 1, t]])"),
    (r"\det(\lambda I-A)=|sI-A|", "det(lambda*I - A) = det(s*I - A)"),
    (r"\begin{vmatrix}1&2\\3&4\end{vmatrix}", "det([[1, 2], [3, 4]])"),
    (r"\mathbf{\dot x}=\mathbf{Ax}", "xvec' = A*xvec"),
    (r"\operatorname{diag}(1,2)", "diag(1, 2)"),
    (r"\Phi(t)=P^{-1}e^{Jt}P", "Phi = P^(-1)*exp(J*t)*P"),
    # operators
    (r"\int_0^t f(\tau)\,d\tau", "integral(f(tau), tau, 0, t)"),
    (r"\int\mathrm{d}t\,e^{-t}", "integral(exp(-t), t)"),
    (r"\sum_{n=0}^{\infty}\frac{(At)^n}{n!}", "sum((A*t)^n/factorial(n), n, 0, oo)"),
    (r"\sum_{i=1}^{2}a\,i^2", "sum(a*i^2, i, 1, 2)"),
    (r"\lim_{t\to\infty}x(t)", "limit(x, t, oo)"),
    (r"\mathcal{L}^{-1}\left\{\frac1s\right\}", "inverse_laplace(1/s)"),
    (r"\Bigl[-e^{-\tau}\Bigr]_0^t", "taken_at(-exp(-tau), tau, t, 0)"),
    (r"\Re\{e^{\mathrm{i}t}\}", "re(exp(i*t))"),
    # several
    (r"\lambda_{1,2}=-1\pm\mathrm j\sqrt3", "lambda_1_2 = -1 ± i*sqrt(3)"),
    (r"\lambda=-1,-2,-3", "lambda = {-1, -2, -3}"),
    (r"\lambda\in\{-1,-2\}", "lambda = {-1, -2}"),
    (r"a\approx b\leq c\neq k", "a ~= b <= c != k"),
]


def plain(text: str, declared: Declared = DECLARED) -> list[str]:
    return [plain_statement(statement) for statement in read_latex(text, declared).statements]


@pytest.mark.parametrize(("text", "meaning"), FEATURES)
def test_a_formula_means_what_is_set(text: str, meaning: str) -> None:
    assert plain(text) == [meaning]


@pytest.mark.parametrize(
    ("text", "statements"),
    [
        (r"x(0)=1,\quad \dot x(0)=0.", ["x(0) = 1", "x'(0) = 0"]),
        (r"x=1\text{ und }y=2;", ["x = 1", "y = 2"]),
        (r"x+1=3\Rightarrow x=2", ["x + 1 = 3", "x = 2"]),
        (r"\begin{align}x&=1,\label{a}\\y&=2\nonumber\end{align}", ["x = 1", "y = 2"]),
        (r"\begin{align*}x&=1&y&=2\end{align*}", ["x = 1", "y = 2"]),
        (r"\begin{eqnarray}x&=&1\\y&=&2\end{eqnarray}", ["x = 1", "y = 2"]),
        (r"\begin{cases}\dot x=y\\\dot y=-x\end{cases}", ["x' = y", "y' = -x"]),
        (r"\left\{\begin{aligned}\dot x&=y\\y&=1\end{aligned}\right.", ["x' = y", "y = 1"]),
        (r"\begin{aligned}x&=1+t\\&=t+1\end{aligned}", ["x = 1 + t = t + 1"]),
        (r"\begin{multline}x=1\\-t\end{multline}", ["x = 1 - t"]),
        ("x=1 % why\n +t", ["x = 1 + t"]),
        (r"x=1\quad\text{for }0\le t<2", ["x = 1 for 0 <= t < 2"]),
        (r"x=1\quad(t>0)", ["x = 1 for t > 0"]),
        (r"x&=1&y&=2", ["x = 1", "y = 2"]),
        (r"\begin{cases}0&(t<0)\\1&t\in[0,2)\end{cases}", ["{0 for t < 0; 1 for 0 <= t < 2}"]),
        (r"x=1,\ t\in[0,2)", ["x = 1 for 0 <= t < 2"]),
        (
            r"f(t)=\begin{cases}1&\text{if }t<1\\0&\text{otherwise}\end{cases}",
            ["f = {1 for t < 1; 0 otherwise}"],
        ),
    ],
)
def test_statements_are_parted(text: str, statements: list[str]) -> None:
    assert plain(text) == statements


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        (r"\omega=10\,\mathrm{rad/s}", "rad/s"),
        (r"\omega=10\,\mathrm{rad}\,\mathrm{s}^{-1}", "rad s^-1"),
        (r"c=0.4\,\mathrm{N\,s/m}", "N s/m"),
        (r"x(1)=6.44\times10^{-3}\,\mathrm{m}", "m"),
        (r"x=\sqrt2\ \text{m}", "m"),
        (r"R=\SI{4.7}{\kilo\ohm}", "kΩ"),
        (r"y=90\,^{\circ}\mathrm{C}", "°C"),
        (r"C=100\,\mu\mathrm{F}", "µF"),
        (r"y=3\,\frac{\mathrm{m}}{\mathrm{s}^2}", "m/s^2"),
        (r"y=\SI{9.81}{\metre\per\second\squared}", "m/s^2"),
        (r"y=k\,\mathrm{m}", ""),
        (r"y=0.04\,m", ""),
        (r"y=c\Omega", ""),
    ],
)
def test_a_unit_stands_behind_a_number(text: str, unit: str) -> None:
    assert read_latex(text, DECLARED).statements[0].unit == unit


def test_a_note_is_kept_beside_its_statement() -> None:
    (statement,) = read_latex(r"\lambda=-2\quad\text{(multiplicity 3)}", DECLARED).statements
    assert statement.note == "(multiplicity 3)"


@pytest.mark.parametrize(
    ("text", "other"),
    [
        (r"1/2t", "1/(2*t)"),
        (r"e^2t", "exp(2*t)"),
        (r"\sin t e^{-t}", "sin(t*exp(-t))"),
        (r"\ln t/\tau", "ln(t/tau)"),
        (r"\cos\omega t+\phi", "cos(omega*t + phi)"),
        (r"e^{-t/RC}", "exp(-(t/R)*C)"),
        (r"x^2(t)", "x''"),
        (r"4.0\mathrm{e}{-2}", "4.0*e - 2"),
        (r"2\frac12", "2 + 1/2"),
    ],
)
def test_the_other_reading_is_beside_the_likelier_one(text: str, other: str) -> None:
    reading = read_latex(text, DECLARED)
    assert [plain_statement(statements[0]) for statements in reading.others] == [other]
    assert text in [ambiguity.text for ambiguity in reading.ambiguities] or "t/RC" in text


def test_a_declared_name_wins_over_customary_meanings() -> None:
    names = Declared(parameters=frozenset({"e", "pi", "I", "delta", "lamda"}))
    assert plain(r"e\,\pi I\delta(1-t)\lambda", names) == ["e*pi*I*delta*(1 - t)*lamda"]
    found = [type(part) for part in walk(read_latex("I e", Declared()).statements[0].members[0])]
    assert Identity in found


def test_a_name_is_spelled_as_it_was_declared() -> None:
    for text in (r"k_{12}", "k_{1 2}", "k12"):
        assert read_latex(text, DECLARED).statements[0].members == (Symbol("k12"),)
    assert read_latex(r"\lambda_1", Declared()).statements[0].members == (Symbol("lambda_1"),)


def test_a_bold_name_is_the_vector_that_is_declared() -> None:
    assert read_latex(r"\mathbf{x}", DECLARED).statements[0].members == (Jet("xvec"),)
    (member,) = read_latex(r"\vec v", DECLARED).statements[0].members
    assert member == Symbol("v")
    assert isinstance(member, Symbol)
    assert member.bold


@pytest.mark.parametrize("text", ["x=0{,}25", r"x=\tfrac12 12\,000", r"x = \num{1.2e-3} + .5"])
def test_a_number_is_found_again_in_the_text(text: str) -> None:
    (statement,) = read_latex(text, DECLARED).statements
    for member in statement.members:
        for part in walk(member):
            if isinstance(part, Literal):
                printed = text[part.start : part.end]
                assert printed
                assert printed[0] in "0123456789."
                assert printed[-1] in "0123456789"


REFUSED: list[tuple[str, type[NotReadError], str]] = [
    (r"x+\foo y", UnknownCommandError, r"\foo"),
    (r"\begin{tikzpicture}x\end{tikzpicture}", UnknownEnvironmentError, r"\begin"),
    (r"(x+1", UnbalancedError, "(x"),
    (r"x+1)", UnbalancedError, ")"),
    (r"\frac{x}{2", UnbalancedError, "{2"),
    (r"\left(x", UnbalancedError, r"\left"),
    (r"\begin{matrix}1\end{pmatrix}", UnbalancedError, r"\end"),
    (r"[0,2)+1", UnbalancedError, ")"),
    (r"x=+", UnexpectedPartError, ""),
    (r"=2", UnexpectedPartError, "="),
    (r"", UnexpectedPartError, ""),
    (r"\quad", UnexpectedPartError, r"\quad"),
    (r"x^2^3", UnusableNotationError, "^3"),
    (r"e^-t", UnusableNotationError, "-t"),
    (r"2^-t", UnusableNotationError, "^-t"),
    (r"x^-t", UnusableNotationError, "-t"),
    (r"1+2+\dots+n", UnusableNotationError, r"\dots"),
    (r"2\ 3", UnusableNotationError, "3"),
    (r"\num{1.2(3)}", UnusableNotationError, r"\num"),
    (r"\SIrange{1}{2}{m}", UnusableNotationError, r"\SIrange"),
    (r"\int_0^t e^{-\tau}", UnusableNotationError, r"\int"),
    (r"\begin{bmatrix}1&2\\3\end{bmatrix}", UnusableNotationError, r"\end"),
    (r"\begin{bmatrix}1&\\&2\end{bmatrix}", UnusableNotationError, r"\begin"),
    (r"\overline{a+b}", UnusableNotationError, r"\overline"),
    (r"{a+b}^2", UnusableNotationError, "^2"),
    (r"\frac{1}", UnusableNotationError, r"\frac"),
    ("x\\", UnusableNotationError, "\\"),
    (r"x@y", UnusableNotationError, "@"),
    (r"{" * 60 + "x" + "}" * 60, WrittenDepthError, "{"),
    (r"(" * 500 + "x" + ")" * 500, WrittenDepthError, "("),
]


@pytest.mark.parametrize(("text", "kind", "at"), REFUSED)
def test_what_cannot_be_read_is_an_error_with_its_place(
    text: str, kind: type[NotReadError], at: str
) -> None:
    with pytest.raises(kind) as caught:
        read_latex(text, DECLARED, place=Place("a.tex", line=7, column=3))
    error = caught.value
    assert type(error) is kind
    assert isinstance(error, InputError)
    assert error.place.file == "a.tex"
    assert error.place.line == 7
    assert error.place.column is not None
    assert text[error.place.column - 3 :].startswith(at)
    assert str(pickle.loads(pickle.dumps(error))) == str(error)  # noqa: S301
    assert str(error).startswith("a.tex, line 7, column ")


@pytest.mark.parametrize(
    "text",
    [
        "{" * 10_000 + "x" + "}" * 10_000,
        "\\" * 9_999,
        "\\a" * 9_000,
        "-" * 5_000 + "x",
        "1" + "/x" * 9_000,
        r"\hat" * 5_000 + "x",
        r"\sin " * 5_000 + "x",
        "^" * 9_000,
        "1" * 9_000,
        r"\begin{matrix}" * 1_000,
        r"\int" * 3_000,
        "x" * 100_000,
    ],
    ids=range(12),
)
def test_what_is_endless_is_an_error_too(text: str) -> None:
    with pytest.raises(NotReadError):
        read_latex(text, DECLARED)


def test_a_text_that_is_no_formula_is_too_long() -> None:
    with pytest.raises(WrittenLengthError) as caught:
        read_latex("x" * (LONGEST + 1), DECLARED)
    assert str(LONGEST) in str(caught.value)


def test_a_long_sum_is_read() -> None:
    (statement,) = read_latex("+".join(["x"] * 1_000), DECLARED).statements
    assert len(list(walk(statement.members[0]))) == 1_001


PIECES = st.sampled_from(
    [
        *"xytkmAIed0123456789+-*/=<>(),.;:!|[]{}^_&'~ \n%$",
        *(r"\frac12", r"\frac{dx}{dt}", r"\sqrt", r"\dot x", r"\sin", r"\cos ", r"\ln", r"\hat"),
        *(
            r"\mathrm{",
            r"\mathbf{x}",
            r"\text{for }",
            r"\text{s}",
            r"\left(",
            r"\right)",
            r"\left.",
        ),
        *(r"\right|", r"_{t=0}", r"^{2}", r"\begin{cases}", r"\end{cases}", r"\begin{bmatrix}"),
        *(r"\end{bmatrix}", r"\begin{align}", r"\end{align}", "\\\\", r"\int_0^t ", r"d\tau"),
        *(r"\lim_{t\to 0}", r"\sum_{n=0}^{3}", r"\quad ", r"\pm", r"\cdot", r"\in", r"\mathcal{L}"),
        *(r"\{", r"\}", r"\lambda", r"\over", r"\num{1}", r"\Big", r"^\circ", r"^\top", "\\"),
    ]
)


@given(st.lists(PIECES, max_size=25).map("".join))
@example(r"\left.x\right|_{t=0}^{2}")
@example(r"\Delta\Delta\Delta")
@example(r"1\frac2{x}")
@example(r"{1\over 2\over 3}")
def test_whatever_is_written_is_read_or_refused(text: str) -> None:
    try:
        reading = read_latex(text, DECLARED)
    except NotReadError as error:
        assert error.place.line is not None
        assert str(error)
    else:
        assert reading.statements
        assert reading == read_latex(text, DECLARED)
