"""A checked derivation as the XML of JUnit, which continuous-integration servers show.

Each line is a test case.  There are no times in it: the same report gives the same bytes.
"""

from __future__ import annotations

import re
from xml.etree import ElementTree as ET

from closedform.checking.verdict import CheckReport, LineVerdict
from closedform.document.checked_words import line_name, slip_words
from closedform.notation.written.plain_form import plain_written

__all__ = ["junit_text"]

UNFIT = re.compile("[^\t\n\u0020-\u007e\u00a0-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")
"""What XML 1.0 (W3C, 2008, section 2.2) does not allow or advises against."""


def junit_text(report: CheckReport, *, allow_unread: bool = False) -> str:
    """Return the report as JUnit XML.

    A line that fails or is carried is a failure; one that was not read is an error, or
    skipped if `allow_unread`.
    """
    found = [v.verdict for v in report.lines]
    unread = found.count("not read")
    numbers = {
        "tests": str(len(found)),
        "failures": str(found.count("fails") + found.count("carried")),
        "errors": str(0 if allow_unread else unread),
        "skipped": str(unread if allow_unread else 0),
    }
    whole = ET.Element("testsuites", {"name": "closedform check", **numbers})
    suite = ET.SubElement(whole, "testsuite", {"name": _fit(report.name), **numbers})
    for verdict in report.lines:
        names = {"name": _fit(line_name(verdict)), "classname": _fit(report.name)}
        case = ET.SubElement(suite, "testcase", names)
        tag = _tag(verdict, allow_unread=allow_unread)
        if tag:
            facts = {"message": _fit(_message(verdict))}
            if tag != "skipped":
                facts["type"] = verdict.verdict
            ET.SubElement(case, tag, facts).text = _fit(_told(report, verdict))
    ET.indent(whole, " ")
    body = ET.tostring(whole, encoding="unicode")
    return f'<?xml version="1.0" encoding="UTF-8"?>\n{body}\n'


def _tag(verdict: LineVerdict, *, allow_unread: bool) -> str:
    if verdict.passes:
        return ""
    if verdict.verdict == "not read":
        return "skipped" if allow_unread else "error"
    return "failure"


def _message(verdict: LineVerdict) -> str:
    word: str = verdict.verdict
    if verdict.carried_from is not None:
        word = f"carried from line {verdict.carried_from}"
    return f"{word}: {' '.join(verdict.reason.split())}" if verdict.reason else word


def _told(report: CheckReport, verdict: LineVerdict) -> str:
    """Return the lines below the message: where, what was written, what is right."""
    where = str(verdict.line.place) or report.source
    told = [f"{where}: {verdict.line.text.strip()}"]
    if verdict.right is not None:
        told.append(f"right: {plain_written(verdict.right)}")
    if verdict.slip is not None:
        told.append(f"slip: {slip_words(verdict.slip)}")
        if verdict.slip.mended not in (None, verdict.right):
            told.append(f"mended: {plain_written(verdict.slip.mended)}")
    return "\n".join(told + [f"note: {note}" for note in verdict.notes])


def _fit(text: str) -> str:
    return UNFIT.sub("\N{REPLACEMENT CHARACTER}", re.sub("\r\n?", "\n", text))
