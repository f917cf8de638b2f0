"""The report of a checked derivation as LaTeX: what it says, and that nothing breaks it."""

from __future__ import annotations

import re
from dataclasses import replace
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.checking.claim import SourceLine
from closedform.checking.verdict import CheckReport, LineVerdict
from closedform.document.checked_render import prose, render_check, subject
from closedform.document.checked_report import write_check
from closedform.document.files import CannotWriteError
from closedform.document.templating import TemplateError
from closedform.notation.written.tree import Jet, Statement, Symbol
from tests.document.checked_samples import (
    CHECKED_SAMPLES,
    hostile,
    num,
    one_line,
    rows,
    slipped,
    sound,
    wide,
)
from tests.document.test_compiled import complaints, log_of

BODY = r"\begin{document}"


@pytest.mark.parametrize("engine", ["pdflatex", "lualatex", "xelatex"])
@pytest.mark.parametrize("name", CHECKED_SAMPLES)
def test_a_report_compiles_without_complaint(
    name: str, engine: str, engines: tuple[str, ...], tmp_path: Path
) -> None:
    if engine not in engines:
        pytest.skip(f"{engine} is not installed")
    assert complaints(log_of(render_check(CHECKED_SAMPLES[name]()), engine, tmp_path)) == []
    assert not (tmp_path / "owned").exists()


def test_the_report_says_what_was_found_where_and_what_is_right() -> None:
    text = render_check(slipped())
    for part in (
        "8 lines: 3 hold, 1 fails, 3 are carried and 1 was not read",
        r"\textbf{Line 4 fails; lines 5 to 7 are carried from it; line 8 was not read; the",
        r"Model & Two tanks",
        "Model file & tanks.toml",
        "line 22 (eq:trace)",
        r"\checkedline{4}{eigenvalues}{\textcolor{wrong}{\textbf{fails}}}",
        r"\checkedline{6}{solution $x_{1}$}{\textcolor{wrong}{carried from line 4}}",
        r"\frac{5 \pm 3}{2}",
        "The first eigenvalue is \\ensuremath{-}1, not 1.",
        "A sign was lost, before 5 in the numerator.",
        r"e was read as Euler's number",
        "licensed practice that apply at the place of use",
    ):
        assert part in text
    # what the mended line says is what is right, and is printed once
    assert "With that mended" not in text
    assert text.count(r"\left\{-1,\, -4\right\}") == 1


def test_only_the_verdicts_that_occur_are_explained() -> None:
    explained = render_check(sound()).partition("What the verdicts say")[2]
    assert "holds up to order &" in explained
    assert "carried &" not in explained


def test_the_author_s_latex_is_never_run() -> None:
    body = render_check(hostile()).partition(BODY)[2]
    assert not re.search(r"\\(input|write18|def|end\{document\}.*\\end\{document\})\b", body)
    assert body.count(r"\end{document}") == 1
    assert r"\begin{verbatim}" not in body
    assert "more characters" in body
    assert "<< 7*7" not in body
    assert r"\textbackslash{}input" in body


def test_a_line_that_was_read_is_not_shown_in_the_author_s_words() -> None:
    odd = replace(sound().lines[0], line=SourceLine(1, r"\immediate\weird{A}"))
    text = render_check(replace(sound(), lines=(odd,)))
    assert "weird" not in text


def test_a_line_that_was_read_but_not_decided_is_shown_both_ways() -> None:
    line = replace(slipped().lines[7], read=sound().lines[3].read)
    body = render_check(replace(one_line(), lines=(line,))).partition(BODY)[2]
    assert r"\begin{about}{as read}" in body
    assert r"\begin{about}{as typed}" in body
    assert "textbackslash{}overset" in body


def test_a_wide_matrix_is_given_by_its_entries() -> None:
    text = render_check(wide())
    assert r"[\,\cdot\,]_{24} = " in text
    assert "Entries that are not listed are zero." in text


def test_derivatives_have_dots_for_a_time_and_primes_for_a_place() -> None:
    read = (Statement((Jet("x", 1), num("2")), ("=",)),)
    line = replace(one_line().lines[0], read=read)
    report = replace(one_line(), lines=(line,))
    assert r"\dot{x}" in render_check(report)
    assert r"\dot{x}" not in render_check(replace(report, time="z"))


def test_a_unit_and_a_condition_stand_behind_the_formula() -> None:
    text = render_check(hostile())
    assert r"for \piece{t \geq 2}" in text


def test_a_minus_is_no_hyphen_and_names_are_symbols() -> None:
    assert prose("cross-check of -1 and x - 2") == r"cross-check of \ensuremath{-}1 and x - 2"
    assert subject("generalized eigenvector v_2") == "generalized eigenvector $v_{2}$"
    assert subject("value x1'") == r"value $\dot{x}_{1}$"
    assert subject("value x, x_2") == "value $x$, $x_{2}$"
    assert subject("value $x") == r"value \$x"
    assert subject("") == ""


@given(st.text(st.characters(), max_size=40))
def test_any_text_of_the_author_s_keeps_braces_balanced_and_commands_known(text: str) -> None:
    line = LineVerdict(SourceLine(1, text), text, "not read", text, notes=(text,))
    plain = CheckReport("n", "T", "s", "m", "", (replace(line, line=SourceLine(1, "a")),))
    body = render_check(replace(plain, lines=(line,))).partition(BODY)[2]
    assert len(re.findall(r"(?<!\\)\{", body)) == len(re.findall(r"(?<!\\)\}", body))
    assert body.count(r"\begin{entry}") == body.count(r"\end{entry}") == 3
    assert not re.search(r"[^\x20-\x7e\n\u00a1-\u017f]", body)


def test_names_that_come_from_elsewhere_cannot_break_out() -> None:
    sly = Symbol(r"x}\input{y")
    line = replace(one_line().lines[0], read=(Statement((sly, rows(("1",))), ("=",)),))
    body = render_check(replace(one_line(), lines=(line,))).partition(BODY)[2]
    assert r"\input" not in body


def test_files_are_written_beside_each_other(tmp_path: Path) -> None:
    files = write_check(slipped(), into=tmp_path / "deep" / "out", junit=True)
    assert [file.name for file in files] == [
        "tanks.check.tex",
        "tanks.check.json",
        "tanks.check.xml",
    ]
    only = write_check(slipped(), into=tmp_path / "only", record=False)
    assert [file.name for file in only] == ["tanks.check.tex"]
    assert [p.name for p in (tmp_path / "only").iterdir()] == ["tanks.check.tex"]


def test_a_folder_of_templates_takes_the_place_of_the_shipped_ones(tmp_path: Path) -> None:
    (tmp_path / "check_cautions.tex.j2").write_text("Signed: << report.name|text >>\n")
    text = render_check(slipped(), template=tmp_path)
    assert "Signed: tanks" in text
    assert "licensed practice" not in text


def test_a_template_that_fails_leaves_no_file(tmp_path: Path) -> None:
    (tmp_path / "t").mkdir()
    (tmp_path / "t" / "check_line.tex.j2").write_text("<< nonsense >>")
    with pytest.raises(TemplateError, match=r"check_line\.tex\.j2, line 1"):
        write_check(slipped(), into=tmp_path / "out", template=tmp_path / "t")
    assert not (tmp_path / "out").exists()


def test_a_place_that_takes_no_file_is_named(tmp_path: Path) -> None:
    (tmp_path / "out").write_text("a file")
    with pytest.raises(CannotWriteError, match=r"out/tanks\.check\.tex"):
        write_check(slipped(), into=tmp_path / "out")
