"""Input that nobody would hand in on purpose: a clear error or a verdict, and never more.

A file that cannot be used raises an `InputError` that names it; a line that cannot be read or
decided is `not read`; nothing that is wrong holds.
"""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path

import pytest

from closedform.checking.check import check_file
from closedform.checking.claim import SourceLine
from closedform.checking.verdict import CheckReport, LineVerdict
from closedform.document.checked_report import write_check
from closedform.document.own import check_file as check_any
from closedform.errors import InputError
from tests.checking.hold import held, held_lines, model, symbols

TANKS = {"states": ["x", "y"], "matrix": [["-1", "1"], ["0", "-2"]], "initial": ["1", "1"]}
TANKS_FILE = (
    'title = "Tanks"\nstates = ["x", "y"]\nmatrix = [["-1", "1"], ["0", "-2"]]\n'
    'initial = ["1", "1"]\n'
)
SPRING_FILE = (
    'title = "Spring"\nequations = ["m*x\'\' + c*x\' + k*x = 0"]\n'
    'initial = {x = "1", "x\'" = "0"}\n'
    "[parameters]\n" + "".join(f'{name} = {{assume = "positive"}}\n' for name in "mck")
)
NAMED = "% closedform: model = m.toml\n"
RIGHT = "\\[y=e^{-2t}\\]\n"


@pytest.fixture
def put(tmp_path: Path) -> Callable[..., Path]:
    (tmp_path / "m.toml").write_text(TANKS_FILE, "utf-8")

    def put(content: str | bytes, name: str = "n.tex") -> Path:
        path = tmp_path / name
        data = content if isinstance(content, bytes) else content.encode()
        path.write_bytes(data)
        return path

    return put


def refused(path: Path) -> str:
    """Return the paragraph of the error that a file raises; it begins with the file's folder."""
    with pytest.raises(InputError) as caught:
        check_file(path)
    text = str(caught.value)
    assert text.startswith(str(path.parent)), text
    assert "Traceback" not in text
    return text


def matrix(rows: int, columns: int, entry: str = "1") -> str:
    row = "&".join([entry] * columns)
    return r"\begin{pmatrix}" + r"\\".join([row] * rows) + r"\end{pmatrix}"


UNUSABLE = [
    ("", "nothing to check"),
    ("\n\n", "nothing to check"),
    ("% nothing but this\n", "nothing to check"),
    ("\ufeff", "nothing to check"),
    (NAMED + "%" + "x" * 5_000_000, "nothing to check"),
    (NAMED + "\\" * 1_000_000, "nothing to check"),
    (NAMED + "{" * 1_000_000, "nothing to check"),
    (RIGHT, "no model is named"),
    ("% closedform: model = gone.toml\n" + RIGHT, "there is no model file 'gone.toml'"),
    ("% closedform: model = n.tex\n" + RIGHT, "this derivation itself"),
    ("% closedform: model = .\n" + RIGHT, "there is no model file"),
    (f"% closedform: model = {'m' * 5000}\n" + RIGHT, "there is no model file"),
    (NAMED + "% closedform: model = k.toml\n" + RIGHT, "say it once"),
    (NAMED + "% closedform: says = banana\n" + RIGHT, "a line cannot say 'banana'"),
    (NAMED + "% closedform: sais = matrix\n" + RIGHT, "did you mean 'says'"),
    (NAMED + "% closedform: case = 7\n" + RIGHT, "the model has no cases"),
    (NAMED + "\\begin{align} x&=1", "does not end"),
    (NAMED + "\\begin{align} x&=1 \\end{equation}", "does not end"),
    (NAMED + "\\[" * 1_000_000, "does not end"),
    (NAMED + "\\[x=1" + "+1" * 1_000_000 + "\\]", "at most 100000 are read"),
    (NAMED + "\\[x=1\\]" * 20_000, "displays more than 5000"),
    (NAMED + "\\def\\a{\\a" * 100_000, "too much text"),
    (NAMED + "\\input{../n}" + RIGHT, "only files in the folder"),
    (NAMED + "\\input{/etc/passwd}" + RIGHT, "only files in the folder"),
    (NAMED + "\\input{gone}" + RIGHT, "there is no such file"),
    (NAMED + "\\input{n}" + RIGHT, "break the circle"),
    (NAMED + "\\input{link}" + RIGHT, "leads out of the folder"),
    (NAMED + "\\input{fold}" + RIGHT, "there is no such file"),
    (NAMED + "\\input{bytes}" + RIGHT, "is not UTF-8"),
    ("x" * 8_100_000, "more than 8000000 bytes"),
    (NAMED.encode() + b"\\[x=\xff1\\]", "line 2, column 5: the byte 0xff is not UTF-8"),
    ((NAMED + RIGHT).encode("utf-16"), "is not UTF-8"),
    ((NAMED + RIGHT).encode("utf-16-le"), "the byte 0x00 belongs in no text"),
    (NAMED + "\\[x=\0 1\\]", "line 2, column 5: the byte 0x00 belongs in no text"),
]


