"""The words by which people say what a line claims."""

from __future__ import annotations

import re
from difflib import get_close_matches

from closedform.checking.claim import KINDS
from closedform.checking.source.errors import UnknownKindError
from closedform.errors import Place

__all__ = ["kind_of"]

VARIANTS = {
    "system matrix": "matrix",
    "state matrix": "matrix",
    "A": "matrix",
    "char poly": "characteristic polynomial",
    "charpoly": "characteristic polynomial",
    "characteristic equation": "characteristic polynomial",
    "eigenvalue": "eigenvalues",
    "poles": "eigenvalues",
    "pole": "eigenvalues",
    "spectrum": "eigenvalues",
    "characteristic roots": "eigenvalues",
    "eigenvectors": "eigenvector",
    "mode shape": "eigenvector",
    "mode shapes": "eigenvector",
    "mode": "eigenvector",
    "generalised eigenvector": "generalized eigenvector",
    "principal vector": "generalized eigenvector",
    "modal matrix": "P",
    "transformation": "P",
    "inverse of P": "P inverse",
    "P inv": "P inverse",
    "inv P": "P inverse",
    "P^-1": "P inverse",
    "P^(-1)": "P inverse",
    "P⁻¹": "P inverse",
    "Jordan form": "J",
    "Jordan matrix": "J",
    "Jordan normal form": "J",
    "real canonical form": "real form",
    "exp(J)": "exp J",
    "exp(Jt)": "exp J",
    "exp(tJ)": "exp J",
    "exp Jt": "exp J",
    "e^(Jt)": "exp J",
    "e^Jt": "exp J",
    "exp(A)": "exp A",
    "exp(At)": "exp A",
    "exp(tA)": "exp A",
    "exp At": "exp A",
    "e^(At)": "exp A",
    "e^At": "exp A",
    "expm": "exp A",
    "matrix exponential": "exp A",
    "transition matrix": "exp A",
    "state transition matrix": "exp A",
    "fundamental matrix": "exp A",
    "response": "solution",
    "state": "solution",
    "outputs": "output",
    "number": "value",
    "particular": "particular solution",
    "forced response": "particular solution",
    "homogeneous": "homogeneous solution",
    "free response": "homogeneous solution",
    "steady": "steady state",
    "steady state response": "steady state",
    "laplace transform": "transform",
    "natural frequencies": "natural frequency",
    "undamped frequency": "natural frequency",
    "damping": "damping ratio",
    "half life": "half-life",
    "halflife": "half-life",
    "time constants": "time constant",
    "initial values": "initial value",
    "initial condition": "initial value",
    "initial conditions": "initial value",
    "resolvent matrix": "resolvent",
    "equation of motion": "equation",
    "equations": "equation",
    "det": "determinant",
    "tr": "trace",
    "identities": "identity",
    "name": "definition",
    "abbreviation": "definition",
}
"""What people say beside the words of `KINDS`, by which of these is meant."""


def _plain(text: str) -> str:
    """Return a word without what does not matter: case, blanks, hyphens, the kind of bracket."""
    text = re.sub(r"[{}]", lambda found: "(" if found[0] == "{" else ")", text.casefold())
    return re.sub(r"(?<=[a-z])-(?=[a-z])|[\s_*$]+", "", text.replace("−", "-"))


WORDS = {_plain(word): word for word in KINDS} | {
    _plain(variant): word for variant, word in VARIANTS.items()
}


def kind_of(text: str, place: Place) -> tuple[str, str]:
    """Return which of `KINDS` is meant, and of what if that is said: "solution of x1".

    Both are empty for a text that is blank.

    Raises:  UnknownKindError.
    """
    if not text.strip():
        return "", ""
    plain = _plain(text)
    if plain in WORDS:
        return WORDS[plain], ""
    head, of, tail = text.strip().partition(" of ")
    if of and _plain(head) in WORDS:
        return WORDS[_plain(head)], tail.strip()
    near = get_close_matches(plain[:80], WORDS, n=1)
    raise UnknownKindError(place, text.strip(), WORDS[near[0]] if near else None, KINDS)
