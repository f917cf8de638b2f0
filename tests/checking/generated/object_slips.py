"""Slips in what is worked out: in a matrix, an eigenvalue, a function, whatever its form."""
# ruff: noqa: ARG001, ARG005

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from tests.checking.generated.surds import ONE, ZERO, Matrix, Surd, product, surd, times
from tests.checking.generated.waves import Wave, block_exponential, constant, wave

__all__ = ["SLIPS", "exponential_of"]

TWO = surd(2)


def _spot(matrix: Any, sheet: Any, fits: Callable[[Any], bool]) -> tuple[int, int] | None:
    spots = [(i, j) for i, row in enumerate(matrix) for j, x in enumerate(row) if fits(x)]
    return sheet.rng.choice(spots) if spots else None


def _at(matrix: Any, spot: tuple[int, int], new: Any) -> Any:
    return tuple(
        tuple(new if (i, j) == spot else x for j, x in enumerate(row))
        for i, row in enumerate(matrix)
    )


def entry_sign(matrix: Any, sheet: Any) -> Any:
    """One entry with the other sign."""
    spot = _spot(matrix, sheet, lambda x: not x.is_zero)
    return None if spot is None else _at(matrix, spot, -matrix[spot[0]][spot[1]])


def entry_off(matrix: Matrix, sheet: Any) -> Any:
    """One entry off by one."""
    spot = _spot(matrix, sheet, lambda x: True)
    assert spot is not None
    change = surd(sheet.rng.choice((1, -1)))
    return _at(matrix, spot, matrix[spot[0]][spot[1]] + change)


def transposed(matrix: Any, sheet: Any) -> Any:
    """Rows and columns exchanged."""
    return tuple(zip(*matrix, strict=True))


def columns_exchanged(matrix: Any, sheet: Any) -> Any:
    """Two columns exchanged."""
    if len(matrix) < 2:
        return None
    i, j = sheet.rng.sample(range(len(matrix)), 2)
    order = list(range(len(matrix)))
    order[i], order[j] = j, i
    return tuple(tuple(row[k] for k in order) for row in matrix)


def swapped(_: Matrix, sheet: Any) -> Matrix:
    """P itself for its inverse."""
    return sheet.p


def no_determinant(q: Matrix, sheet: Any) -> Matrix:
    """The adjugate for the inverse."""
    below = 1
    for row in q:
        for x in row:
            for part in (x.a, x.b, x.c, x.e):
                below = below * part.denominator // _gcd(below, part.denominator)
    return times(q, lambda x: x * surd(below))


def _gcd(a: int, b: int) -> int:
    return _gcd(b, a % b) if b else a


def coefficient_sign(c: list[Surd], sheet: Any) -> list[Surd] | None:
    """One coefficient of the polynomial with the other sign."""
    at = [k for k, x in enumerate(c[:-1]) if not x.is_zero]
    if not at:
        return None
    k = sheet.rng.choice(at)
    return [-x if i == k else x for i, x in enumerate(c)]


def coefficient_off(c: list[Surd], sheet: Any) -> list[Surd]:
    """One coefficient of the polynomial off by one."""
    k = sheet.rng.randrange(len(c) - 1)
    return [x + ONE if i == k else x for i, x in enumerate(c)]


def root_sign(rates: list[Surd], sheet: Any) -> list[Surd]:
    """The sign of an eigenvalue, or of the real part of a pair, wrong."""
    x = sheet.rng.choice(rates)
    if x.imag.is_zero:
        return [-r if r == x else r for r in rates]
    return [surd(-r.a, -r.b, r.c, r.e, r.d) if r in (x, x.conjugate) else r for r in rates]


def root_imaginary(rates: list[Surd], sheet: Any) -> list[Surd] | None:
    """The imaginary part of a pair twice what it ought to be."""
    if all(r.imag.is_zero for r in rates):
        return None
    return [surd(r.a, r.b, 2 * r.c, 2 * r.e, r.d) for r in rates]