@pytest.mark.parametrize(("content", "said"), UNUSABLE, ids=range(len(UNUSABLE)))
def test_a_document_that_cannot_be_used_is_refused_in_a_sentence(
    put: Callable[..., Path], content: str | bytes, said: str
) -> None:
    path = put(content)
    (path.parent / "fold").mkdir()
    (path.parent / "bytes.tex").write_bytes(b"\xff\xfe")
    (path.parent / "link.tex").symlink_to("/etc/passwd")
    text = refused(path)
    assert said in text
    assert len(text) < 1200


def test_a_folder_a_pipe_and_a_file_that_is_not_there_are_told_apart(tmp_path: Path) -> None:
    assert "this is a folder" in refused(tmp_path)
    assert "there is no such file" in refused(tmp_path / "gone.tex")
    os.mkfifo(tmp_path / "pipe")
    with pytest.raises(InputError, match="a pipe or a device"):
        check_any(tmp_path / "pipe")
    (tmp_path / "n.tex").write_text(RIGHT)
    with pytest.raises(InputError, match="a pipe or a device"):
        check_any(tmp_path / "n.tex", model=tmp_path / "pipe")


@pytest.mark.parametrize("text", ["title = ", 'title = "x"\n', "", "\0", "[[claim]]\n"])
def test_a_model_that_is_broken_is_told_as_such(put: Callable[..., Path], text: str) -> None:
    path = put(NAMED + RIGHT)
    (path.parent / "m.toml").write_text(text)
    assert "m.toml" in refused(path)


@pytest.mark.parametrize("ending", ["\n", "\r\n", "\r"])
@pytest.mark.parametrize("mark", ["", "\ufeff"])
def test_line_ends_and_a_byte_order_mark_do_not_matter(
    put: Callable[..., Path], ending: str, mark: str
) -> None:
    path = put(mark + (NAMED + RIGHT).replace("\n", ending))
    assert check_file(path).holds


