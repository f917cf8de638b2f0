"""What can be wrong with a LaTeX document before its formulas are read."""

from __future__ import annotations

from closedform.errors import Place
from closedform.notation.errors import PlacedError, quoted

__all__ = ["DocumentError", "DocumentSizeError", "IncludedFileError", "UnendedError"]


class DocumentError(PlacedError):
    """A LaTeX document whose formulas cannot be told apart from the rest."""


class UnendedError(DocumentError):
    """Something that begins and does not end: `what` is its beginning, `end` what is missing."""

    def __init__(self, place: Place, what: str, end: str) -> None:
        super().__init__(place, what, end)
        self.what, self.end = what, end

    def _paragraph(self) -> str:
        return f"{quoted(self.what)} begins here and does not end; write {quoted(self.end)}"


class IncludedFileError(DocumentError):
    r"""A file that is named by \input or the like and is not read, and why."""

    def __init__(self, place: Place, name: str, reason: str) -> None:
        super().__init__(place, name, reason)
        self.name, self.reason = name, reason

    def _paragraph(self) -> str:
        return f"the file {quoted(self.name)} is not read: {self.reason}"


class DocumentSizeError(DocumentError):
    """More of something than is read; `found` says of what, `limit` how much may be."""

    def __init__(self, place: Place, found: str, limit: str) -> None:
        super().__init__(place, found, limit)
        self.found, self.limit = found, limit

    def _paragraph(self) -> str:
        return f"{self.found}, and at most {self.limit}; hand in the part that holds the derivation"
