"""A write-up that was edited, or is of a model that has changed since, is told by its line."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from closedform import load, write_up
from closedform.checking.verdict import CheckReport, LineVerdict
from closedform.document.origin import Origin, origin_line, origin_of, path_between
from closedform.document.own import (
    ModelNotNamedError,
    UnreadableWriteUpError,
    check_file,
    check_writeup,
    is_writeup,
)
from closedform.document.templating import templates_folder

STARTERS = Path(str(templates_folder() / "starters"))


def written(name: str, folder: Path, depth: str = "working") -> Path:
    """The write-up of a starter in the folder out, its model beside that."""
    model = folder / f"{name}.toml"
    model.write_bytes((STARTERS / model.name).read_bytes())
    write_up(load(model), into=folder / "out", depth=depth, digits=5, record=False, source=model)
    return folder / "out" / f"{name}.tex"


@pytest.fixture(scope="module")
def ladder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return written("switched_ladder", tmp_path_factory.mktemp("ladder"))


@pytest.fixture(scope="module")
def tanks(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return written("three_equal_tanks", tmp_path_factory.mktemp("tanks"), "full")


@pytest.fixture(scope="module")
def tanks_report(tanks: Path) -> CheckReport:
    return check_writeup(tanks)


def edited(path: Path, old: str, new: str) -> tuple[CheckReport, int]:
    """What is found after one edit, and the line of the edit."""
    text = path.read_text(encoding="utf-8")
    assert old in text
    copy = path.with_name("edited.tex")
    copy.write_text(text.replace(old, new, 1), encoding="utf-8")
    return check_writeup(copy), text[: text.index(old)].count("\n") + 1


def wrong(report: CheckReport) -> list[LineVerdict]:
    return [verdict for verdict in report.lines if not verdict.passes]


def test_a_write_up_as_it_was_written_holds(
    ladder: Path, tanks: Path, tanks_report: CheckReport
) -> None:
    for path, report in ((ladder, check_writeup(ladder)), (tanks, tanks_report)):
        assert len(report.lines) > 12
        assert report.holds
        assert {verdict.verdict for verdict in report.lines} == {"holds"}
        assert [v.line.number for v in report.lines] == list(range(1, len(report.lines) + 1))
        assert all(v.line.place.file == str(path) for v in report.lines)
        assert report.model == str(path.parent.parent / f"{path.stem}.toml")
        assert report.name == path.stem
        assert all(verdict.says for verdict in report.lines)


def test_a_sign_that_was_edited_is_told_by_its_line(tanks: Path) -> None:
    old = r"\left(\boldsymbol{A} + \frac{1}{20}\,\boldsymbol{I}\right)\,\boldsymbol{v}_{2}"
    report, line = edited(tanks, old, old.replace("+", "-"))
    (verdict,) = wrong(report)
    assert verdict.verdict == "fails"
    assert verdict.line.place.line == line
    assert verdict.says == "generalized eigenvector equation"
    assert verdict.right is not None
    assert report.first_wrong == verdict.line.number


def test_a_term_of_a_long_row_that_was_edited_is_told(ladder: Path) -> None:
    text = ladder.read_text(encoding="utf-8")
    match = re.search(r"i_\{\\mathrm\{L\}\}\(t\) &?= [^\n]*C_\{(\d)\}", text)
    assert match is not None
    old = match.group()
    report, line = edited(ladder, old, old[:-2] + "9}")
    assert [(v.verdict, v.line.place.line) for v in wrong(report)] == [("fails", line)]


def test_a_decimal_of_a_table_that_was_edited_is_told(tanks: Path) -> None:
    report, line = edited(tanks, "$294$ & $.30$", "$294$ & $.31$")
    (verdict,) = wrong(report)
    assert (verdict.says, verdict.verdict) == ("table of values", "fails")
    assert verdict.line.place.line == line
    assert verdict.reason == "Row 2 of the values is otherwise."


def test_a_display_that_was_taken_out_is_told_once(ladder: Path) -> None:
    text = ladder.read_text(encoding="utf-8")
    display = re.findall(r"\\begin\{gather\*\}.*?\\end\{gather\*\}", text, re.DOTALL)[0]
    report, _ = edited(ladder, display, "")
    (verdict,) = wrong(report)
    assert verdict.verdict == "fails"
    assert "has not" in verdict.reason
    after = text[text.index(display) + len(display) :]
    following = re.search(r"\\begin\{(equation|align|gather)", after)
    assert following is not None
    place = text.index(after) + following.start()
    assert verdict.line.place.line == text[:place].replace(display, "").count("\n") + 2


def test_a_display_that_was_put_in_is_neither_passed_nor_called_wrong(tanks: Path) -> None:
    new = "\\[ \\lambda_1 = 7 \\]\n\\label{last-page}"
    report, line = edited(tanks, r"\label{last-page}", new)
    (verdict,) = wrong(report)
    assert (verdict.verdict, verdict.line.place.line) == ("not read", line)
    assert verdict.line.text == r"\lambda_1 = 7"


def test_what_cannot_be_read_is_said_to_be_unread(tanks: Path) -> None:
    old = r"\boldsymbol{A} = "
    report, _ = edited(tanks, old, r"\heartsuit = ")
    (verdict,) = wrong(report)
    assert verdict.verdict == "not read"
    assert "heartsuit" in verdict.reason


def test_another_setting_of_the_same_statement_holds(tanks: Path, ladder: Path) -> None:
    for path in (tanks, ladder):
        text = path.read_text(encoding="utf-8")
        other = text.replace(r"\,", " ").replace(r"\frac", r"\dfrac").replace(r"\left(", r"\Bigl(")
        other = other.replace(r"\right)", r"\Bigr)").replace("% closedform", "% kept\n% closedform")
        copy = path.with_name("reset.tex")
        copy.write_text(other, encoding="utf-8")
        assert wrong(check_writeup(copy)) == []


def test_a_model_that_changed_since_makes_the_write_up_stale(tmp_path: Path) -> None:
    path = written("three_equal_tanks", tmp_path, "summary")
    model = tmp_path / "three_equal_tanks.toml"
    changed = model.read_text(encoding="utf-8").replace("0.05", "0.06")
    assert changed != model.read_text(encoding="utf-8")
    other = tmp_path / "other.toml"
    other.write_text(changed, encoding="utf-8")
    assert check_writeup(path).holds
    report = check_writeup(path, other)
    assert not report.holds
    assert "fails" in {verdict.verdict for verdict in report.lines}
    assert report.model == str(other)


def test_a_document_that_names_no_model_asks_for_one(tmp_path: Path, tanks: Path) -> None:
    text = tanks.read_text(encoding="utf-8")
    bare = tmp_path / "bare.tex"
    bare.write_text(text.partition("\n")[2], encoding="utf-8")
    with pytest.raises(ModelNotNamedError, match="--model"):
        check_writeup(bare)
    bare.write_text(text, encoding="utf-8")
    with pytest.raises(ModelNotNamedError, match=r"three_equal_tanks\.toml, which is not there"):
        check_writeup(bare)
    with pytest.raises(UnreadableWriteUpError, match="missing"):
        check_writeup(tmp_path / "missing.tex")
    bare.write_bytes(b"\xff")
    with pytest.raises(UnreadableWriteUpError, match="UTF-8"):
        check_writeup(bare)


def test_either_kind_of_file_is_checked(
    tanks: Path, tanks_report: CheckReport, tmp_path: Path
) -> None:
    assert check_file(tanks) == tanks_report
    hand = tmp_path / "hand.tex"
    hand.write_text(r"\[ \lambda_1 = -\frac{1}{20} \]", encoding="utf-8")
    report = check_file(hand, model=tanks.parent.parent / "three_equal_tanks.toml")
    assert [verdict.line.text for verdict in report.lines] == [r"\lambda_1 = -\frac{1}{20}"]
    assert report.title != tanks_report.title


# --- the line at the top -----------------------------------------------------------------------


def test_the_top_says_what_a_document_is_of(ladder: Path) -> None:
    first = ladder.read_text(encoding="utf-8").partition("\n")[0]
    assert first == "% closedform: write-up of switched_ladder.toml, depth working, digits 5"
    assert is_writeup(first)
    assert not is_writeup("\\documentclass{article}")
    origin = Origin("../a, depth full, digits 3/b.toml", "summary", 12)
    assert origin_of("\n" + origin_line(origin) + "x") == origin
    assert origin_line(Origin("a\nb", "full", 6)).count("\n") == 1


@pytest.mark.parametrize(
    ("model", "folder", "path"),
    [
        ("tank.toml", "out", "../tank.toml"),
        ("models/tank.toml", "out", "../models/tank.toml"),
        ("models/tank.toml", "models", "tank.toml"),
        ("./tank.toml", "out/deep", "../../tank.toml"),
        ("/home/someone/tank.toml", "out", "tank.toml"),
        ("tank.toml", "/home/someone/out", "tank.toml"),
        ("tank.toml", "../out", "tank.toml"),
        ("../tank.toml", "out", "tank.toml"),
    ],
)
def test_no_folder_above_is_told(model: str, folder: str, path: str) -> None:
    assert path_between(model, folder) == path