CLAIM = 'model = "m.toml"\n[[claim]]\n'
UNUSABLE_CLAIMS = [
    ("", "nothing to check"),
    ('model = "m.toml"\nclaim = 3\n', "[[claim]]"),
    ('model = "m.toml"\n[claim]\ntext = "x = 1"\n', "[[claim]]"),
    ('model = ["m.toml"]\n[[claim]]\ntext = "x = 1"\n', "an array"),
    (CLAIM, "neither latex nor text"),
    (CLAIM + 'text = ""\n', "neither latex nor text"),
    (CLAIM + 'text = "x = 1"\nlatex = "x = 1"\n', "both latex and text"),
    (CLAIM + 'text = "x = 1"\ntext = "x = 2"\n', "not valid TOML"),
    (CLAIM + "text = true\n", "here stands true"),
    (CLAIM + 'text = "x = 1"\nat = 2000-01-01\n', "a date or time"),
    (CLAIM + 'text = "x = 1"\nat = ' + "9" * 5000 + "\n", "thousands of digits"),
    (CLAIM + 'text = "x = 1"\nfoo = 1\n', "no key 'foo'"),
    (CLAIM + 'text = "x = 1"\nsays = "banana"\n', "cannot say 'banana'"),
    (CLAIM + 'latex = "\\theta = 1"\n', "single quotation marks"),
    (CLAIM + 'latex = "\\lambda = 1"\n', "not valid TOML"),
    (CLAIM + 'text = "x = 1"\n' + "[[claim]]\ntext = 'x = 1'\n" * 10_000, "at most 5000"),
    ("a." * 5000 + "b = 1\n", "dozens of parts"),
    ("x = " + "[" * 5000 + "]" * 5000, "nested"),
    ("[[line]]\nnumber = 1\n", "hand in the document"),
    (TANKS_FILE, "this is a model file"),
    ('model = "n.toml"\n[[claim]]\ntext = "x = 1"\n', "this derivation itself"),
    ('model = "m.toml\\u0000"\n[[claim]]\ntext = "x = 1"\n', "there is no model file"),
]


@pytest.mark.parametrize(("content", "said"), UNUSABLE_CLAIMS, ids=range(len(UNUSABLE_CLAIMS)))
def test_a_list_of_claims_that_cannot_be_used_is_refused_in_a_sentence(
    put: Callable[..., Path], content: str, said: str
) -> None:
    assert said in refused(put(content, "n.toml"))


CONDITIONS = [
    ("17", "the model has no case '17'"),
    ("0", "the model has no case '0'"),
    ("²", "no sign of comparison"),
    ("9" * 5000, "the model has no case '999"),
    ("k < 0", "the model has no case 'k < 0'"),
    ("2 < 1", "the model has no case"),
    ("q > 1", "the name 'q' is not declared"),
    ("c^2 <", "the formula is empty"),
    ("((((c", "no sign of comparison"),
    ("c < 1 < 2", "one sign of comparison"),
    ("1/0 > 2", "cannot be worked out: it divides by zero"),
    ("c/(c - c) > 2", "cannot be worked out: it divides by zero"),
    ("k^100000000 > 1", "cannot be worked out"),
]


@pytest.mark.parametrize(("condition", "said"), CONDITIONS, ids=range(len(CONDITIONS)))
@pytest.mark.parametrize("key", ["case", "where"])
def test_a_case_that_is_none_is_refused_with_its_key(
    put: Callable[..., Path], key: str, condition: str, said: str
) -> None:
    top = f"{key} = '{condition}'\n" if key == "case" else ""
    below = f"{key} = '{condition}'\n" if key == "where" else ""
    path = put(f'model = "m.toml"\n{top}[[claim]]\ntext = "x(0) = 1"\n{below}', "n.toml")
    (path.parent / "m.toml").write_text(SPRING_FILE)
    text = refused(path)
    assert said in text
    assert len(text) < 400


def lines_of(*lines: SourceLine) -> list[LineVerdict]:
    return held_lines(model(**TANKS), lines)


@pytest.mark.parametrize("at", ["(((", "9" * 5000, "1e999999", "1,,2", "1; 2", "\\foo"])
def test_an_instant_that_cannot_be_read_is_never_passed_over(at: str) -> None:
    right = SourceLine(1, "x(1)=0.6004", at=at)
    (verdict,) = lines_of(right)
    assert verdict.verdict == "not read"
    assert "'at'" in verdict.reason
    assert lines_of(SourceLine(1, "x(1)=0.6004"))[0].passes


@pytest.mark.parametrize("of", ["7", "banana", "(((", "1/0", "\\foo"])
def test_an_eigenvector_of_what_is_no_eigenvalue_does_not_hold(of: str) -> None:
    (verdict,) = lines_of(SourceLine(1, matrix(2, 1), says="eigenvector", of=of))
    assert not verdict.passes


