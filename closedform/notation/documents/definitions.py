r"""Definitions of macros, as they stand in documents.

Followed are plain definitions: arguments #1 to #9 in their order, one optional argument at
most, and a body that decides, defines and delays nothing.  Any other is kept as refused, so
that whoever uses the macro is told; the body of a standard macro does not take its place.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

__all__ = ["DEFINERS", "Definition", "Macro", "group_end", "optional_end", "read_definition"]

DEFINERS = frozenset(
    (
        *("newcommand", "renewcommand", "providecommand", "DeclareRobustCommand", "def"),
        *("gdef", "edef", "xdef", "let", "DeclareMathOperator", "NewDocumentCommand"),
        *("RenewDocumentCommand", "ProvideDocumentCommand", "DeclareDocumentCommand"),
        *("newenvironment", "renewenvironment"),
    )
)
LONGEST_BODY = 20_000
PIECE = re.compile(r"(?s)\\.|[{}]")
BRACKET = re.compile(r"(?s)\\.|[{}\]]")
NAME = re.compile(r"\s*(\*?)\s*(?:\{\s*\\([a-zA-Z@]+|.)\s*\}|\\([a-zA-Z@]+|[^a-zA-Z\s]))")
WORD_NAME = re.compile(r"\s*(\*?)\s*\{([^{}\n]*)\}")
COUNT = re.compile(r"\s*\[\s*([0-9])\s*\]")
PATTERN = re.compile(r"([^{}]*)(?=\{)")
PLAIN_PATTERN = re.compile(r"(?:#[1-9])*")
SPECIFICATION = re.compile(r"\s*\{((?:[^{}]|\{[^{}]*\})*)\}")
PLAIN_SPECIFICATION = re.compile(r"\s*(?:O\{([^{}]*)\}|(o))?\s*((?:\+?m\s*)*)")
LET = re.compile(r"\s*\\([a-zA-Z@]+)\s*=?[ ]?(\\[a-zA-Z@]+|\\?[^\s\\])")
TRICK = re.compile(
    r"""(?x) \\ (?: csname | expandafter | futurelet | noexpand | the | catcode | loop | repeat
    | if (?! f (?![a-zA-Z@]) ) [a-zA-Z@]* | fi | else | or | global | aftergroup | input | include
    | afterassignment | [a-zA-Z]*@[a-zA-Z@]* | newif | number | romannumeral | scantokens
    | IfNoValueTF | IfBooleanTF | newcommand | renewcommand | providecommand
    | DeclareMathOperator | let | [gex]?def | (?:New|Renew|Provide|Declare)DocumentCommand
    | (?:re)?newenvironment | DeclareRobustCommand ) (?![a-zA-Z@]) | \#\#"""
)
DEFINED_INSIDE = re.compile(
    r"""(?x) \\ (?: newcommand | renewcommand | providecommand | DeclareMathOperator | let
    | [gex]?def | (?:New|Renew|Provide|Declare)DocumentCommand | DeclareRobustCommand )
    (?![a-zA-Z@]) \s* \*? \s* \{? \s* \\ ([a-zA-Z@]+)"""
)
PARAMETER = re.compile(r"#([1-9])")


@dataclass(frozen=True, slots=True)
class Macro:
    """What a macro stands for: `body` with #1 to `#arguments`.

    `default` is that of an optional first argument.  A `final` body is not looked at again: it
    names what a macro was before it was defined anew.  `refused` says why a definition is not
    followed, and is empty if it is.
    """

    body: str = ""
    arguments: int = 0
    default: str | None = None
    final: bool = False
    refused: str = ""


@dataclass(frozen=True, slots=True)
class Definition:
    """What a definition gives: macros by name, and where it ends.

    `lasting` says that it outlives its group, `weak` that it does nothing where the name has a
    meaning already.  The macros of an environment are called "begin{name}" and "end{name}".
    """

    macros: tuple[tuple[str, Macro], ...]
    end: int
    lasting: bool = False
    weak: bool = False
    copies: str = ""
    """The macro of which the name becomes a copy, by \\let."""


TRICKY = Macro(refused="its definition decides or defines something, which is not followed")
DELIMITED = Macro(refused="the pattern of its arguments is not followed")


def group_end(text: str, start: int, longest: int = LONGEST_BODY) -> int | None:
    """Return where the group ends that begins with a brace at `start`, behind its last brace."""
    depth = 0
    for piece in PIECE.finditer(text, start, min(len(text), start + longest)):
        if piece[0] == "{":
            depth += 1
        elif piece[0] == "}":
            depth -= 1
            if depth == 0:
                return piece.end()
    return None


def optional_end(text: str, start: int, longest: int = LONGEST_BODY) -> int | None:
    """Return where the argument in brackets ends that begins at `start`."""
    depth = 0
    for piece in BRACKET.finditer(text, start + 1, min(len(text), start + longest)):
        if piece[0] == "]" and depth == 0:
            return piece.end()
        depth += {"{": 1, "}": -1}.get(piece[0], 0)
    return None


