"""What can be wrong with a model file before its content is looked at."""

from __future__ import annotations

from closedform.errors import InputError, Place
from closedform.notation.errors import PlacedError

__all__ = [
    "FileEmptyError",
    "FileEncodingError",
    "FileIsDirectoryError",
    "FileMissingError",
    "FileSyntaxError",
    "FileTooLargeError",
    "FileUnreadableError",
    "ModelFileError",
]


USUAL_LINES = 'a model file is made of lines such as title = "..." and matrix = [[0, 1], [-2, -3]]'


class ModelFileError(InputError):
    """A model file that cannot be read; `path` is as it was given."""

    def __init__(self, path: str, *facts: object) -> None:
        super().__init__(path, *facts)
        self.path = path


class FileMissingError(ModelFileError):
    """There is no such file."""

    def __str__(self) -> str:
        return f"{self.path}: there is no such file; check the name and the folder."


class FileIsDirectoryError(ModelFileError):
    """The path is that of a directory."""

    def __str__(self) -> str:
        return f"{self.path}: this is a directory; name the model file inside it."


class FileUnreadableError(ModelFileError):
    """The system does not let the file be read; `reason` is what it says."""

    def __init__(self, path: str, reason: str) -> None:
        super().__init__(path, reason)
        self.reason = reason

    def __str__(self) -> str:
        return f"{self.path}: the file cannot be read ({self.reason}); check its permissions."


class FileTooLargeError(ModelFileError):
    """The file is larger than any model; `size` is None where the system does not know it."""

    def __init__(self, path: str, size: int | None, limit: int) -> None:
        super().__init__(path, size, limit)
        self.size, self.limit = size, limit

    def __str__(self) -> str:
        size = f"{self.size} bytes" if self.size is not None else "more than that"
        return (
            f"{self.path}: a model file has at most {self.limit} bytes, and this one has "
            f"{size}; is it the right file?"
        )


class FileEmptyError(ModelFileError):
    """The file holds nothing, or blanks and comments only."""

    def __str__(self) -> str:
        return (
            f"{self.path}: the file is empty; a model has at least title, states, matrix and "
            "initial."
        )


class FileEncodingError(ModelFileError):
    """The file is not UTF-8; `position` counts bytes from 0."""

    def __init__(self, path: str, position: int, byte: int) -> None:
        super().__init__(path, position, byte)
        self.position, self.byte = position, byte

    def __str__(self) -> str:
        return (
            f"{self.path}: byte {self.position} (0x{self.byte:02x}) is not UTF-8 text; save the "
            "file in UTF-8."
        )


class FileSyntaxError(PlacedError):
    """The file is not TOML; `reason` says what was met, `advice` what is usually meant."""

    def __init__(self, place: Place, reason: str, advice: str = USUAL_LINES) -> None:
        super().__init__(place, reason, advice)
        self.reason, self.advice = reason, advice

    def _paragraph(self) -> str:
        return f"the file is not valid TOML: {self.reason}; {self.advice}"