UNREAD = [
    r"z(t)=e^{-t}",
    r"x_7(t)=e^{-t}",
    r"\dot q=3",
    r"x={{e^{-t}",
    r"x=e^{-t}}}",
    r"x=\begin{pmatrix}1",
    r"x=\begin{pmatrix}1\end{bmatrix}",
    r"x=\left(1",
    r"A=\begin{pmatrix}\end{pmatrix}",
    r"A=\begin{pmatrix}1&2\\3\end{pmatrix}",
    r"\foo{x}=1",
    r"x=\write18{ls}",
    "x=" + "{" * 10_000 + "1" + "}" * 10_000,
    "x=" + "(" * 10_000 + "1" + ")" * 10_000,
    "x=" + r"\frac{1" * 2000 + "}{2}" * 2000,
    "x=" + r"\sqrt{" * 2000 + "2" + "}" * 2000,
    "x=" + r"\frac" * 3000,
    "x=" + r"\begin{pmatrix}" * 500 + "1" + r"\end{pmatrix}" * 500,
    "x=" + r"\text{" * 200 + "1" + "}" * 200,
    "x=" + "|" * 500 + "t" + "|" * 500,
    "x=" + "-" * 29_000 + "1",
    "x=0." + "3" * 5000,
    "x=" + "1" * 29_000,
    "x=1" + "+1" * 20_000,
    "x=\x1b[31m1",
    "x=\u202e1",
    "x=٣",
    r"x=(a+b+c+d+f+g+h)^{30}",
    r"x=1000000!",
    r"x=\binom{100000}{50000}",
    r"x=\sum_{k=0}^{1000000000} k",
    r"x=\prod_{k=1}^{1000}(1+t^k)",
    r"x=\infty-\infty",
    r"x=\mathrm{NaN}",
    r"x=\text{nan}",
    r"\lambda_1=\infty",
    r"x(0)=0^0",
    r"y(0)=0^0",
    r"p(\lambda)=(\lambda+1)(\lambda+2)+0^0-1",
    r"p(\lambda)=\lambda^{9999}",
    r"x(x)=0",
    r"x(t^2)=2e^{-t^2}-e^{-2t^2}",
    r"x(-\infty)=0",
    r"x(0.1,0.2)=0",
    r"\lim_{t\to\infty}e^{t}=0",
    r"x\approx" + "+".join(rf"1.{k:03d}e^{{-{k}.5t}}" for k in range(30)),
    r"x=\det" + matrix(20, 20, "t"),
]


@pytest.mark.parametrize("text", UNREAD, ids=range(len(UNREAD)))
def test_what_cannot_be_read_or_decided_is_not_read_and_says_why(text: str) -> None:
    (verdict,) = held(TANKS, text)
    assert verdict.verdict == "not read", verdict
    assert 10 < len(verdict.reason) < 400


WRONG = [
    *(f"A={matrix(*shape)}" for shape in ((2, 3), (1, 1), (60, 60))),
    f"e^{{At}}={matrix(60, 60)}",
    f"P={matrix(30, 30)}",
    f"P={matrix(2, 2)}",
    f"J={matrix(1, 1)}",
    f"v_1={matrix(3, 1)}",
    f"v_1={matrix(2, 1, '0')}",
    r"e^{At}=e^{-t}",
    r"x=(e^{-t}+e^{-2t}+t)^{1000}",
    r"x=((1+t)^{60})^{60}",
    r"x=2^{1000000000}",
    r"x=10^{10^{10}}",
    r"x=e^{e^t}",
    r"x=t^t",
    r"x=e^{1/t}",
    r"x=e^{10^{500}}",
    r"x=\sin(10^{500})",
    r"x=\ln 0",
    r"x=\ln t",
    r"x=\frac10",
    r"x=\frac00",
    r"x=\frac{1}{t-t}",
    r"x=0^{-1}",
    r"x=(2e^{-t}-e^{-2t})\frac{t-t}{t-t}",
    r"x=\frac{0}{\sin^2t+\cos^2t-1}",
    r"x(0)\approx\frac10",
    r"x(\tfrac10)=0",
    r"x(10^{100})=0",
    r"x(10^{-100})=1",
    r"x=\sqrt[1000]{2}",
    r"x=\sqrt{10^{900}+1}",
    "x=" + "+".join(rf"\sqrt{{{p}}}" for p in (2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37) * 2),
    r"x=\frac{1}{" + "+".join(rf"\sqrt{{{p}}}" for p in (2, 3, 5, 7, 11, 13, 17, 19, 23)) + "}",
    "x=" + "".join(rf"\sqrt{{{p}+" for p in (2, 3, 5, 7, 11, 13, 17, 19, 23)) + "1" + "}" * 9,
    "x=" + r"\int_0^t " * 20 + "e^{-t}" + "dt" * 20,
    r"x=\det" + matrix(12, 12, "2"),
    "x=1" + "+1" * 9_000,
    "x'" + "'" * 5_000 + "=1",
    "x'" + "'" * 29_000 + "=1",
    r"X(s)=e^{s}",
]


