from __future__ import annotations

import pickle
import re
import subprocess
import sys
from dataclasses import replace
from functools import cache
from pathlib import Path

import pytest

from closedform.derivation.step import Derivation, Step
from closedform.document import templating as module
from closedform.document.render import (
    DEPTHS,
    UnknownDepthError,
    UnusableDigitsError,
    render,
)
from closedform.document.templating import TemplateError, templates_folder
from closedform.document.writeup import write_up
from closedform.errors import InputError
from closedform.model.building import system
from tests.document.driven_samples import DRIVEN_SAMPLES
from tests.document.parametric_samples import PARAMETRIC_SAMPLES
from tests.document.samples import SAMPLES, hostile, one_state, oscillator, two_real

MANY_KINDS = (
    *(PARAMETRIC_SAMPLES[name] for name in ("gap", "plain oscillator", "two tanks")),
    *(DRIVEN_SAMPLES[name] for name in ("held at two instants", "held while it is struck")),
    *(DRIVEN_SAMPLES[name] for name in ("doses", "resonance")),
)
"""Samples that have steps of many kinds: where they have all, no others are solved."""


@cache
def text_of(name: str, depth: str) -> str:
    """The text of a sample, rendered once for all tests."""
    return render(SAMPLES[name](), depth=depth)


@pytest.mark.parametrize("depth", DEPTHS)
@pytest.mark.parametrize("name", SAMPLES)
def test_references_point_at_labels_that_are_set_once(name: str, depth: str) -> None:
    text = text_of(name, depth)
    labels = re.findall(r"\\label\{([^}]*)\}", text)
    cited = set(re.findall(r"\\(?:eq|page)?ref\{([^}]*)\}", text))
    assert len(labels) == len(set(labels))
    assert cited == set(labels), "numbers are for what is cited, and nothing else is cited"


@pytest.mark.parametrize("name", SAMPLES)
def test_the_same_derivation_gives_the_same_bytes(name: str) -> None:
    assert render(SAMPLES[name]()) == text_of(name, "working")


def test_hash_order_and_locale_leave_no_trace() -> None:
    program = (
        "import sys; sys.path.insert(0, '.'); "
        "from tests.document.wide_samples import six_wide; "
        "from closedform.document.render import render; "
        "import hashlib; print(hashlib.sha256(render(six_wide()).encode()).hexdigest())"
    )
    digests = {
        subprocess.run(
            [sys.executable, "-c", program],
            env={"PYTHONHASHSEED": seed, "LC_ALL": locale},
            cwd=Path(__file__).parents[2],
            check=True,
            capture_output=True,
        ).stdout
        for seed, locale in (("1", "C"), ("2", "C.UTF-8"))
    }
    assert len(digests) == 1


def test_depths_select_the_steps() -> None:
    steps = tuple(
        replace(step, depth="summary") if step.kind == "solution" else step
        for step in two_real().steps
    )
    sample = Derivation("Two real eigenvalues", steps)
    summary, working, full = (render(sample, depth=depth) for depth in DEPTHS)
    assert r"\section{Solution}" in summary
    assert r"\section{Jordan form}" not in summary
    assert r"\section{Jordan form}" in working
    assert "This step rests on" not in working
    assert "This step rests on" in full


def test_every_part_is_rendered_by_some_sample() -> None:
    parts = (templates_folder() / "latex" / "steps").iterdir()
    wanted = {part.name.removesuffix(".tex.j2") for part in parts}
    makers = (
        *SAMPLES.values(),
        *MANY_KINDS,
        *PARAMETRIC_SAMPLES.values(),
        *DRIVEN_SAMPLES.values(),
    )
    kinds: set[str] = set()
    for make in makers:
        if wanted <= kinds:
            break
        kinds |= {step.kind for step in make().steps}
    assert kinds == wanted


def test_text_of_the_user_reaches_tex_escaped_and_the_template_engine_not() -> None:
    text = render(hostile())
    assert r"\input{/etc" not in text
    assert r"\write18{x}" not in text
    assert text.count(r"\end{document}") == 1
    assert text.endswith("\\end{document}\n")
    assert "49" not in text
    assert r"7*7" in text
    assert "[U+6F22]" in text


def test_no_date_and_no_shell_is_in_a_document() -> None:
    text = render(two_real())
    assert r"\today" not in text
    assert "write18" not in text


