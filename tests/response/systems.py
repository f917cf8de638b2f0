"""One system for each kind of spectrum, with outputs: what the engine is tested on."""

from __future__ import annotations

from functools import cache

import closedform
from closedform.response.response import Response

KINDS: dict[str, list[list[object]]] = {
    "one state": [[-2]],
    "single": [[-3, 1], [1, -3]],
    "circular": [[0, 1], [-5, -2]],
    "hyperbolic": [[0, 1], [1, 1]],
    "defective": [[0, 1, 0], [0, 0, 1], [-1, -3, -3]],
    "defective circular pair": [[0, 1, 1, 0], [-1, 0, 0, 1], [0, 0, 0, 1], [0, 0, -1, 0]],
    "defective hyperbolic pair": [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], [-4, 0, 4, 0]],
    "even quartic": [[0, 0, 1, 0], [0, 0, 0, 1], [-3, 1, 0, 0], [1, -1, 0, 0]],
    "named cubic": [[0, 1, 0], [0, 0, 1], [1, 1, 0]],
    "named quartic": [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], [1, 1, 0, 0]],
    "surd entries": [["0", "sqrt(2)"], ["sqrt(3)", "-1"]],
    "nilpotent": [[0, 1, 2], [0, 0, 3], [0, 0, 0]],
    "mixed": [[-1, 1, 0, 0], [0, -1, 0, 0], [0, 1, 0, 1], [1, 0, -4, 0]],
}


@cache
def response_to(kind: str) -> Response:
    """Return the response of the system of this kind, from x0 = (1, 2, …)."""
    matrix = KINDS[kind]
    n = len(matrix)
    return closedform.respond(
        closedform.system(
            matrix,
            initial=list(range(1, n + 1)),
            outputs={"first": "x1", "all": " + ".join(f"{k}*x{k}" for k in range(1, n + 1))},
            title=kind,
            name=kind.replace(" ", "_"),
        )
    )


def fresh(kind: str) -> Response:
    """Return a response whose formulas may be tampered with: nobody else holds it."""
    response = response_to(kind)
    return Response(
        response.model,
        response.field,
        response.matrix,
        response.initial,
        response.spectrum,
        response.jordan,
        response.exponential,
        response.state,
        response.output,
    )