@pytest.mark.parametrize("text", WRONG, ids=range(len(WRONG)))
def test_what_is_wrong_fails_however_odd_it_is(text: str) -> None:
    (verdict,) = held(TANKS, text)
    assert verdict.verdict == "fails", verdict
    assert len(verdict.reason) < 1000


def test_macros_that_never_end_are_left_alone(put: Callable[..., Path]) -> None:
    doubled = "".join(
        rf"\def\{a}{{\{b}\{b}}}" for a, b in zip("bcdfghklmn", "cdfghklmnq", strict=True)
    )
    path = put(
        NAMED + r"\newcommand{\me}{\me}\newcommand{\grow}[1]{\grow{#1#1}}"
        r"\newcommand{\trick}{\expandafter\csname x\endcsname}\newcommand{\ev}{\lambda}"
        + doubled
        + r"\def\q{+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1+1}"
        r"\[x=\me\]\[x=\grow{1}\]\[x=\trick\]\[x=0\b\]\[\ev_1=-1\]"
    )
    found = [line.verdict for line in check_file(path).lines]
    assert found == ["not read"] * 3 + [found[3], "holds"]
    assert found[3] in ("not read", "fails")


CHAIN = {
    "states": [f"x{k}" for k in range(1, 31)],
    "matrix": [
        [str(-k) if j == k else str(j) if j == k - 1 else "0" for j in range(1, 31)]
        for k in range(1, 31)
    ],
    "initial": ["1"] + ["0"] * 29,
}


def test_thirty_states_take_seconds() -> None:
    found = held(
        CHAIN,
        r"x_2(t)=e^{-t}-e^{-2t}",
        r"\operatorname{tr}A=-465",
        r"\det A=1",
        f"e^{{At}}={matrix(30, 30)}",
        f"A={matrix(30, 30)}",
        r"p(\lambda)=(\lambda+1)^{30}",
    )
    words = ["holds", "holds", "fails", "not read", "fails", "fails"]
    assert [verdict.verdict for verdict in found] == words


SWITCHED = {
    "equations": ["x' + 2*x = u"],
    "initial": {"x": "0"},
    "inputs": {"u": "3*step(t) - 3*step(t - 1)"},
}


@pytest.mark.parametrize(
    ("text", "word"),
    [
        (r"x(1)=\tfrac32(1-e^{-2})", "holds"),
        (r"\dot x(1)=-3(1-e^{-2})", "holds"),
        (r"\dot x(1)=3e^{-2}", "not read"),
        (r"\dot x(1)=0", "fails"),
        (r"x(-1)=0", "not read"),
        (r"x(-1)=\tfrac32(1-e^{2})", "not read"),
        (r"x(\mathrm{i})=\tfrac32(1-e^{-2\mathrm{i}})", "not read"),
        (r"x(10^{100})=0", "fails"),
        (r"x(t)=\tfrac32(1-e^{-2t}),\quad t<0", "not read"),
        (r"x(t)=\tfrac32(1-e^{-2t}),\quad 2\le t\le1", "not read"),
        (r"x(t)=\begin{cases}\tfrac32(1-e^{-2t})&0\le t<1\\0&t>1\end{cases}", "fails"),
    ],
)
def test_values_where_an_input_jumps_and_before_the_start(text: str, word: str) -> None:
    assert held(SWITCHED, text)[0].verdict == word


