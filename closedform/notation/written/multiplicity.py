"""How often a value counts, told from the words beside it, in English, German and French."""

from __future__ import annotations

import re

__all__ = ["MULTIPLES", "asks_for_number", "is_multiplicity", "multiplicity_of"]

MULTIPLES = {
    **dict.fromkeys(("double", "twice", "doppelt", "doppel", "zweifach", "twofold", "repeated"), 2),
    **dict.fromkeys(("zweimal", "zweimalig", "zweimalige"), 2),
    **dict.fromkeys(("triple", "thrice", "dreifach", "threefold", "dreimal", "treble"), 3),
    **dict.fromkeys(("dreimalige",), 3),
    **dict.fromkeys(("quadruple", "vierfach", "fourfold"), 4),
    **dict.fromkeys(("quintuple", "fünffach", "fuenffach", "fivefold"), 5),
}
"""Words that tell how often something counts, wherever they stand."""
NUMERALS = {
    **MULTIPLES,
    **dict.fromkeys(("one", "simple", "single", "once", "einfach", "ein", "eins"), 1),
    **dict.fromkeys(("two", "zwei", "deux"), 2),
    **dict.fromkeys(("three", "drei", "trois"), 3),
    **dict.fromkeys(("four", "vier", "quatre"), 4),
    **dict.fromkeys(("five", "cinq"), 5),
}
"""These, and words that do so only where a multiplicity is told: "two real roots" tells none."""
COUNT = re.compile(
    r"(?:multiplicit\w*|mult\.?|vielfachheit|vielf\.?|ordnung|order|ordre)\D{0,12}?(?P<a>[1-9][0-9]?)"
    r"|(?P<b>[1-9][0-9]?)\s*[-‐]?\s*(?:fold|fach\w*|times|time|mal|fois|[x×]|\\times)(?!\w)"
    r"|(?<!\w)(?:[x×]|\\times)\s*(?P<c>[1-9][0-9]?)"
    r"|(?:^|[^\w])m\s*=\s*(?P<d>[1-9][0-9]?)",
    re.IGNORECASE,
)
ASKS = re.compile(
    r"(?:multiplicit(?:y|é)|mult\.|vielfachheit|ordnung|order|ordre)(?:\s*(?:of|de|von))?\s*$",
    re.IGNORECASE,
)


def multiplicity_of(note: str) -> int:
    """Return the multiplicity that a note tells, 0 if it tells none.

    >>> multiplicity_of("(multiplicity 3)"), multiplicity_of("zweifach"), multiplicity_of("2x")
    (3, 2, 2)
    """
    if found := COUNT.search(note):
        return int(next(filter(None, found.groups())))
    words = re.findall(r"[^\W\d_]+", note.lower())
    known = [
        NUMERALS[w]
        for word in words
        for w in (word, re.sub(r"e[rnsm]?$", "", word))
        if w in NUMERALS
    ]
    return known[0] if known else 0


def is_multiplicity(text: str) -> bool:
    """Say whether a text tells a multiplicity and no more than that: double, 3-fold, twofold root.

    >>> is_multiplicity("double root"), is_multiplicity("x = 2")
    (True, False)
    """
    if not multiplicity_of(text) or re.search(r"[=;+^]", text.replace("m=", "").replace("m =", "")):
        return False
    words = re.findall(r"[^\W\d_]+", text.lower())
    beside = {"root", "roots", "eigenvalue", "pole", "algebraic", "multiplicity", "with", "mit"}
    beside |= {"of", "order", "wurzel", "eigenwert", "vielfachheit", "x", "fold", "fach", "times"}
    beside |= {"nullstelle", "avec", "multiplicité", "racine", "mult", "m", "a", "repeated", "mal"}
    beside |= {
        "valeur",
        "propre",
        "geometric",
        "defective",
        "alg",
        "vielf",
        "der",
        "ordnung",
        "each",
        "time",
    }
    stems = {re.sub(r"e[rnsm]?$", "", word) for word in NUMERALS}
    return all(
        w in beside | NUMERALS.keys() or re.sub(r"e[rnsm]?$", "", w) in NUMERALS.keys() | stems
        for w in words
    )


def asks_for_number(note: str) -> bool:
    """Say whether a note ends in a word behind which the multiplicity stands as a number."""
    return ASKS.search(note.strip(" (")) is not None
