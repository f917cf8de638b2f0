"""Lines with one slip each, and what that is called."""

from __future__ import annotations

from closedform.checking.slips import names
from tests.checking.slips.making import Line

TANK_P = ("P", "P = [[1, 1], [2, -1]]")
TANK_J = ("J", "J = [[-1, 0], [0, -4]]")
LOOP_P = ("P", "P = [[1, 2], [-1, 3]]")

EXAMPLES: tuple[tuple[str, str, tuple[Line, ...]], ...] = (
    # signs
    (names.SIGN_PHASE, "pendulum", ("x(t) = sqrt(17)*exp(-t)*cos(4*t + atan(1/4))",)),
    (names.SIGN_PHASE, "pendulum", ("x(t) ≈ 4.123*exp(-t)*cos(4*t + 0.245)",)),
    (names.SIGN_SINE, "pendulum", ("x(t) = exp(-t)*(4*cos(4*t) - sin(4*t))",)),
    (names.SIGN_COSINE, "thrown", ("x(t) = exp(-3*t)*(-cos(4*t) + 5/4*sin(4*t))",)),
    (names.SIGN_EXPONENT, "pendulum", ("x(t) = exp(t)*(4*cos(4*t) + sin(4*t))",)),
    (names.SIGN_EXPONENT, "tanks", ("h_1(t) = 2*exp(-t) - exp(4*t)",)),
    (names.SIGN_DERIVATIVE, "pendulum", ("x'(t) = 17*exp(-t)*sin(4*t)",)),
    (names.SIGN_TERM, "tanks", ("h_1(t) = 2*exp(-t) + exp(-4*t)",)),
    (
        names.SIGN_SINE_BLOCK,
        "rotor",
        (
            (
                "exp A",
                "[[exp(-t)*cos(3*t), exp(-t)*sin(3*t)], [-exp(-t)*sin(3*t), exp(-t)*cos(3*t)]]",
            ),
        ),
    ),
    (
        names.SIGN_SINE,
        "rotor",
        (("exp A", "exp(-t)*[[cos(3*t), -sin(3*t)], [-sin(3*t), cos(3*t)]]"),),
    ),
    (names.SIGN_COEFFICIENT, "tanks", (("characteristic polynomial", "lambda^2 - 5*lambda + 4"),)),
    (names.SIGN_ROOT, "tanks", (("characteristic polynomial", "(lambda + 1)*(lambda - 4)"),)),
    (names.SIGN_EIGENVALUE, "tanks", (("eigenvalues", "lambda_1 = 1, lambda_2 = -4"),)),
    (names.SIGN_EIGENVALUE, "tanks", (("eigenvalues", "lambda_1 = 1, lambda_2 = 4"),)),
    (
        names.SIGN_EIGENVALUE,
        "pendulum",
        (("eigenvalues", "lambda_1 = 1 + 4*i, lambda_2 = 1 - 4*i"),),
    ),
    (names.SIGN_ENTRY, "tanks", (("matrix", "A = [[-3, 1], [2, 2]]"),)),
    (names.SIGN_PARTICULAR, "loaded", (("particular solution", "x_p(t) = -2", "x"),)),
    (names.SIGN_INITIAL, "thrown", ("x(t) = exp(-3*t)*(cos(4*t) + 1/4*sin(4*t))",)),
    # chains and resonance
    (
        names.MISSING_T,
        "latch",
        (("exp A", "[[exp(-3*t), exp(-3*t), 0], [0, exp(-3*t), 0], [0, 0, exp(-t)]]"),),
    ),
    (names.MISSING_T, "critical", ("x(t) = 3*exp(-2*t) + 7*exp(-2*t)",)),
    (
        names.MISSING_FACTORIAL,
        "cascade",
        (("exp A", "exp(-t)*[[1, t, t^2], [0, 1, t], [0, 0, 1]]"),),
    ),
    (names.RESONANCE, "shaken", ("x(t) = cos(2*t) + 2*sin(2*t)",)),
    (names.EXTRA_T, "tanks", ("h_1(t) = 2*t*exp(-t) - exp(-4*t)",)),
    # matrices
    (
        names.SWAPPED_P,
        "tanks",
        (
            ("P", "P = [[1, 2], [2, -2]]"),
            (
                "exp A",
                (
                    "1/3*[[exp(-t) + 2*exp(-4*t), 2*exp(-t) - 2*exp(-4*t)], "
                    "[exp(-t) - exp(-4*t), 2*exp(-t) + exp(-4*t)]]"
                ),
            ),
        ),
    ),
    (
        names.TRANSPOSED,
        "loops",
        (
            (
                "exp A",
                (
                    "1/5*[[3*exp(-t) + 2*exp(-6*t), -3*exp(-t) + 3*exp(-6*t)], "
                    "[-2*exp(-t) + 2*exp(-6*t), 2*exp(-t) + 3*exp(-6*t)]]"
                ),
            ),
        ),
    ),
    (names.TRANSPOSED, "tanks", (("matrix", "A = [[-3, 2], [1, -2]]"),)),
    (names.TRANSPOSED_P, "tanks", (TANK_J, ("P", "P = [[1, 2], [1, -1]]"))),
    (names.TRANSPOSED_INVERSE, "loops", (LOOP_P, ("P inverse", "1/5*[[3, 1], [-2, 1]]"))),
    (names.ROWS, "loops", (("matrix", "A = [[-3, -4], [-3, -2]]"),)),
    (names.MISSING_DETERMINANT, "loops", (LOOP_P, ("P inverse", "[[3, -2], [1, 1]]"))),
    (names.ADJUGATE_SIGN, "loops", (LOOP_P, ("P inverse", "1/5*[[3, 2], [-1, 1]]"))),
    (names.ADJUGATE_DIAGONAL, "loops", (LOOP_P, ("P inverse", "1/5*[[1, -2], [1, 3]]"))),
    (names.INVERSE_FOR_P, "loops", (LOOP_P, ("P inverse", "[[1, 2], [-1, 3]]"))),
    (names.GEOMETRIC, "filter", (("J", "J = [[-2, 0, 0], [0, -2, 0], [0, 0, -5]]"),)),
    (names.CONJUGATE, "rotor", (("eigenvector", "v = (1, i)", "-1 + 3*i"),)),
    (
        names.ORDER,
        "tanks",
        (TANK_P, ("J", "J = [[-4, 0], [0, -1]]")),
    ),
    (names.INITIALS_EXCHANGED, "tanks", ("h_1(t) = 2*exp(-t) + 3*exp(-4*t)",)),
    (names.OTHER_EIGENVALUE, "tanks", (("eigenvector", "v = (1, -1)", "-1"),)),
    (names.ENTRY, "tanks", (("eigenvector", "v = (1, 3)", "-1"),)),
    (names.SIGN_ENTRY, "tanks", (("eigenvector", "v = (1, -2)", "-1"),)),
    (names.ENTRY, "tanks", (TANK_J, ("P", "P = [[1, 1], [3, -1]]"))),
    (names.ENTRY, "tanks", (("matrix", "A = [[-3, 1], [2, -5]]"),)),
    (names.MULTIPLICITY, "tanks", (("eigenvalues", "lambda_1 = -1, lambda_2 = -1"),)),
    # solutions as a whole
    (names.VELOCITY_DROPPED, "thrown", ("x(t) = exp(-3*t)*(cos(4*t) + 3/4*sin(4*t))",)),
    (names.C2_DAMPING, "thrown", ("x(t) = exp(-3*t)*(cos(4*t) + 1/2*sin(4*t))",)),
    (names.C2_DAMPING, "critical", ("x(t) = (3 + t)*exp(-2*t)",)),
    (names.INITIALS_DROPPED, "loaded", ("x(t) = 2 - 4*exp(-t) + 2*exp(-2*t)",)),
    (names.FITTED_ALONE, "loaded", ("x(t) = 2 + 2*exp(-t) - exp(-2*t)",)),
    (names.FORCED_MISSING, "loaded", ("x(t) = 2*exp(-t) - exp(-2*t)",)),
    (names.PARTICULAR_MISSING, "loaded", ("x(t) = -2*exp(-t) + exp(-2*t)",)),
    (names.PARTICULAR_TWICE, "loaded", ("x(t) = 4 - 2*exp(-t) + exp(-2*t)",)),
    (names.DAMPING_SIGN, "fading", (("particular solution", "x_p(t) = 1/20*exp(-3*t)", "x"),)),
    (names.DAMPING_SIGN, "waved", (("particular solution", "x_p(t) = 2*cos(t) - sin(t)", "x"),)),
    (names.INERTIA_SIGN, "fading", (("particular solution", "x_p(t) = -1/16*exp(-3*t)", "x"),)),
    (names.OTHER_STATE, "rotor", ("a(t) = exp(-t)*(cos(3*t) + 2*sin(3*t))",)),
    (names.NOT_NORMALISED, "repair", (("steady state", "(1/4)*(2, 2, 1)", "vector"),)),
    # differentiating
    (names.PRODUCT_RULE, "pendulum", ("x'(t) = exp(-t)*(-16*sin(4*t) + 4*cos(4*t))",)),
    (
        names.CHAIN_RULE,
        "rotor",
        ("a'(t) = exp(-t)*(-2*cos(3*t) + sin(3*t) - 2*sin(3*t) - cos(3*t))",),
    ),
    # functions, angles, frequencies
    (names.SINE_COSINE, "pendulum", ("x(t) = exp(-t)*(4*sin(4*t) + sin(4*t))",)),
    (names.HYPERBOLIC, "pendulum", ("x'(t) = -17*exp(-t)*sinh(4*t)",)),
    (names.DEGREE_AS_RADIAN, "pendulum", ("x(t) ≈ 4.123*exp(-t)*cos(4*t - 14.04)",)),
    (names.HERTZ, "mount", ("omega_n = 0.796",)),
    (names.NO_ROOT, "mount", ("omega_n = 25",)),
    (names.NO_ROOT, "mount", ("omega_n = k/m",)),
    (names.INVERTED, "mount", ("omega_n = sqrt(m/k)",)),
    (names.DAMPING_HALF, "mount", ("zeta = 0.03",)),
    (names.DAMPING_DOUBLE, "mount", ("zeta = c/sqrt(k*m)",)),
    (names.UNDAMPED_FOR_DAMPED, "pendulum", ("x'(t) = -17*exp(-t)*sin(sqrt(17)*t)",)),
    (
        names.SIGN_TERM,
        "mount",
        ("omega_n = sqrt(k/m)", "zeta = c/(2*sqrt(k*m))", "omega_d = omega_n*sqrt(1 + zeta^2)"),
    ),
    (names.HALF_LIFE, "decay", (("time constant", "tau = 4*ln(2)"),)),
    (names.TIME_CONSTANT, "decay", (("half-life", "T = 4"),)),
    (names.INVERTED, "decay", (("time constant", "tau = 1/4"),)),
    # delays
    (names.NOT_DELAYED, "switched", ("x(t) = exp(-2*t) + 3*(1 - exp(-2*t))*step(t - 1)",)),
    (names.STEP_MISSING, "switched", ("x(t) = exp(-2*t) + 3*(1 - exp(-2*(t - 1)))",)),
    # rates and numbers
    (names.OTHER_RATE, "tanks", ("h_1(t) = 2*exp(-t) - exp(-t)",)),
    (names.TIME_CONSTANT_INVERTED, "decay", ("n(t) = 100*exp(-4*t)",)),
    (names.EXPONENT_FACTOR, "pendulum", ("x'(t) = -17*exp(-2*t)*sin(4*t)",)),
    (names.COEFFICIENT, "tanks", (("characteristic polynomial", "lambda^2 + 5*lambda + 8"),)),
    (names.ONE_COEFFICIENT, "tanks", ("h_1(t) = 7*exp(-t) - exp(-4*t)",)),
    (names.ONE_COEFFICIENT, "thrown", ("x(t) = exp(-3*t)*(cos(4*t) + 9/4*sin(4*t))",)),
    (names.FACTOR, "tanks", ("h_1(t) = 3*(2*exp(-t) - exp(-4*t))",)),
    (names.TERM_LEFT_OUT, "tanks", ("h_1(t) = 2*exp(-t)",)),
    (names.LIST_FACTOR, "pendulum", (("eigenvalues", "lambda = -1 ± 8*i"),)),
    # digits
    (names.ROUNDING, "tanks", ("h_1(1) ≈ 0.719",)),
    (names.TRUNCATED, "tanks", ("h_1(1) ≈ 0.71",)),
    (names.DIGITS_EXCHANGED, "tanks", ("h_1(1) ≈ 0.7147",)),
    (names.DECIMAL_POINT, "tanks", ("h_1(1) ≈ 7.174",)),
    (names.ONE_DIGIT, "tanks", ("h_1(1) ≈ 0.7874",)),
    (names.DIGITS_EXCHANGED, "pendulum", ("x(t) ≈ 4.132*exp(-t)*cos(4*t - 0.245)",)),
    # the rest of the table
    (names.SIGN_OVERALL, "tanks", ("h_1(1) = -(2*exp(-1) - exp(-4))",)),
    (
        names.CHAIN_SIDE,
        "latch",
        (("exp A", "[[exp(-3*t), 0, 0], [t*exp(-3*t), exp(-3*t), 0], [0, 0, exp(-t)]]"),),
    ),
    (
        names.COLUMNS,
        "loops",
        (
            (
                "exp A",
                (
                    "1/5*[[-2*exp(-t) + 2*exp(-6*t), 3*exp(-t) + 2*exp(-6*t)], "
                    "[2*exp(-t) + 3*exp(-6*t), -3*exp(-t) + 3*exp(-6*t)]]"
                ),
            ),
        ),
    ),
    (
        names.ENTRIES,
        "tanks",
        (("solution", "[[4*exp(-t) + exp(-4*t)], [2*exp(-t) - exp(-4*t)]]", "vector"),),
    ),
    (names.DETERMINANT_TWICE, "loops", (LOOP_P, ("P inverse", "5*[[3, -2], [1, 1]]"))),
    (names.LEFT_VECTOR, "tanks", (("eigenvector", "v = (1, 1)", "-1"),)),
    (names.ONE_EIGENVALUE, "tanks", (("eigenvalues", "lambda_1 = -1, lambda_2 = -3"),)),
    (names.CHAIN_ENTRY, "cascade", (("J", "J = [[-1, 1, 0], [0, -1, 0], [0, 0, -1]]"),)),
    (names.INITIAL_DROPPED, "tanks", ("h_1(t) = 5/3*(exp(-t) - exp(-4*t))",)),
    (names.FREE_MISSING, "waved", ("x(t) = 2*cos(t) + sin(t)",)),
    (names.STEADY_MISSING, "repair", ("p_1(t) = 3/5*exp(-5*t)",)),
    (names.STEADY_TWICE, "repair", ("p_1(t) = 4/5 + 3/5*exp(-5*t)",)),
    (names.CONSTANT, "tanks", ("h_1(t) = 2*exp(-t) - exp(-4*t) + 3",)),
    (
        names.STIFFNESS_SIGN,
        "waved",
        (("particular solution", "x_p(t) = -3/2*cos(t) + 1/2*sin(t)", "x"),),
    ),
    (
        names.PARTICULAR_COEFFICIENT,
        "waved",
        (("particular solution", "x_p(t) = 2*cos(t) + 3*sin(t)", "x"),),
    ),
    (names.NOT_DIFFERENTIATED, "tanks", ("h_1'(t) = 2*exp(-t) - exp(-4*t)",)),
    (names.RADIAN_AS_DEGREE, "pendulum", ("x(t) ≈ 4.123*exp(-t)*cos(4*t - 0.245*pi/180)",)),
    (names.RAD_FOR_HERTZ, "mount", ("f_n = 5 Hz",)),
    (names.TWO_PI, "mount", ("T_n = 0.2",)),
    (names.ROOT_TOO_MANY, "pendulum", ("x'(t) = -17*exp(-t)*sin(2*t)",)),
    (names.NOT_DIVIDED, "mount", ("zeta = 0.3",)),
    (names.DAMPED_FOR_UNDAMPED, "mount", ("omega_n ≈ 4.991",)),
    (names.OTHER_NAME, "mount", ("omega_n = sqrt(k/c)",)),
    (names.DELAYED, "switched", ("x(t) = exp(-2*(t - 1)) + 3*(1 - exp(-2*(t - 1)))*step(t - 1)",)),
    (
        names.STEP_TOO_MANY,
        "switched",
        ("x(t) = exp(-2*t)*step(t - 1) + 3*(1 - exp(-2*(t - 1)))*step(t - 1)",),
    ),
    (names.FREQUENCY_FACTOR, "pendulum", ("x'(t) = -17*exp(-t)*sin(3*t)",)),
    (names.ONE_NUMBER, "tanks", ("h_1(1) = 3*exp(-1) - exp(-4)",)),
    (names.FACTOR_TWO, "decay", (("time constant", "tau = 8"),)),
    (names.TERM_TOO_MANY, "tanks", ("h_1(t) = 2*exp(-t) - exp(-4*t) + exp(-2*t)",)),
    (names.EARLY_ROUNDING, "pendulum", ("x(t) ≈ 4.130*exp(-t)*cos(4*t - 0.243)",)),
    (
        names.SIGN_FREE,
        "waved",
        ("x(t) = 2*cos(t) + sin(t) + 2*exp(-t)*cos(2*t) + 3/2*exp(-t)*sin(2*t)",),
    ),
    (names.MISSING_TIME, "pendulum", ("x(t) = exp(-1)*(4*cos(4*t) + sin(4*t))",)),
    (names.FRACTION, "thrown", ("x(t) = exp(-3*t)*(cos(4*t) + 4/5*sin(4*t))",)),
    (names.MISSING_WAVE, "tanks", ("h_1(t) = 2 - exp(-4*t)",)),
    (
        names.SUBSTITUTION,
        "switched",
        ("x(t) = exp(-2*t) + 6*(1 - exp(-2*(t - 1)))*step(t - 1)",),
    ),
    (names.FACTOR_LEFT_OUT, "daughter", ("n_1(t) = N*exp(-t)",)),
    (names.FACTOR_LEFT_OUT, "daughter", ("n_2(t) = N*(exp(-k_1*t) - exp(-k_2*t))/(k_2 - k_1)",)),
    (names.FACTOR_TOO_MANY, "daughter", ("n_1(t) = N*k_2*exp(-k_1*t)",)),
    (names.SIGN_TERM, "daughter", ("n_2(t) = k_1*N*(exp(-k_1*t) - exp(-k_2*t))/(k_2 + k_1)",)),
    (names.OTHER_NAME, "daughter", ("n_1(t) = N*exp(-k_2*t)",)),
)
