"""Write-ups of models with parameters: what they say, and that TeX sets them well."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.step import Statement
from closedform.document.beside import displayed_beside
from closedform.document.render import DEPTHS, render
from closedform.notation.expression import Name, number
from tests.derivation.parametric.models import derived, solved
from tests.document.making import add
from tests.document.parametric_samples import PARAMETRIC_SAMPLES, gap
from tests.document.test_compiled import complaints, log_of

PAGES = re.compile(r"Output written on .* \(([0-9]+) pages?")


@pytest.mark.parametrize("depth", DEPTHS)
@pytest.mark.parametrize("name", PARAMETRIC_SAMPLES)
def test_a_write_up_is_set_without_complaint(
    name: str, depth: str, pdflatex: str, tmp_path: Path
) -> None:
    text = render(PARAMETRIC_SAMPLES[name](), depth=depth)
    assert complaints(log_of(text, pdflatex, tmp_path)) == []


def test_the_damped_oscillator_takes_three_pages(pdflatex: str, tmp_path: Path) -> None:
    log = log_of(render(derived("plain oscillator")), pdflatex, tmp_path)
    pages = PAGES.search(log)
    assert pages is not None
    assert int(pages[1]) <= 3


def test_the_same_derivation_gives_the_same_text() -> None:
    response, records, numbers = solved("depot")
    again = derive_cases(response, records, numbers=numbers)
    assert render(derived("depot")) == render(again)


def test_what_is_not_covered_is_said_below_the_title() -> None:
    for depth in DEPTHS:
        text = render(gap(), depth=depth)
        told = text.index(r"\textbf{Not covered.}")
        assert text.index(r"\begin{document}") < told < text.index(r"\section{Model}")
        assert "there are more branches than are solved" in text
        assert "put the numbers into the model" in text
        assert "but for those named above" in text
        assert "one case, besides what is not covered" in text


def test_all_regimes_stand_in_one_document() -> None:
    text = render(derived("oscillator"))
    for function in (r"\cos(\omega_{\mathrm{d}}t)", r"\cosh(\kappa t)"):
        assert function in text
    assert text.count(r"\partofstep{Case") == 3


def test_a_summary_has_cases_and_results_and_no_derivation() -> None:
    text = render(derived("decay"), depth="summary")
    assert r"\section{Cases}" in text
    assert r"\section{Solution}" in text
    assert r"\section{Transition matrix}" not in text
    assert r"\section{Eigenvalues}" not in text


def test_the_full_depth_has_e_to_the_at_in_every_case() -> None:
    text = render(derived("decay"), depth="full")
    assert text.count("The transition matrix is") == 4


def test_exclusions_are_told_with_their_reason() -> None:
    text = render(derived("depot"))
    assert "excluded: then" in text
    assert "would follow, against" in text


def test_short_statements_stand_beside_each_other() -> None:
    statements = [Statement("", (Name(name), number(k))) for k, name in enumerate("abc")]
    (shown,) = displayed_beside(statements)
    assert (
        shown.latex == "\\begin{equation*}\n  a = 0 \\qquad b = 1 \\qquad c = 2\n\\end{equation*}"
    )


def test_statements_that_do_not_fit_a_line_take_more() -> None:
    long = Statement("", (Name("a"), add(*"abcdefghijklm")))
    (shown,) = displayed_beside([long, long])
    assert shown.latex.startswith(r"\begin{gather*}")
    longer = Statement("", (Name("a"), add(*"abcdefghijklmnopqrstuvwxyz")))
    assert r"\begin{align*}" in displayed_beside([longer])[0].latex


def test_an_unknown_relation_is_refused_beside_others() -> None:
    with pytest.raises(ValueError, match="no relation is written"):
        displayed_beside([Statement("", (Name("a"), Name("b")), "<>")])
