r"""Commands that stand for longer LaTeX: derivatives written as \dv{x}{t}.

They are those of the packages physics (S. C. de la Barrera) and derivative (S. Jensen), as far
as they are used for derivatives and for vectors.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from closedform.notation.written.latex_lexer import Raw

__all__ = ["spelled_out"]

DERIVATIVES = frozenset({"dv", "odv", "pdv", "derivative"})
VECTORS = {"vb": "mathbf", "va": "vec", "vu": "hat"}


def spelled_out(raws: Sequence[Raw]) -> list[Raw]:
    r"""Return raw tokens with derivatives as fractions: \frac{d^n x}{d t^n}.

    What is made up has the place of the command.  A command without its arguments stays.
    """
    found: list[Raw] = []
    at = 0
    while at < len(raws):
        raw = raws[at]
        if raw.kind == "command" and raw.text in DERIVATIVES:
            made, after = _derivative(raws, at)
            found += made
            at = after
        elif raw.kind == "command" and raw.text in VECTORS:
            found.append(Raw("command", VECTORS[raw.text], raw.start, raw.end))
            at = _past_star(raws, at + 1)
        else:
            found.append(raw)
            at += 1
    return found


def _derivative(raws: Sequence[Raw], at: int) -> tuple[list[Raw], int]:
    raw = raws[at]
    after = _past_star(raws, at + 1)
    order, after = _option(raws, after)
    first, after = _group(raws, after)
    if first is None:
        return [raw], at + 1
    second, last = _group(raws, after)
    above, below = ((), first) if second is None else (first, second)

    def made(kind: str, text: str) -> Raw:
        return Raw(kind, text, raw.start, raw.end)

    def group(parts: Iterator[Raw] | Sequence[Raw]) -> list[Raw]:
        return [made("{", "{"), *parts, made("}", "}")]

    power = [made("^", "^"), *group(order)] if order else []
    d = made("command", "dd")
    fraction = made("command", "frac")
    upper = group([d, *power, *spelled_out(above)])
    return [fraction, *upper, *group([d, *spelled_out(below), *power])], last


def _past_star(raws: Sequence[Raw], at: int) -> int:
    return at + 1 if at < len(raws) and raws[at].text == "*" else at


def _option(raws: Sequence[Raw], at: int) -> tuple[Sequence[Raw], int]:
    """Return what stands in square brackets, nothing if there are none."""
    if at < len(raws) and raws[at].text == "[":
        for end in range(at + 1, min(at + 12, len(raws))):
            if raws[end].text == "]":
                return raws[at + 1 : end], end + 1
    return (), at


def _group(raws: Sequence[Raw], at: int) -> tuple[Sequence[Raw] | None, int]:
    """Return what stands in the braces that begin at an index, None if there are none."""
    if at >= len(raws) or raws[at].kind != "{":
        return None, at
    depth = 0
    for end in range(at, len(raws)):
        depth += {"{": 1, "}": -1}.get(raws[end].kind, 0)
        if depth == 0:
            return raws[at + 1 : end], end + 1
    return None, at
