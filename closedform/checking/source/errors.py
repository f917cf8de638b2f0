"""What can be wrong with the file of a hand derivation before its lines are read."""

from __future__ import annotations

from closedform.errors import Place
from closedform.notation.errors import PlacedError, quoted

__all__ = [
    "ClaimFormulaError",
    "LineReferenceError",
    "ModelHandedInError",
    "NoFormulaError",
    "NoModelError",
    "NoSuchModelError",
    "OwnModelError",
    "RemarkError",
    "SourceEncodingError",
    "SourceError",
    "SourceFileError",
    "SourceKeyError",
    "SourceSyntaxError",
    "SourceValueError",
    "StatedTwiceError",
    "StrayRemarkError",
    "UnknownKindError",
]


class SourceError(PlacedError):
    """A derivation or a list of claims that cannot be used as it is written."""


class SourceFileError(SourceError):
    """A file that cannot be read; `reason` says why and what to do."""

    def __init__(self, place: Place, reason: str) -> None:
        super().__init__(place, reason)
        self.reason = reason

    def _paragraph(self) -> str:
        return self.reason


class SourceEncodingError(SourceError):
    """A file that is not UTF-8, or holds NUL characters; the place is that of the byte."""

    def __init__(self, place: Place, byte: int) -> None:
        super().__init__(place, byte)
        self.byte = byte

    def _paragraph(self) -> str:
        found = "belongs in no text" if self.byte == 0 else "is not UTF-8 text"
        return f"the byte 0x{self.byte:02x} {found}; save the file in UTF-8"


class SourceSyntaxError(SourceError):
    """A claim file that is not TOML; `reason` says what was met."""

    def __init__(self, place: Place, reason: str) -> None:
        super().__init__(place, reason)
        self.reason = reason

    def _paragraph(self) -> str:
        return (
            f"the file is not valid TOML: {self.reason}; text stands in quotation marks, and "
            "LaTeX best in single ones, as in latex = '\\lambda = -2'"
        )


class NoFormulaError(SourceError):
    """A file in which there is nothing to check; `wanted` is what is looked for."""

    def __init__(self, place: Place, wanted: str) -> None:
        super().__init__(place, wanted)
        self.wanted = wanted

    def _paragraph(self) -> str:
        return f"there is nothing to check: write {self.wanted}"


class NoModelError(SourceError):
    """A file that does not say against which model it is to be held."""

    def __init__(self, place: Place, example: str) -> None:
        super().__init__(place, example)
        self.example = example

    def _paragraph(self) -> str:
        return f"no model is named; write {self.example}, or name it with --model"


class NoSuchModelError(SourceError):
    """A model file that is named and is not there."""

    def __init__(self, place: Place, name: str, path: str) -> None:
        super().__init__(place, name, path)
        self.name, self.path = name, path

    def _paragraph(self) -> str:
        place = "" if self.path == self.name else f", which would be {quoted(self.path, 200)}"
        return (
            f"there is no model file {quoted(self.name)}{place}; its name counts from the folder "
            "of this file"
        )


class OwnModelError(SourceError):
    """A derivation that is named as its own model."""

    def _paragraph(self) -> str:
        return (
            "the file that is named as the model is this derivation itself; name the TOML file "
            "in which the equations stand"
        )


class ModelHandedInError(SourceError):
    """A model file in the place of a derivation; `key` is what it was known by."""

    def __init__(self, place: Place, key: str) -> None:
        super().__init__(place, key)
        self.key = key

    def _paragraph(self) -> str:
        return (
            f"this is a model file, since it has the key {quoted(self.key)}; hand in the "
            "derivation: a LaTeX file, or a TOML file with model = "
            '"..." and a [[claim]] for each line'
        )


class SourceKeyError(SourceError):
    """A key that is not known; `nearest` is the known key most like it."""

    def __init__(self, place: Place, key: str, nearest: str | None, known: tuple[str, ...]) -> None:
        super().__init__(place, key, nearest, known)
        self.key, self.nearest, self.known = key, nearest, known

    def _paragraph(self) -> str:
        listed = ", ".join(self.known)
        if self.nearest:
            return (
                f"there is no key {quoted(self.key)}; did you mean '{self.nearest}'? "
                f"Allowed here: {listed}"
            )
        return f"there is no key {quoted(self.key)}; allowed here: {listed}"


class SourceValueError(SourceError):
    """A value of the wrong kind."""

    def __init__(self, place: Place, found: str, needed: str) -> None:
        super().__init__(place, found, needed)
        self.found, self.needed = found, needed

    def _paragraph(self) -> str:
        return f"here stands {self.found}, and {self.needed} is needed"


class ClaimFormulaError(SourceError):
    """A claim without a formula, or with two."""

    def __init__(self, place: Place, count: int) -> None:
        super().__init__(place, count)
        self.count = count

    def _paragraph(self) -> str:
        found = "both latex and text" if self.count else "neither latex nor text"
        return f"the claim has {found}; give its formula once, as latex = '...' or text = \"...\""


class UnknownKindError(SourceError):
    """A word that says what a line claims, and is none that can be claimed."""

    def __init__(
        self, place: Place, word: str, nearest: str | None, known: tuple[str, ...]
    ) -> None:
        super().__init__(place, word, nearest, known)
        self.word, self.nearest, self.known = word, nearest, known

    def _paragraph(self) -> str:
        meant = f"; did you mean '{self.nearest}'?" if self.nearest else "."
        return f"a line cannot say {quoted(self.word)}{meant} It can say: {', '.join(self.known)}"


class RemarkError(SourceError):
    """A comment to this program that cannot be read: `found` is where it goes wrong."""

    def __init__(self, place: Place, found: str, advice: str) -> None:
        super().__init__(place, found, advice)
        self.found, self.advice = found, advice

    def _paragraph(self) -> str:
        return f"{quoted(self.found)} is not read: {self.advice}"


class StrayRemarkError(SourceError):
    """A comment about a formula where no formula follows."""

    def _paragraph(self) -> str:
        return (
            "no displayed formula follows this comment; write it in front of the display that it "
            "is about, or on its line"
        )


class StatedTwiceError(SourceError):
    """The same thing said twice, and differently."""

    def __init__(self, place: Place, key: str, first: str, second: str) -> None:
        super().__init__(place, key, first, second)
        self.key, self.first, self.second = key, first, second

    def _paragraph(self) -> str:
        return (
            f"'{self.key}' is {quoted(self.second)} here, and {quoted(self.first)} elsewhere; "
            "say it once"
        )


class LineReferenceError(SourceError):
    """A line that is referred to and is not there; `reason` says what is."""

    def __init__(self, place: Place, reason: str) -> None:
        super().__init__(place, reason)
        self.reason = reason

    def _paragraph(self) -> str:
        return self.reason
