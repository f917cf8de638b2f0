"""From typed text to classed signs: numbers, words, operators, with their places."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction

from closedform.notation.reader import LARGEST_EXPONENT, MOST_DIGITS
from closedform.notation.written.tree import EULER, Declared, Jet, Literal
from closedform.notation.written.typed_numbers import (
    MILLE,
    MINUS,
    NUMBER,
    TEN,
    THOUSANDS,
    is_bounded,
    listing_commas,
    literal,
)
from closedform.notation.written.typed_signs import (
    COMMENT,
    FRACTIONS,
    INDICES,
    LABEL,
    OPERATORS,
    PRIMES,
    RELATIONS,
    ROOTS,
    SUPERSCRIPTS,
    is_letter,
    is_part_of_word,
    spelled_out,
    why_stray,
)
from closedform.notation.written.typed_words import FUNCTION_WORDS, KEYWORDS, PACKAGES, Piece, Words

__all__ = ["Lexeme", "Scanner", "StrayError"]

POWER_OF_D = r"(?:(?:\^|\*\*)?\s*\(?\s*([1-9])\s*\)?|([²³⁴]))?"
SIGNS = sorted({*OPERATORS, *RELATIONS}, key=lambda sign: (-len(sign), sign))
SIGN = re.compile("|".join(map(re.escape, SIGNS)))


@dataclass(frozen=True, slots=True)
class Lexeme:
    """A sign or word: its kind, mostly that of a token, its value, its place.

    `spaced` says that there is white space before it, `word` that it is part of a word of
    several pieces: the number of the word's first piece, -1 for none.
    """

    kind: str
    value: object
    start: int
    end: int
    spaced: bool = False
    word: int = -1


class StrayError(Exception):
    """A place that begins nothing: `at`, what is `found` there, and what to write instead."""

    def __init__(self, at: int, found: str, why: str) -> None:
        super().__init__(at, found, why)
        self.at, self.found, self.why = at, found, why


class Scanner:
    """Reads the signs of one text, given the names that are declared."""

    def __init__(self, text: str, declared: Declared) -> None:
        self.text, self.words, self.declared = text, Words(declared), declared
        time = re.escape(declared.time)
        self.rate = re.compile(
            rf"d\s*{POWER_OF_D}\s*(?P<name>[^\W\d]\w*)?\s*(?P<of>\({time}\))?\s*/\s*d\s*{time}"
            rf"\s*{POWER_OF_D}(?![\w^])"
        )
        self.listing = set(listing_commas(text))
        self.commas: list[tuple[int, int]] = []
        """Places of numbers with a decimal comma that might be two numbers."""
        self.pointed = re.search(r"[0-9]\.[0-9]", text) is not None

    def lexemes(self) -> list[Lexeme]:
        """Return the signs of the text in order.

        Raises:  StrayError at a sign that means nothing here.
        """
        found: list[Lexeme] = []
        at, spaced = 0, False
        while at < len(self.text):
            sign = self.text[at]
            if sign == "\n" or (sign.isspace() or sign in "\u200b\ufeff"):
                if sign == "\n":
                    found.append(Lexeme("NEWLINE", "\n", at, at + 1, spaced))
                at, spaced = at + 1, True
                continue
            if COMMENT.match(self.text, at):
                at = (self.text.find("\n", at) + 1 or len(self.text) + 1) - 1
                continue
            new = list(self._at(at, found))
            if not new:
                raise StrayError(at, sign, why_stray(sign))
            found.append(Lexeme(new[0].kind, new[0].value, at, new[0].end, spaced, new[0].word))
            found += new[1:]
            at, spaced = new[-1].end, False
        return found

    def _at(self, at: int, before: list[Lexeme]) -> Iterator[Lexeme]:
        """Yield the lexemes that begin at a place, nothing if none does."""
        sign, text = self.text[at], self.text
        if (sign.isdecimal() and sign.isascii()) or (
            sign == "." and text[at + 1 : at + 2].isdigit()
        ):
            yield self._number(at)
        elif is_letter(sign):
            yield from self._word(at, before)
        elif sign in PRIMES and before:
            end = at
            while end < len(text) and text[end] in PRIMES:
                end += 1
            yield Lexeme("PRIMES", sum(PRIMES[c] for c in text[at:end]), at, end)
        elif sign in SUPERSCRIPTS:
            yield from self._raised(at)
        elif sign in FRACTIONS:
            yield from _fraction(FRACTIONS[sign], at)
        elif sign in ROOTS:
            yield Lexeme("RADICAL", ROOTS[sign], at, at + 1)
        elif arrow := re.compile(r"=>|==>|⇒|⟹|⇔|<=>|∴").match(text, at):
            yield Lexeme("SEMICOLON", arrow[0], at, arrow.end())
        elif found := SIGN.match(text, at):
            kind = OPERATORS.get(found[0], "REL")
            yield Lexeme(kind, RELATIONS.get(found[0], found[0]), at, found.end())
        elif sign in "([{)]}":
            yield Lexeme("OPEN" if sign in "([{" else "CLOSE", sign, at, at + 1)
        else:
            yield from self._other(sign, at)

    def _other(self, sign: str, at: int) -> Iterator[Lexeme]:
        if sign == "∈" and self.text[at + 1 :].lstrip()[:1] == "{":
            yield Lexeme("REL", "=", at, at + 1)
            return
        if sign == "|" and self.text[at : at + 2] == "||":
            yield Lexeme("DOUBLE_BAR", "||", at, at + 2)
            return
        kinds = {"|": "BAR", ",": "COMMA", ";": "SEMICOLON", "!": "POSTFIX", "°": "POSTFIX"}
        kinds |= {"‖": "DOUBLE_BAR", "∞": "ATOM", ":": "COLON", ".": "STOP", "%": "POSTFIX"}
        kinds |= {"_": "LOW", "ᵀ": "POSTFIX"}
        values = {"!": "factorial", "°": "degree", "%": "percent", "∞": self._infinity()}
        if sign in kinds:
            yield Lexeme(kinds[sign], values.get(sign, sign), at, at + 1)

    def _infinity(self) -> object:
        piece = self.words.read("oo", 0, bracket=False, raised=False)
        return piece[0].node if piece else None

    def _number(self, at: int) -> Lexeme:
        """Return a number, with a decimal comma and with a power of ten if that is written."""
        text = self.text
        grouped = THOUSANDS.match(text, at)
        if grouped and not self._in_matrix(at) and is_bounded(grouped[0]):
            digits = re.sub(r"\D", "", grouped[0])
            return Lexeme("NUMBER", literal(digits, 0, at, grouped.end()), at, grouped.end())
        if (sure := MILLE.match(text, at)) and not self._in_matrix(at) and is_bounded(sure[0]):
            return Lexeme(
                "NUMBER", literal(sure[0].replace(",", ""), 0, at, sure.end()), at, sure.end()
            )
        found = NUMBER.match(text, at)
        if found is None:
            raise StrayError(at, text[at], "a number has digits and one decimal point")
        written, end = found[0], found.end()
        comma = re.compile(r",([0-9]+)(?![0-9]*,[0-9])").match(text, end)
        if comma and "." not in written and end not in self.listing and not self.pointed:
            if written != "0":
                self.commas.append((at, comma.end()))
            written, end = f"{written}.{comma[1]}", comma.end()
        if "e" in written.lower() and self._is_name(re.split("[eE]", written)[1], written):
            written = re.split("[eE]", written)[0]
            end = at + len(written)
        if not is_bounded(written):
            why = f"numbers have up to {MOST_DIGITS} digits and exponents to {LARGEST_EXPONENT}"
            raise StrayError(at, written, why)
        power = 0
        if (ten := TEN.match(text, end)) and "e" not in written.lower():
            raised = ten["n"] or "".join(SUPERSCRIPTS[c] for c in ten["s"])
            power, end = int(re.sub(MINUS, "-", raised)), ten.end()
            return Lexeme("NUMBER", literal(written, power, at, end, scaled=True), at, end)
        return Lexeme("NUMBER", literal(written, 0, at, end), at, end)

    def _is_name(self, exponent: str, written: str) -> bool:
        letter = "e" if "e" in written else "E"
        return self.words.name(letter + exponent) is not None

    def _in_matrix(self, at: int) -> bool:
        return self.text.count("[", 0, at) > self.text.count("]", 0, at)

    def _raised(self, at: int) -> Iterator[Lexeme]:
        """Yield an exponent of raised signs, in a group."""
        end = at
        while end < len(self.text) and self.text[end] in SUPERSCRIPTS:
            end += 1
        run = "".join(SUPERSCRIPTS[sign] for sign in self.text[at:end])
        if run == "T":
            yield Lexeme("POSTFIX", "transpose", at, end)
            return
        yield Lexeme("POWER", "^", at, at)
        yield Lexeme("GROUP_OPEN", "{", at, at)
        for piece in Scanner(run, self.declared).lexemes():
            yield Lexeme(piece.kind, piece.value, at, at, word=piece.word)
        yield Lexeme("GROUP_CLOSE", "}", end, end)

    def _word(self, at: int, before: list[Lexeme]) -> Iterator[Lexeme]:
        rate = self.rate.match(self.text, at)
        if rate and (new := self._rate(rate, at)):
            yield new
            return
        end = at
        while end < len(self.text) and is_part_of_word(self.text[end]):
            end += 1
        word = self.text[at:end]
        if re.fullmatch("[ij][0-9]+", word) and self.words.name(word) is None:
            word, end = word[0], at + 1
        if word.endswith("_") and (label := LABEL.match(self.text, end)):
            word += re.sub(r"[, ]+", "_", label["inside"])
            end = label.end()
        elif indices := INDICES.match(self.text, end):
            digits = re.findall("[0-9₀-₉]", indices[0])
            word = "_".join([re.sub(r"(?<=[^\W\d_])(?=[0-9])", "_", word, count=1), *digits])
            end = indices.end()
        if self.text[end : end + 1] == "∞" and word.strip("_"):
            word, end = word.rstrip("_") + "_inf", end + 1
        if word == "in" and re.match(r"\s*\{", self.text[end:]):
            yield Lexeme("REL", "=", at, end)
            return
        if word.lower() in PACKAGES and re.match(r"\.[A-Za-z]", self.text[end:]):
            yield from self._word(end + 1, before)
            return
        keyword = KEYWORDS.get(word.lower())
        if word in ("et", "or", "ou") and not (
            self.text[at - 1 : at].isspace() and self.text[end : end + 1].isspace()
        ):
            keyword = None
        if keyword and self.words.name(word) is None and not (before and before[-1].kind == "LOW"):
            yield Lexeme(keyword, word, at, end)
            return
        yield from self._pieces(word, at, end)

    def _pieces(self, word: str, at: int, end: int) -> Iterator[Lexeme]:
        after = self.text[end : end + 1]
        bracket = after in ("(", "[") or (after == "{" and word in FUNCTION_WORDS)
        raised = (
            re.match(r"\s*(?:\^|\*\*|[⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺ᵗˢⁿ⁽])", self.text[end : end + 9]) is not None
        )
        trace = word in ("tr", "Tr") and re.match(r"\s+[A-Z]", self.text[end:]) is not None
        bracket = bracket or trace
        pieces = self.words.read(word, at, bracket=bracket, raised=raised)
        if pieces is None and re.fullmatch("(?:int|integral|sum|prod)(?:_.*)?", word):
            raise StrayError(at, word, why_stray("∫"))
        if pieces is None:
            new = self.words.undeclared(word, at)
            yield Lexeme("ATOM" if spelled_out(word)[0].isascii() else "TEXT", new.node, at, end)
            return
        for place, piece in enumerate(pieces):
            last = place == len(pieces) - 1
            kind = _kind(piece, raised=last and raised)
            group = at if len(pieces) > 1 else -1
            stop = end if last else piece.end
            yield Lexeme(kind, piece.function or piece.node, piece.start, stop, word=group)

    def _rate(self, rate: re.Match[str], at: int) -> Lexeme | None:
        """Return a derivative that is written as a quotient of differentials, or None."""
        above, below = rate[1] or rate[2], rate[5] or rate[6]
        order = int(SUPERSCRIPTS.get(above or "1", above or "1"))
        if order != int(SUPERSCRIPTS.get(below or "1", below or "1")):
            return None
        end = at + len(rate[0].rstrip())
        if not rate["name"]:
            value = (self.declared.time, order, self.declared.time)
            return Lexeme("DERIVATIVE", value, at, end)
        text = spelled_out(rate["name"])[0]
        name = self.words.name(text)
        whole = self.words.name("d" + text) is not None and above is None
        if whole or (name is not None and name not in self.declared.varying):
            return None
        return Lexeme("ATOM", Jet(name or text, order), at, end)


def _kind(piece: Piece, *, raised: bool) -> str:
    if piece.function or isinstance(piece.node, Literal):
        return "FUNCTION" if piece.function else "NUMBER"
    return "EULER" if piece.node == EULER and raised else "ATOM"


def _fraction(value: Fraction, at: int) -> Iterator[Lexeme]:
    yield Lexeme("GROUP_OPEN", "{", at, at)
    yield Lexeme("NUMBER", Literal(Fraction(value.numerator)), at, at)
    yield Lexeme("OVER", "/", at, at)
    yield Lexeme("NUMBER", Literal(Fraction(value.denominator)), at, at)
    yield Lexeme("GROUP_CLOSE", "}", at + 1, at + 1)
