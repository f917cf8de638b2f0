"""What README.md shows of a check is what the program says."""

from __future__ import annotations

import re
import subprocess
import sys
from pathlib import Path

from closedform.checking.claim import KINDS
from closedform.checking.source.words import WORDS
from closedform.checking.verdict import WORDS as VERDICTS
from tests.cli.commanding import ROOT, run

README = (ROOT / "README.md").read_text(encoding="utf-8")
EXCERPT = re.search(r"(?s)```text\n\$ closedform (check [^\n]*)\n(.*?)```", README)


def test_the_excerpt_is_what_is_printed(tmp_path: Path) -> None:
    assert EXCERPT is not None
    assert run("starter", "coupled_tables", cwd=tmp_path).returncode == 0
    done = run(*EXCERPT[1].split(), cwd=tmp_path, COLUMNS="80")
    assert done.returncode == 1
    shown = [part.strip("\n") for part in EXCERPT[2].split("   …\n")]
    assert len(shown) == 2
    for part in shown:
        assert part in done.stdout


def test_every_verdict_and_every_kind_of_claim_is_told() -> None:
    section = README.partition("## Checking a derivation")[2].partition("\n## ")[0]
    assert [word for word in VERDICTS if f"| `{word}` |" not in section] == []
    assert [kind for kind in KINDS if f"`{kind}`" not in section] == []
    assert set(KINDS) <= set(WORDS.values())


def test_the_claims_shown_are_read_and_hold(tmp_path: Path) -> None:
    section = README.partition("### What goes in")[2]
    claims = re.search(r"(?s)```toml\n(.*?)```", section)
    assert claims is not None
    assert run("starter", "ladder_on_paper", cwd=tmp_path).returncode == 0
    text = claims[1].replace("ladder.toml", "ladder_on_paper_model.toml")
    (tmp_path / "shown.toml").write_text(text, encoding="utf-8")
    done = run("check", "shown.toml", cwd=tmp_path)
    assert "all 2 lines hold" in done.stdout


def test_the_comments_shown_are_read(tmp_path: Path) -> None:
    section = README.partition("### What goes in")[2]
    lines = re.search(r"(?s)```tex\n(.*?)```", section)
    assert lines is not None
    (tmp_path / "cart.toml").write_text(
        'title = "A cart"\nequations = ["x\'\' + 3*x\' + 2*x = 0"]\n'
        'initial = { x = 1, "x\'" = 0 }\n',
        encoding="utf-8",
    )
    (tmp_path / "shown.tex").write_text(lines[1], encoding="utf-8")
    done = run("check", "shown.tex", cwd=tmp_path)
    assert "the one line holds" in done.stdout


def test_formulas_are_read_as_shown() -> None:
    section = README.partition("### Reading formulas from other programs")[2]
    code = re.search(r"(?s)```python\n(.*?)```", section)
    assert code is not None
    told = [line.partition("# ") for line in code[1].splitlines() if "# " in line]
    calls = [call.strip() for call, _, _ in told]
    program = "\n".join([code[1], *(f"print({call})" for call in calls)])
    done = subprocess.run(
        [sys.executable, "-c", program], cwd=ROOT, capture_output=True, text=True, check=True
    )
    assert done.stdout.splitlines() == [shown for _, _, shown in told] != []