def vector_sign(v: tuple, sheet: Any) -> tuple | None:
    """One entry of a vector with the other sign."""
    k = sheet.rng.randrange(len(v))
    return tuple(-x if i == k else x for i, x in enumerate(v))


def vector_off(v: tuple, sheet: Any) -> tuple:
    """One entry of a vector off by one."""
    k = sheet.rng.randrange(len(v))
    return tuple(x + ONE if i == k else x for i, x in enumerate(v))


def vector_turned(v: tuple, sheet: Any) -> tuple:
    """The entries of a vector in reverse order."""
    return tuple(reversed(v))


def missing_one(j: Matrix, sheet: Any) -> Matrix | None:
    """A J without the ones of a chain."""
    if sheet.real_form:
        return None
    return tuple(tuple(x if i == k else ZERO for k, x in enumerate(row)) for i, row in enumerate(j))


def diagonal_sign(j: Matrix, sheet: Any) -> Matrix:
    """An entry on the diagonal of J with the other sign."""
    k = sheet.rng.randrange(len(j))
    return _at(j, (k, k), -j[k][k])


# functions of time


def _somewhere(matrix: Any, sheet: Any, change: Callable[[Wave, Any], Wave | None]) -> Any:
    spots = [
        (i, j)
        for i, row in enumerate(matrix)
        for j, w in enumerate(row)
        if change(w, sheet) is not None
    ]
    if not spots:
        return None
    spot = sheet.rng.choice(spots)
    return _at(matrix, spot, change(matrix[spot[0]][spot[1]], sheet))


def _real_key(w: Wave, sheet: Any) -> Any:
    keys = sorted(w.terms, key=lambda key: (key[0], key[1].a, key[1].c, key[1].e))
    return sheet.rng.choice(keys) if keys else None


def _changed(w: Wave, key: Any, change: Callable[[Surd], Surd]) -> Wave:
    """Return a wave with a coefficient changed, and that of the conjugate term alike."""
    k, x = key
    terms = dict(w.terms)
    terms[key] = change(terms[key])
    other = (k, x.conjugate)
    if other != key and other in terms:
        terms[other] = terms[key].conjugate
    return wave(terms)


def term_sign(w: Wave, sheet: Any) -> Wave | None:
    """A term with the other sign."""
    key = _real_key(w, sheet)
    return None if key is None else _changed(w, key, lambda c: -c)


def term_dropped(w: Wave, sheet: Any) -> Wave | None:
    """A term dropped."""
    if len(w.real_terms()) < 2:
        return None
    return _changed(w, _real_key(w, sheet), lambda c: ZERO)


def term_doubled(w: Wave, sheet: Any) -> Wave | None:
    """A coefficient twice what it ought to be."""
    key = _real_key(w, sheet)
    return None if key is None else _changed(w, key, lambda c: c * TWO)


def sine_sign(w: Wave, sheet: Any) -> Wave | None:
    """The sine with the other sign."""
    keys = [k for k, c in w.terms.items() if not k[1].imag.is_zero and not c.imag.is_zero]
    if not keys or any((k[0], k[1].conjugate) not in w.terms for k in keys):
        return None
    return wave({k: (c.conjugate if not k[1].imag.is_zero else c) for k, c in w.terms.items()})


def missing_t(w: Wave, sheet: Any) -> Wave | None:
    """A factor t forgotten."""
    if all(k == 0 for k, _ in w.terms):
        return None
    found = Wave()
    for (k, x), c in w.terms.items():
        found = found + wave({(max(k - 1, 0), x): c})
    return found


def missing_half(w: Wave, sheet: Any) -> Wave | None:
    """The 1/2 of t^2/2 forgotten."""
    if all(k != 2 for k, _ in w.terms):
        return None
    return wave({(k, x): c * TWO if k == 2 else c for (k, x), c in w.terms.items()})