ROOTS = {
    "states": [f"a{k}" for k in range(1, 6)],
    "matrix": [
        *([str(int(j == k + 1)) for j in range(5)] for k in range(4)),
        ["-1", "-5", "-3", "-6", "-2"],
    ],
    "initial": ["1", "0", "0", "0", "0"],
}


@pytest.mark.parametrize(
    ("text", "passes"),
    [
        (r"\lambda^5+2\lambda^4+6\lambda^3+3\lambda^2+5\lambda+1=0", True),
        (r"a_1(10^{100})\approx0", True),
        (r"a_1(1)\approx0.5", False),
        (r"\lambda_1=-1", False),
        (f"P={matrix(5, 5)}", False),
        (f"e^{{At}}={matrix(5, 5)}", False),
        (r"a_1(t)=\cos t", False),
    ],
)
def test_models_with_named_roots(text: str, *, passes: bool) -> None:
    assert held(ROOTS, text)[0].passes == passes


@pytest.mark.parametrize("name", ["A", "P", "i", "j", "I", "J", "E", "s", "N", "u", "d"])
def test_parameters_with_the_names_of_other_things(name: str) -> None:
    keys = {
        "equations": [f"x' + {name}*x = 0"],
        "initial": {"x": "1"},
        "parameters": symbols(**{name: None}),
    }
    found = held(keys, f"x(t)=e^{{-{name} t}}", rf"\lambda_1=-{name}", f"x(t)=e^{{-2{name} t}}")
    assert [verdict.verdict for verdict in found] == ["holds", "holds", "fails"]


def report_on(path: Path) -> CheckReport:
    path.write_text(NAMED + RIGHT + "\\[x=\x1b\x01\u202e3\\]\n\\[\\foo_{]]>}=\"<&>'\\]\n", "utf-8")
    return check_file(path)


@pytest.mark.parametrize(
    "stem", ["a b ü.v", ".hidden", "semi;$(ls)'", "new\nline", "-dash", "L" * 230, "50%_#&~^"]
)
def test_reports_on_files_of_any_name(put: Callable[..., Path], stem: str) -> None:
    path = put("", f"{stem}.tex")
    files = write_check(report_on(path), into=path.parent / "out", junit=True)
    assert all(file.is_file() for file in files)
    assert not any("\x1b" in file.read_text("utf-8") for file in files)


def test_a_report_has_to_have_room(put: Callable[..., Path]) -> None:
    report = report_on(put(""))
    file = put("", "file")
    for into in (file, file / "below", file.parent / ("L" * 300), Path("/proc/none")):
        with pytest.raises(InputError, match="cannot be written"):
            write_check(report, into=into)
    with pytest.raises(InputError, match="no template"):
        write_check(report, into=file.parent, template="none")


DOUBLED = [
    r"w_{{{}}}=w_{{{}}}+w_{{{}}}",
    r"w_{{{}}}=w_{{{}}}w_{{{}}}+t",
    r"w_{{{}}}(t)=w_{{{}}}(w_{{{}}}(t))",
]


@pytest.mark.parametrize("form", DOUBLED)
def test_definitions_that_double_at_every_line_come_to_an_end(form: str) -> None:
    lines = [form.format(k, k - 1, k - 1) for k in range(2, 18)]
    first = "w_{1}(t)=1+t" if "(t)" in form else "w_{1}=1+t"
    found = held(TANKS, first, *lines, r"x=w_{17}", r"y=e^{-2t}")
    assert not found[-2].passes
    assert found[-1].verdict == "holds"
