"""Lines in which two things are wrong, so that no one change mends them."""

from __future__ import annotations

from tests.checking.slips.making import Line

TWO_WRONG: tuple[tuple[str, tuple[Line, ...]], ...] = (
    ("tanks", ("h_1(t) = 3*exp(-t) - 5*exp(-4*t)",)),
    ("tanks", ("h_1(t) = 2*exp(-3*t) + exp(-4*t)",)),
    ("pendulum", ("x(t) = exp(-2*t)*(4*cos(4*t) - sin(4*t))",)),
    ("pendulum", ("x(t) ≈ 4.213*exp(-t)*cos(4*t + 0.245)",)),
    ("thrown", ("x(t) = exp(-3*t)*(2*cos(4*t) + sin(4*t))",)),
    ("critical", ("x(t) = (2 + 5*t)*exp(-2*t)",)),
    ("shaken", ("x(t) = cos(2*t) + 3*sin(2*t)",)),
    ("loaded", ("x(t) = 3 - 2*exp(-t) + 2*exp(-2*t)",)),
    ("tanks", (("matrix", "A = [[-3, 2], [5, -2]]"),)),
    ("tanks", (("characteristic polynomial", "lambda^2 + 6*lambda + 8"),)),
    ("tanks", (("eigenvalues", "lambda_1 = -2, lambda_2 = -5"),)),
    ("loops", (("P", "P = [[1, 2], [-1, 3]]"), ("P inverse", "1/5*[[3, 2], [1, 2]]"))),
    ("latch", (("J", "J = [[-3, 0, 0], [0, -3, 0], [0, 0, -2]]"),)),
    (
        "latch",
        (("exp A", "[[exp(-3*t), exp(-3*t), 0], [0, exp(-3*t), 0], [0, 0, exp(-2*t)]]"),),
    ),
    ("repair", (("steady state", "(1/4)*(2, 1, 1)", "vector"),)),
    ("mount", ("zeta = c/(3*sqrt(k + m))",)),
    ("mount", ("omega_n = 7.3",)),
    ("waved", (("particular solution", "x_p(t) = 3*cos(t) + 2*sin(t)", "x"),)),
    ("decay", ("n(t) = 90*exp(-t/3)",)),
    ("tanks", ("h_1(1) ≈ 0.8311",)),
)
