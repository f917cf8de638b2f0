"""Write-ups of driven models: what they say, at every depth, and how they are set."""

from __future__ import annotations

import re
from functools import cache
from pathlib import Path

import pytest

from closedform.document.render import DEPTHS, render
from tests.document.driven_samples import DRIVEN_SAMPLES
from tests.document.test_compiled import complaints, log_of


@cache
def rendered(name: str, depth: str) -> str:
    """The text of a sample, rendered once for all tests."""
    return render(DRIVEN_SAMPLES[name](), depth=depth)


def text_of(name: str, depth: str = "working") -> str:
    return " ".join(rendered(name, depth).split())


@pytest.mark.parametrize("depth", DEPTHS)
@pytest.mark.parametrize("name", DRIVEN_SAMPLES)
def test_references_point_at_labels_that_are_set_once(name: str, depth: str) -> None:
    text = rendered(name, depth)
    labels = re.findall(r"\\label\{([^}]*)\}", text)
    cited = set(re.findall(r"\\(?:eq|page)?ref\{([^}]*)\}", text))
    assert len(labels) == len(set(labels))
    assert cited == set(labels)


@pytest.mark.parametrize("depth", DEPTHS)
@pytest.mark.parametrize("name", DRIVEN_SAMPLES)
def test_no_sentence_has_a_word_twice_or_a_gap(name: str, depth: str) -> None:
    text = rendered(name, depth)
    body = text.split(r"\begin{document}")[1]
    prose = re.sub(r"\\begin\{([a-ce-z]\w+\*?)\}.*?\\end\{\1\}", "#", body, flags=re.DOTALL)
    prose = re.sub(r"\$[^$]*\$", "#", prose)
    assert re.findall(r"\b(the|a|of|is|are|and|in|for) \1\b", prose) == []
    assert re.findall(r"\w+ [,.;:](?:\s|$)", prose) == []
    assert "None" not in prose


@pytest.mark.parametrize("name", DRIVEN_SAMPLES)
def test_the_same_derivation_gives_the_same_bytes(name: str) -> None:
    assert render(DRIVEN_SAMPLES[name]()) == rendered(name, "working")


@pytest.mark.parametrize("name", DRIVEN_SAMPLES)
def test_a_document_compiles_without_complaint(name: str, pdflatex: str, tmp_path: Path) -> None:
    assert complaints(log_of(rendered(name, "full"), pdflatex, tmp_path)) == []


@pytest.mark.parametrize("name", ["mount", "five pulses", "source switched off"])
def test_a_working_document_compiles_without_complaint(
    name: str, pdflatex: str, tmp_path: Path
) -> None:
    assert complaints(log_of(rendered(name, "working"), pdflatex, tmp_path)) == []


def test_equations_are_printed_as_typed_with_dots() -> None:
    text = text_of("mount")
    assert r"m\ddot{x} + c\dot{x} + k x = F" in text
    assert r"F(t) = 100\sin(w t)" in text
    assert r"\dot{x}(0) = 0" in text


def test_what_an_input_means_is_said() -> None:
    assert r"The input (force, $\mathrm{N}$) is" in text_of("mount")


def test_the_unit_step_is_explained_once() -> None:
    text = text_of("source switched off")
    assert text.count("is the unit step") == 1
    assert r"\varepsilon(t - T_{1})" in text


def test_resonance_is_named_with_its_power_of_the_time() -> None:
    text = text_of("resonance")
    assert r"\textbf{Resonance.}" in text
    assert "has the factor $t^{2}$, and grows without bound" in text


def test_the_phase_comes_with_its_quadrant() -> None:
    text = text_of("frame")
    assert r"\arctan" in text
    assert re.search(r"in the (first|second|third|fourth) quadrant", text)


def test_the_stacked_matrix_is_printed_with_a_hat() -> None:
    text = text_of("frame")
    assert r"\det(\lambda\boldsymbol{I} - \widehat{\boldsymbol{A}})" in text
    assert r"\det(\lambda\boldsymbol{I} - \boldsymbol{A})" in text


def test_matrices_of_second_order_are_printed_as_stated() -> None:
    text = text_of("frame")
    assert r"\boldsymbol{M}\ddot{\boldsymbol{q}}(t)" in text.replace(r"\,", "")
    assert r"\boldsymbol{K} = \begin{bmatrix} 30 & -10 \\ -10 & 10 \end{bmatrix}" in text


def test_stability_is_argued_by_hurwitz() -> None:
    assert "by the criterion of Hurwitz" in text_of("frame")
    assert "up to the second degree" in text_of("mount")


def test_a_repeated_input_is_told_by_periods() -> None:
    text = text_of("doses")
    assert "comes again and again" in text
    assert "Steady state" in text
    assert "comes five times" in text_of("five pulses")


def test_full_documents_have_what_working_ones_leave_out() -> None:
    working, full = text_of("frame"), text_of("frame", "full")
    assert "The transient part is" not in working
    assert "The transient part is" in full
    assert len(full) > len(working)


def test_a_small_model_takes_few_pages(pdflatex: str, tmp_path: Path) -> None:
    log = log_of(rendered("source switched off", "working"), pdflatex, tmp_path)
    pages = re.search(r"\((\d+) pages", log)
    assert pages is not None
    assert int(pages[1]) <= 5


def test_derivatives_with_respect_to_another_variable_have_primes() -> None:
    text = text_of("string held at both ends")
    assert r"\ddot{y}" in text
    along = text_of("string along an axis")
    assert "y'' + w^{2}y = 0" in along
    assert r"\dot" not in along
    assert "Long-term behaviour" not in along


def test_what_was_proved_is_named_and_told_in_full() -> None:
    assert r"\emph{Proved} by putting the solution back" in text_of("mount")
    assert "Substituted, and what came out" not in text_of("mount")
    assert "Substituted, and what came out" in text_of("mount", "full")


def test_the_joins_are_told_and_shown_in_full() -> None:
    assert "the pieces on both sides give the same state" in text_of("source switched off")
    assert r"v_{\mathrm{C}}(T_{1}^{-})" in text_of("source switched off", "full")


def test_a_sine_gives_a_steady_sine() -> None:
    assert r"\sin(3t - \varphi_{1})" in text_of("frame")
