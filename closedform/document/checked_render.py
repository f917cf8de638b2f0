"""A checked derivation through the templates to the text of a report."""

from __future__ import annotations

import re
from pathlib import Path
from typing import TYPE_CHECKING

from closedform.checking.claim import KINDS
from closedform.checking.verdict import CheckReport
from closedform.document.checked_formulas import formula_of, right_of, statements_of, typed
from closedform.document.checked_words import (
    MEANINGS,
    claimed,
    counts,
    outcome,
    place_of,
    sentence,
    slip_sentence,
    tally,
)
from closedform.document.references import References
from closedform.document.templating import answered, environment, shortened
from closedform.notation.latex.escape import escaped
from closedform.notation.latex.names import derivatives_of
from closedform.notation.written.latex_form import latex_name

if TYPE_CHECKING:
    from jinja2 import Environment

__all__ = ["check_report_template", "render_check"]

NAME = re.compile(r"[A-Za-z][A-Za-z0-9_]{0,30}'{0,6}")
LONGEST_WORD, SHORT = 16, 8
SHELF = r"\hspace{0pt}"
UNKNOWN = re.compile(r"\[U\+[0-9A-F]+\]")
"""What stands for a letter that TeX has no glyph for."""

MINUS = re.compile(r"(?<![\w)\-])-(?=[\w(])")

MAIN = "check.tex.j2"
"""The file of a template that a report is made by."""


def render_check(report: CheckReport, *, template: str | Path = "latex") -> str:
    """Return the report as the text of a LaTeX document.

    The author's formulas are set from what was read; text that was not read is printed
    letter by letter.  `template` is as in `render`.  The same report gives the same text.

    Raises:  TemplateError if the template is not there or fails.
    """
    found = _environment(template)
    tallied = counts(report)
    values: dict[str, object] = {
        "report": report,
        "dense": False,
        "foot": shortened(report.title),
        "tally": tally(report),
        "outcome": outcome(report),
        "meanings": {word: text for word, text in MEANINGS.items() if tallied[word]},
    }
    with derivatives_of(report.time):
        return answered(template, lambda: found.get_template(MAIN).render(values))


def check_report_template(template: str | Path) -> None:
    """Find and read the main file of a template, so that a wrong name is told at once.

    Raises:  TemplateError if it is not there or not valid.
    """
    answered(template, lambda: _environment(template).get_template(MAIN))


def prose(text: str) -> str:
    r"""Return a sentence with formulas in plain notation as LaTeX: a minus is no hyphen.

    >>> prose("It is -1, not 1.")
    'It is \\ensuremath{-}1, not 1.'
    """
    return escaped(MINUS.sub("\N{MINUS SIGN}", text))


def narrowed(text: str) -> str:
    """Return what stands in a narrow column: as `subject`, but long words break anywhere."""
    if all(len(word) <= LONGEST_WORD for word in text.split()) and "[U+" not in escaped(text):
        return subject(text)
    parts = [
        SHELF.join(escaped(word[i : i + SHORT]) for i in range(0, len(word), SHORT))
        for word in text.split()
    ]
    return UNKNOWN.sub(lambda sign: sign.group() + SHELF, " ".join(parts))


def subject(says: str) -> str:
    r"""Return what a line says as LaTeX, names behind the kind of claim as symbols.

    >>> subject("solution x1"), subject("P inverse")
    ('solution $x_{1}$', 'P inverse')
    """
    if says in KINDS:
        return says
    kind = next((k for k in sorted(KINDS, key=len)[::-1] if says.startswith(f"{k} ")), "")
    names = says[len(kind) :].strip().split(", ")
    if kind and all(map(NAME.fullmatch, names)):
        return f"{kind} {', '.join(f'${latex_name(name)}$' for name in names)}"
    return prose(says)


def _environment(template: str | Path) -> Environment:
    found = environment(template, References())
    found.filters |= {
        "formula": formula_of,
        "statements": statements_of,
        "right": right_of,
        "typed": typed,
        "claimed": claimed,
        "place_of": place_of,
        "slip_sentence": slip_sentence,
        "sentence": sentence,
        "prose": prose,
        "narrowed": narrowed,
        "subject": subject,
    }
    return found