def test_one_state_is_spoken_of_in_the_singular() -> None:
    text = " ".join(render(one_state()).split())
    assert "The model has one state, $v_{\\mathrm{C}}$, a function of $t$." in text
    assert "states" not in text
    assert "vector $" not in text.split(r"\section{Characteristic")[0]


def test_the_real_form_is_named_in_the_transition() -> None:
    text = render(oscillator())
    assert (
        r"$\boldsymbol{A} = \boldsymbol{P}\boldsymbol{J}_{\mathrm{R}}\boldsymbol{P}^{-1}$" in text
    )


def test_no_line_of_prose_is_left_with_two_blanks_or_a_stray_stop() -> None:
    for name in SAMPLES:
        text = text_of(name, "full")
        body = re.sub(r"\s+", " ", text.split(r"\begin{document}")[1])
        assert not re.search(r" [,.;:](?= |$)", body)
        assert "\n\n\n\n" not in text


def test_a_folder_of_templates_takes_the_place_of_ours(tmp_path: Path) -> None:
    (tmp_path / "steps").mkdir()
    (tmp_path / "steps" / "cautions.tex.j2").write_text("Mind << title|text >>.\n")
    text = render(one_state(), template=tmp_path)
    assert "Mind Discharge of a capacitor." in text
    assert r"\section{Solution}" in text


SPOILED = [
    ("<< nothing >>", 2, "'nothing' is undefined"),
    ("<< step.kind", 2, "unexpected"),
    ("<< ().__class__.__mro__ >>", 2, "unsafe"),
    ("<% include 'none.j2' %>", None, "no file none.j2"),
]


@pytest.mark.parametrize(("line", "number", "reason"), SPOILED)
def test_a_template_that_fails_is_named_with_its_line(
    tmp_path: Path, line: str, number: int | None, reason: str
) -> None:
    (tmp_path / "writeup.tex.j2").write_text(f"first <% set step = steps[0] %>\n{line}\n")
    with pytest.raises(TemplateError, match=re.escape(reason)) as caught:
        render(one_state(), template=tmp_path)
    assert caught.value.line == number
    assert str(tmp_path) in str(caught.value)


def test_a_template_that_is_no_text_is_named(tmp_path: Path) -> None:
    (tmp_path / "writeup.tex.j2").write_bytes(b"\xff\xfe")
    with pytest.raises(TemplateError, match="cannot be read"):
        render(one_state(), template=tmp_path)


def test_an_unknown_template_or_depth_is_refused() -> None:
    with pytest.raises(TemplateError, match="no template and no folder"):
        render(one_state(), template="nowhere")
    with pytest.raises(UnknownDepthError, match="summary, working, full"):
        render(one_state(), depth="deep")


def test_options_out_of_range_are_refused_before_any_work(tmp_path: Path) -> None:
    model = system([[-1]], initial=[1])
    with pytest.raises(UnusableDigitsError, match="from 1 to 1000 significant digits, not 0"):
        write_up(model, into=tmp_path, digits=0)
    with pytest.raises(UnknownDepthError):
        write_up(model, into=tmp_path, depth="deep")
    assert not list(tmp_path.iterdir())


def test_a_step_without_a_part_is_named() -> None:
    with pytest.raises(TemplateError, match=r"it has no file steps/tea\.tex\.j2"):
        render(Derivation("A", (Step("tea"),)))


def test_templates_inside_the_package_come_first(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    package = tmp_path / "closedform"
    (package / "templates").mkdir(parents=True)
    monkeypatch.setattr(module.resources, "files", lambda _: package)
    assert templates_folder() == package / "templates"
    (package / "templates").rmdir()
    assert templates_folder() == tmp_path / "templates"


def test_jinja_is_loaded_only_for_rendering() -> None:
    program = "import sys, closedform.document.render; print('jinja2' in sys.modules)"
    run = subprocess.run(
        [sys.executable, "-c", program],
        cwd=Path(__file__).parents[2],
        check=True,
        capture_output=True,
        text=True,
    )
    assert run.stdout == "False\n"


@pytest.mark.parametrize("error", [UnknownDepthError("deep"), TemplateError("a", 3, "It failed.")])
def test_errors_are_input_errors_and_travel(error: InputError) -> None:
    assert isinstance(error, InputError)
    assert str(pickle.loads(pickle.dumps(error))) == str(error)  # noqa: S301
