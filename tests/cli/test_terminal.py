"""What a person sees: the summary, the moving line, colours, and widths."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from closedform.model.driven.model import DrivenModel
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.model.reading import load
from tests.cli.commanding import ROOT, Terminal

STARTERS = ROOT / "templates" / "starters"
ESCAPE = re.compile(r"\x1b\[[0-9;?]*[A-Za-z]")
HIDE_CURSOR, SHOW_CURSOR = "\x1b[?25l", "\x1b[?25h"


@pytest.mark.usefixtures("tank")
def test_a_terminal_shows_the_summary(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", cwd=tmp_path)
    assert terminal.finish() == 0
    shown = [line for line in terminal.lines if line]
    assert shown[0] == "Two tanks"
    assert shown[1:5] == [
        "  states         2: m1, m2",
        "  eigenvalues    -0.2",
        "                 -0.4",
        "  form           diagonalisable",
    ]
    assert shown[-2:] == [
        "  written        out/tank.tex",
        "                 out/tank.record.json",
    ]


@pytest.mark.usefixtures("tank")
def test_the_moving_line_tells_the_stage_and_is_gone_at_the_end(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", cwd=tmp_path)
    terminal.read_until("tank: solving and proving")
    assert terminal.finish() == 0
    assert not any("solving" in line for line in terminal.lines)
    assert terminal.raw.count(HIDE_CURSOR) == terminal.raw.count(SHOW_CURSOR)
    assert terminal.raw.rindex(HIDE_CURSOR) < terminal.raw.rindex(SHOW_CURSOR)


@pytest.mark.usefixtures("tank")
def test_several_models_are_counted(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", "gone.toml", cwd=tmp_path)
    assert terminal.finish() == 2
    plain = ESCAPE.sub("", terminal.raw)
    assert "0/2" in plain
    assert "1/2" in plain
    shown = [line for line in terminal.lines if line]
    assert shown[-2].startswith("error: gone.toml: there is no such file")
    assert shown[-1] == "2 models: 1 written up, 1 failed"


@pytest.mark.parametrize("columns", [80, 50])
def test_no_line_is_longer_than_the_terminal_is_wide(tmp_path: Path, columns: int) -> None:
    models = sorted(STARTERS.glob("*.toml"))
    terminal = Terminal("writeup", *models, "--digits", "40", cwd=tmp_path, columns=columns)
    assert terminal.finish() == 0
    assert [line for line in terminal.lines if len(line) > columns and "out/" not in line] == []
    numeric = [path for path in models if has_numbers_alone(load(path))]
    assert sum(line.startswith("  eigenvalues") for line in terminal.lines) == len(numeric)


def has_numbers_alone(model: Model | ParametricModel | DrivenModel) -> bool:
    """Whether a model is solved in numbers: it has no parameters, and pi is not in it."""
    return isinstance(model.stacked if isinstance(model, DrivenModel) else model, Model)


@pytest.mark.usefixtures("tank")
def test_a_pipe_beside_a_terminal_gets_bare_paths(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", cwd=tmp_path, stdout_is_pipe=True)
    terminal.read_until("solving and proving")
    assert terminal.finish() == 0
    assert terminal.piped == b"out/tank.tex\nout/tank.record.json\n"
    assert [line for line in terminal.lines if line] == []


@pytest.mark.usefixtures("tank")
def test_quiet_leaves_a_terminal_empty(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", "--quiet", cwd=tmp_path)
    assert terminal.finish() == 0
    assert terminal.raw == ""


@pytest.mark.usefixtures("tank")
def test_colour_is_used_on_a_terminal_and_not_where_it_is_not_wanted(tmp_path: Path) -> None:
    words = ("writeup", "tank.toml", "gone.toml")
    coloured = Terminal(*words, cwd=tmp_path)
    plain = Terminal(*words, cwd=tmp_path, NO_COLOR="1")
    assert coloured.finish() == plain.finish() == 2
    assert "\x1b[1;31merror:" in coloured.raw
    assert "\x1b[31m" not in plain.raw
    assert "\x1b[1;31m" not in plain.raw
    assert coloured.lines == plain.lines


@pytest.mark.usefixtures("tank")
def test_forced_colour_changes_nothing_in_a_pipe(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", cwd=tmp_path, stdout_is_pipe=True, FORCE_COLOR="1")
    assert terminal.finish() == 0
    assert terminal.piped == b"out/tank.tex\nout/tank.record.json\n"


@pytest.mark.usefixtures("tank")
def test_a_dumb_terminal_gets_no_moving_line(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", cwd=tmp_path, TERM="dumb")
    assert terminal.finish() == 0
    assert "\x1b" not in terminal.raw
    assert "solving" not in terminal.raw
    assert terminal.lines[0] == "Two tanks"


def test_text_of_the_model_cannot_steer_the_terminal(tank: Path, tmp_path: Path) -> None:
    title = r"[red]Two[/red] \u001b[31mtanks\u001b]0;mine\u0007 \u202e :smile:"
    text = tank.read_text(encoding="utf-8").replace("Two tanks", title)
    tank.write_text(text, encoding="utf-8")
    terminal = Terminal("writeup", "tank.toml", cwd=tmp_path)
    assert terminal.finish() == 0
    assert "\x1b]0;" not in terminal.raw
    assert "\x07" not in terminal.raw
    assert "\u202e" not in terminal.raw
    assert "\x1b[31m" not in terminal.raw
    assert terminal.lines[0].startswith("[red]Two[/red]  [31mtanks")
    assert ":smile:" in terminal.lines[0]


def test_the_name_of_a_file_cannot_steer_the_terminal(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "[bold]a\x1b[2Jb\n.toml", cwd=tmp_path)
    assert terminal.finish() == 2
    assert "\x1b[2J" not in terminal.raw
    assert any("[bold]a [2Jb" in line for line in terminal.lines)


def test_an_error_is_folded_between_words_and_its_excerpt_is_not(
    tank: Path, tmp_path: Path
) -> None:
    line = f'matrix = [["1/3", 0], [0, "4 +"]] # {"far " * 12}'
    text = tank.read_text(encoding="utf-8").replace("matrix = [[-0.2, 0], [0.2, -0.4]]", line)
    tank.write_text(text, encoding="utf-8")
    terminal = Terminal("writeup", "tank.toml", cwd=tmp_path, columns=60)
    assert terminal.finish() == 2
    shown = [line for line in terminal.lines if line.strip()]
    head, excerpt, caret = shown[:-2], shown[-2], shown[-1]
    assert len(head) > 1
    assert max(map(len, head)) <= 60
    assert len(excerpt) > 60
    assert excerpt.strip("… ")[:20] in line
    assert caret.strip() == "^"


def test_a_sign_that_the_terminal_does_not_have_is_a_question_mark(tmp_path: Path) -> None:
    model = STARTERS / "spinning_body.toml"
    terminal = Terminal("writeup", model, cwd=tmp_path, PYTHONIOENCODING="ascii")
    assert terminal.finish() == 0
    assert "                 ? 1.1 i" in terminal.lines


def test_a_starter_says_what_to_do_next(tmp_path: Path) -> None:
    terminal = Terminal("starter", cwd=tmp_path)
    assert terminal.finish() == 0
    assert terminal.lines[-2] == "Copy one with: closedform starter NAME"
    terminal = Terminal("starter", "rlc_pair", "--into", "my models", cwd=tmp_path)
    assert terminal.finish() == 0
    assert terminal.lines[0] == "my models/rlc_pair.toml"
    assert terminal.lines[-2] == "Write it up with: closedform writeup 'my models/rlc_pair.toml'"
    terminal = Terminal("starter", "coupled_tables", cwd=tmp_path)
    assert terminal.finish() == 0
    assert terminal.lines[-2] == "Check it with: closedform check coupled_tables.tex"
