"""One side of a relation, read from its LaTeX to its normal form."""

from __future__ import annotations

import re

from closedform.document.reading.expected import entry, functions_of, one_sided, residue_sum
from closedform.document.reading.normal import BOLD, UPRIGHT_I, Value, normal
from closedform.errors import ClosedformError
from closedform.notation.written.reader import read_latex
from closedform.notation.written.tree import Declared, Jet, Symbol, Written, changed

__all__ = ["SideReader", "UnreadSideError"]

BOLD_LETTER = re.compile(r"\\boldsymbol\{(?:\\mathrm\{([A-Za-z]+)\}|\\?([A-Za-z]+))\}")
BOLD_ZERO = r"\boldsymbol{0}"
BEFORE_BRACKET = re.compile(r"(?<!\\cdot)\\,((?:\\left)?\()")
UPRIGHT_E = r"\mathrm{e}^{"
LESS_ONE = re.compile(r"\\mathrm\{([A-Za-z]+)-([0-9]+)\}")
NEARER = r"\setlength{\arraycolsep}{2.5pt}"
ENTRY = re.compile(r"\\bigl\((?P<body>.*)\\bigr\)_\{(?P<indices>[^{}]*)\}")
ONE_SIDED = re.compile(
    r"(?P<function>.*?)(?:\\left)?\((?P<at>.*)\^\{(?P<sign>[-+])\}(?:\\right)?\)"
)
RESIDUES = re.compile(r"\\sum_\{(?P<over>[^{}]*) = 0\} (?P<body>.*)")
EMPTY_GROUP = re.compile(r"(?<![A-Za-z_^}])\{\}")


class UnreadSideError(Exception):
    """A side that is no formula that can be read: its text, and why."""

    def __init__(self, text: str, reason: str) -> None:
        super().__init__(text, reason)
        self.text, self.reason = text, reason


class SideReader:
    """Reads sides with the names that a display uses."""

    def __init__(self, declared: Declared) -> None:
        self.declared = declared
        self._read: dict[str, Value] = {}
        self._trees: dict[str, Written] = {}

    def read(self, text: str) -> Value:
        """Return the normal form of a side.

        Raises:  UnreadSideError if the text is no single formula.
        """
        if text not in self._read:
            self._read[text] = self._side(text)
        return self._read[text]

    def _side(self, text: str) -> Value:
        if match := ENTRY.fullmatch(text):
            indices = re.sub(r"\s+", " ", match["indices"]).strip()
            return entry(self.read(match["body"]), indices)
        if match := ONE_SIDED.fullmatch(text):
            return one_sided(self.read(match["function"]), self.read(match["at"]), match["sign"])
        if match := RESIDUES.fullmatch(text):
            return residue_sum(self.read(match["over"]), self.read(match["body"]))
        plain = text.replace(BOLD_ZERO, "0").replace(NEARER, "").replace(r"\uppi", r"\pi")
        plain = LESS_ONE.sub(r"\\mathrm{\1minus\2}", EMPTY_GROUP.sub("", plain))
        # our products have a space before a bracket, our functions none
        plain = BEFORE_BRACKET.sub(r"\\cdot \1", plain)
        if "e" in self.declared.names:
            plain = _called(plain)
        for unit in ("i", "j"):
            if unit in self.declared.names:
                plain = plain.replace(rf"\mathrm{{{unit}}}", rf"\mathrm{{{UPRIGHT_I}}}")
        plain = BOLD_LETTER.sub(lambda match: rf"\mathrm{{{BOLD}{match[1] or match[2]}}}", plain)
        try:
            reading = read_latex(plain, self.declared)
        except ClosedformError as error:
            raise UnreadSideError(text, str(error).partition("\n")[0]) from error
        if len(reading.statements) != 1 or len(reading.statements[0].members) != 1:
            raise UnreadSideError(text, "it is not one formula.")
        tree = functions_of(self.declared.time, reading.statements[0].members[0])
        self._trees[text] = tree
        return normal(tree)

    def tree(self, text: str) -> Written | None:
        """Return a side that was read as a formula, None for one that is no plain formula."""
        tree = self._trees.get(text)
        return None if tree is None else changed(tree, _bold_again)


def _called(text: str) -> str:
    r"""Return a text with \exp in the place of upright e, where an e in italics is a name."""
    place = text.find(UPRIGHT_E)
    if place < 0:
        return text
    begin = place + len(UPRIGHT_E)
    depth, end = 1, begin
    while end < len(text) and depth:
        depth += (text[end] == "{") - (text[end] == "}")
        end += 1
    inside = _called(text[begin : end - 1])
    return rf"{text[:place]}\exp\left({inside}\right){_called(text[end:])}"


def _bold_again(node: Written) -> Written | None:
    match node:
        case Symbol(name) if name.startswith(BOLD):
            return Symbol(name.removeprefix(BOLD), bold=True)
        case Jet(name, order, at) if name.startswith(BOLD):
            return Jet(name.removeprefix(BOLD), order, at)
    return None
