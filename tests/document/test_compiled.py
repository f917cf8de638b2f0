"""Documents as TeX sets them: nothing sticks out, nothing is missing."""

from __future__ import annotations

import os
import re
import subprocess
from collections.abc import Iterator
from pathlib import Path

import pytest

from closedform.derivation.step import Matrix
from closedform.document.engine import RERUN, compile_pdf
from closedform.document.files import write_whole
from closedform.document.matrices import with_front
from closedform.document.render import DEPTHS, render
from closedform.document.symbols import side_box
from closedform.notation.expression import Call, Power, Quotient, Sum
from tests.document.making import T, add, neg, prod, q, root
from tests.document.samples import SAMPLES, two_real

OVERFULL = re.compile(r"Overfull \\[hv]box \(([0-9.]+)pt")
TROUBLE = ("Missing character", "undefined", "multiply defined", "LaTeX Font Warning")


def log_of(text: str, engine: str, folder: Path) -> str:
    """Run the engine until references have settled and return its log."""
    (folder / "d.tex").write_text(text, encoding="utf-8")
    for _ in range(3):
        run = subprocess.run(
            [engine, "-interaction=nonstopmode", "-halt-on-error", "-no-shell-escape", "d.tex"],
            cwd=folder,
            env=os.environ | {"max_print_line": "1000"},
            capture_output=True,
            check=False,
            timeout=120,
        )
        log = (folder / "d.log").read_text(encoding="utf-8", errors="replace")
        assert run.returncode == 0, log[-2000:]
        if not any(sign in log for sign in RERUN):
            break
    return log


def complaints(log: str) -> list[str]:
    """Return the lines of a log that a careful author would act on."""
    found = []
    for line in log.splitlines():
        overfull = OVERFULL.search(line)
        if overfull and float(overfull[1]) > 1:
            found.append(line)
        found += [line for word in TROUBLE if word in line]
    return found


def test_the_search_finds_what_it_looks_for(pdflatex: str, tmp_path: Path) -> None:
    bad = (
        "\\documentclass{article}\\tracinglostchars=2\\begin{document}\\ref{x}"
        "\\hbox to 1cm{\\rule{3cm}{1pt}}\\font\\x=cmr10 \\x\\char200\\end{document}"
    )
    found = complaints(log_of(bad, pdflatex, tmp_path))
    assert any("Overfull" in line for line in found)
    assert any("Missing character" in line for line in found)
    assert any("undefined" in line for line in found)


@pytest.mark.parametrize("engine", ["pdflatex", "lualatex", "xelatex"])
@pytest.mark.parametrize("name", SAMPLES)
def test_a_document_compiles_without_complaint(
    name: str, engine: str, engines: tuple[str, ...], tmp_path: Path
) -> None:
    if engine not in engines:
        pytest.skip(f"{engine} is not installed")
    assert complaints(log_of(render(SAMPLES[name](), depth="full"), engine, tmp_path)) == []


@pytest.mark.parametrize("depth", DEPTHS)
def test_every_depth_compiles(depth: str, pdflatex: str, tmp_path: Path) -> None:
    assert complaints(log_of(render(two_real(), depth=depth), pdflatex, tmp_path)) == []


def test_a_write_up_gives_the_same_pdf_again(engines: tuple[str, ...], tmp_path: Path) -> None:
    text = render(two_real())
    for engine in engines:
        first = compile_pdf(write_whole(tmp_path / "a" / "x.tex", text), engine=engine)
        second = compile_pdf(write_whole(tmp_path / "b" / "y.tex", text), engine=engine)
        assert first.read_bytes() == second.read_bytes(), engine


def boxes() -> Iterator[tuple[str, float]]:
    """Return the LaTeX and the estimated width of every side of every sample, and of more."""
    letters = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ"
    sides = [
        side
        for make in SAMPLES.values()
        for step in make().steps
        for statement in step.statements
        for side in statement.sides
    ]
    sides += [with_front(side) for side in sides if isinstance(side, Matrix)]
    sides += [
        add(*letters),
        prod(*letters),
        add(*(f"x_{letter}{letter}" for letter in letters)),
        add("k12", "v_left", "omega_d", "mass", "alpha_beta"),
        Sum(tuple(Call(f, prod("omega", T)) for f in ("sin", "cos", "sinh", "cosh", "exp"))),
        Quotient(add("a", "b"), prod("c", "d")),
        Power(add("lambda", "5/2"), q(7)),
        q("1234567/89"),
        prod("123/4567", "12345678901234567890"),
        root(add(1, root(prod("2/3", "k")))),
        Call("exp", neg(Quotient(add("a", root("b")), q("tau")))),
    ]
    for side in sides:
        box = side_box(side)
        yield box.latex, box.width


def test_widths_are_estimated_from_above(pdflatex: str, tmp_path: Path) -> None:
    estimates = dict(boxes())
    measured = "\n".join(
        rf"\setbox0\hbox{{$\displaystyle {latex}$}}\immediate\write\widths{{\the\wd0}}"
        for latex in estimates
    )
    preamble = render(two_real()).split(r"\begin{document}")[0]
    text = (
        rf"{preamble}\newwrite\widths\immediate\openout\widths=w.txt"
        f"\\begin{{document}}\n{measured}\n\\end{{document}}\n"
    )
    log_of(text, pdflatex, tmp_path)
    points = [float(line[:-2]) for line in (tmp_path / "w.txt").read_text().splitlines()]
    assert len(points) == len(estimates) > 150
    for (latex, estimate), width in zip(estimates.items(), points, strict=True):
        em = width / 10.95
        # half a letter is what the margin of EM_PER_LINE takes up many times over
        assert estimate > em - 0.3, latex
        assert estimate < 1.2 * em + 1.0, latex