def rate_sign(w: Wave, sheet: Any) -> Wave | None:
    """The sign of an exponent wrong."""
    rates = [x.real for _, x in w.terms if not x.real.is_zero]
    if not rates:
        return None
    rate = sheet.rng.choice(rates)
    found = Wave()
    for (k, x), c in w.terms.items():
        new = surd(-x.a, -x.b, x.c, x.e, x.d) if x.real == rate else x
        found = found + wave({(k, new): c})
    return found


def everywhere(change: Callable[[Wave, Any], Wave | None]) -> Callable:
    """Return the slip of a function made somewhere in a matrix."""
    return lambda matrix, sheet: _somewhere(matrix, sheet, change)


def wrong_way_round(_: Any, sheet: Any) -> Any:
    """P^(-1) e^(Jt) P for P e^(Jt) P^(-1)."""
    left = times(sheet.q, constant)
    return product(product(left, sheet.exp_j, Wave()), times(sheet.p, constant), Wave())


def no_product_rule(w: Wave, sheet: Any) -> Wave | None:
    """Only the exponential differentiated where t stands before it."""
    if all(k == 0 for k, _ in w.terms):
        return None
    terms = {(k, x): c * x for (k, x), c in sheet.slip_origin.terms.items()}
    return wave(terms)


def no_inner(w: Wave, sheet: Any) -> Wave:
    """The inner derivative forgotten."""
    return sheet.slip_origin


def exponential_of(j: Matrix) -> tuple | None:
    """Return e^(Jt) for Jordan blocks, ones above or below the diagonal; None for other blocks."""
    size, at = len(j), 0
    rows = [[Wave()] * size for _ in range(size)]
    while at < size:
        end, lower = at + 1, False
        while end < size and not (j[end - 1][end].is_zero and j[end][end - 1].is_zero):
            lower = not j[end][end - 1].is_zero
            end += 1
        if any(j[k][k] != j[at][at] for k in range(at, end)):
            return None
        block = block_exponential(j[at][at], end - at, lower=lower)
        for i, row in enumerate(block):
            for k, entry in enumerate(row):
                rows[at + i][at + k] = entry
        at = end
    return tuple(map(tuple, rows))


FUNCTION = (
    ("sign of a term", term_sign),
    ("dropped term", term_dropped),
    ("wrong coefficient", term_doubled),
    ("sign of the sine", sine_sign),
    ("missing t", missing_t),
    ("missing half", missing_half),
    ("sign in the exponent", rate_sign),
)
MATRIX = (("sign of an entry", entry_sign), ("wrong entry", entry_off), ("transposed", transposed))
SLIPS: Mapping[str, tuple[tuple[str, Callable[..., Any]], ...]] = {
    "matrix": MATRIX,
    "polynomial": (
        ("sign of a coefficient", coefficient_sign),
        ("wrong coefficient", coefficient_off),
    ),
    "eigenvalues": (
        ("sign of an eigenvalue", root_sign),
        ("imaginary part doubled", root_imaginary),
    ),
    "vector": (
        ("sign of an entry", vector_sign),
        ("wrong entry", vector_off),
        ("entries exchanged", vector_turned),
    ),
    "P": (*MATRIX, ("columns exchanged", columns_exchanged)),
    "P inverse": (*MATRIX, ("P for its inverse", swapped), ("missing determinant", no_determinant)),
    "J": (("missing one", missing_one), ("sign of an eigenvalue", diagonal_sign)),
    "exp J": tuple((what, everywhere(change)) for what, change in FUNCTION),
    "exp A": (
        *((what, everywhere(change)) for what, change in FUNCTION),
        ("P and inverse exchanged", wrong_way_round),
        ("transposed", transposed),
    ),
    "solution": FUNCTION,
    "particular": FUNCTION,
    "derivative": (
        *FUNCTION,
        ("product rule forgotten", no_product_rule),
        ("inner derivative forgotten", no_inner),
    ),
}
"""By stage: the names of slips, with what makes them of a right value; None where they cannot."""
