"""Greek letters and their names, for typed formulas."""

from __future__ import annotations

__all__ = ["LETTERS", "ascii_name"]

_LOWER = (
    *("alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta", "theta", "iota", "kappa"),
    *("lambda", "mu", "nu", "xi", "omicron", "pi", "rho", "sigma_", "sigma", "tau", "upsilon"),
    *("phi", "chi", "psi", "omega"),
)

LETTERS: dict[str, str] = {chr(0x3B1 + k): name.rstrip("_") for k, name in enumerate(_LOWER)}
LETTERS |= {
    chr(0x391 + k): name.capitalize() for k, name in enumerate(_LOWER) if not name.endswith("_")
}
LETTERS |= {"µ": "mu", "ϑ": "theta", "ϕ": "phi", "ϵ": "epsilon"}
"""Letter to ASCII name; final sigma and the sign for micro count as the letters they look like."""


def ascii_name(text: str) -> str:
    """Return a name in its ASCII spelling: a Greek first letter is written out.

    >>> ascii_name("ω_d"), ascii_name("x1")
    ('omega_d', 'x1')
    """
    return LETTERS.get(text[:1], text[:1]) + text[1:]
