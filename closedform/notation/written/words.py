"""Words beside formulas: between two of them, before a condition, or a note."""

from __future__ import annotations

__all__ = ["word_of"]

_WORDS = {
    **dict.fromkeys(
        [
            "and",
            "und",
            "or",
            "oder",
            "et",
            "sowie",
            "&",
            "as_well_as",
            "where",
            "wobei",
            "with",
            "mit",
            "hence",
            "thus",
            "so",
            "also",
            "daher",
            "therefore",
            "then",
            "dann",
            "folglich",
            "resp.",
            "bzw.",
            "with_eigenvalues",
            "ou",
            "donc",
            "avec",
        ],
        "and",
    ),
    **dict.fromkeys(
        [
            "for",
            "für",
            "fuer",
            "if",
            "falls",
            "wenn",
            "when",
            "as",
            "at",
            "bei",
            "für_alle",
            "for_all",
            "whenever",
            "while",
            "provided",
            "valid_for",
            "provided_that",
            "in_the_case",
            "in_case",
            "und_für",
            "and_for",
            "da",
            "since",
            "pour",
            "si",
            "lorsque",
            "quand",
        ],
        "for",
    ),
    **dict.fromkeys(
        [
            "otherwise",
            "else",
            "sonst",
            "elsewhere",
            "anderenfalls",
            "ansonsten",
            "or_else",
            "sinon",
        ],
        "otherwise",
    ),
}


def word_of(text: str) -> str:
    """Return what a text between formulas says: and, for, otherwise, or nothing known."""
    return _WORDS.get("_".join(text.lower().strip(" ~,.;:").split()), "")