def read_definition(word: str, text: str, start: int) -> Definition | None:
    """Return the definition that follows the command `word`, or None if there is none to read."""
    match word:
        case "def" | "gdef" | "edef" | "xdef":
            return _primitive(word, text, start)
        case "let":
            return _let(text, start)
        case "newenvironment" | "renewenvironment":
            return _environment(text, start)
    named = NAME.match(text, start)
    if named is None:
        return None
    name = named[2] or named[3]
    if word == "DeclareMathOperator":
        body = _body(text, named.end())
        if body is None:
            return None
        star = "*" if named[1] else ""
        macro = _checked(Macro(rf"\operatorname{star}{{{body[0]}}}"))
        return Definition(((name, macro), *_inside(body[0])), body[1])
    if word.endswith("DocumentCommand"):
        return _document_command(word, name, text, named.end())
    counted = _counted(text, named.end())
    body = _body(text, counted[2])
    if body is None:
        return None
    macro = _checked(Macro(body[0], counted[0], counted[1]))
    weak = word == "providecommand"
    return Definition(((name, macro), *_inside(body[0])), body[1], weak=weak)


def _primitive(word: str, text: str, start: int) -> Definition | None:
    named = NAME.match(text, start)
    if named is None or named[1] or named[2]:
        return None
    pattern = PATTERN.match(text, named.end(), min(len(text), named.end() + 200))
    body = _body(text, pattern.end()) if pattern else None
    if pattern is None or body is None:
        return None
    arguments = pattern[1].strip()
    plain = PLAIN_PATTERN.fullmatch(arguments)
    count = len(arguments) // 2
    if plain is None or arguments != "".join(f"#{i + 1}" for i in range(count)):
        macro = DELIMITED
    else:
        macro = TRICKY if word in ("edef", "xdef") else _checked(Macro(body[0], count))
    lasting = word in ("gdef", "xdef") or text.endswith(r"\global", 0, start - len(word) - 1)
    return Definition(((named[3], macro), *_inside(body[0])), body[1], lasting)


def _let(text: str, start: int) -> Definition | None:
    found = LET.match(text, start)
    if found is None:
        return None
    if found[2][0] == "\\" and found[2][1:].isalpha():
        return Definition(
            ((found[1], Macro(found[2], final=True)),), found.end(), copies=found[2][1:]
        )
    return Definition(((found[1], Macro(found[2], final=True)),), found.end())


def _environment(text: str, start: int) -> Definition | None:
    named = WORD_NAME.match(text, start)
    if named is None:
        return None
    counted = _counted(text, named.end())
    first = _body(text, counted[2])
    second = _body(text, first[1]) if first else None
    if first is None or second is None:
        return None
    begin = _checked(Macro(first[0], counted[0], counted[1]))
    end = _checked(Macro(second[0]))
    name = named[2].strip()
    macros = ((f"begin{{{name}}}", begin), (f"end{{{name}}}", end))
    return Definition((*macros, *_inside(first[0] + second[0])), second[1])


def _document_command(word: str, name: str, text: str, start: int) -> Definition | None:
    specified = SPECIFICATION.match(text, start)
    body = _body(text, specified.end()) if specified else None
    if specified is None or body is None:
        return None
    plain = PLAIN_SPECIFICATION.fullmatch(specified[1].strip())
    macro = DELIMITED
    if plain and not plain[2]:
        count = plain[3].count("m") + (plain[1] is not None)
        macro = _checked(Macro(body[0], count, plain[1])) if count <= 9 else DELIMITED
    weak = word.startswith("Provide")
    return Definition(((name, macro), *_inside(body[0])), body[1], weak=weak)


def _counted(text: str, start: int) -> tuple[int, str | None, int]:
    """Return the number of arguments, the default of the first, and where both end."""
    found = COUNT.match(text, start)
    if found is None:
        return 0, None, start
    end = found.end()
    opened = re.compile(r"\s*\[").match(text, end)
    if opened and (stop := optional_end(text, opened.end() - 1)):
        return int(found[1]), text[opened.end() : stop - 1], stop
    return int(found[1]), None, end


def _body(text: str, start: int) -> tuple[str, int] | None:
    """Return the body of a definition, without its braces, and where it ends."""
    opened = re.compile(r"\s*(\{|\\[a-zA-Z@]+|[^\s{}\\%])").match(text, start)
    if opened is None:
        return None
    if opened[1] != "{":
        return opened[1], opened.end()
    end = group_end(text, opened.end() - 1)
    return None if end is None else (text[opened.end() : end - 1], end)


def _checked(macro: Macro) -> Macro:
    """Return a macro, or why it is refused if its body is not plain."""
    if TRICK.search(macro.body):
        return TRICKY
    if any(int(found[1]) > macro.arguments for found in PARAMETER.finditer(macro.body)):
        return DELIMITED
    return macro


def _inside(body: str) -> tuple[tuple[str, Macro], ...]:
    """Return the macros that a body defines when it is used, all of them refused."""
    return tuple((found[1], TRICKY) for found in DEFINED_INSIDE.finditer(body))
