"""The names of slips, and a sentence on each: what a person did who made it."""

from __future__ import annotations

__all__ = ["MEANINGS"]

SIGN_SINE_BLOCK = "sign of the sine block"
SIGN_SINE = "sign of a sine term"
SIGN_COSINE = "sign of a cosine term"
SIGN_PHASE = "sign of the phase"
SIGN_EXPONENT = "sign of an exponent"
SIGN_EIGENVALUE = "sign of an eigenvalue"
SIGN_DERIVATIVE = "sign lost in differentiating"
SIGN_COEFFICIENT = "sign of a coefficient in the characteristic polynomial"
SIGN_ROOT = "sign of a root in a factor of the characteristic polynomial"
SIGN_PARTICULAR = "sign of the particular solution"
SIGN_FREE = "sign of the free part"
SIGN_INITIAL = "sign of an initial value"
SIGN_ENTRY = "sign of an entry"
SIGN_TERM = "sign of a term"
SIGN_OVERALL = "overall sign"

MISSING_T = "missing factor t in a chain"
MISSING_TIME = "time missing in an argument"
MISSING_FACTORIAL = "missing 1/k! in a chain"
RESONANCE = "forgotten resonance factor t"
EXTRA_T = "factor t too many"
CHAIN_SIDE = "chain on the wrong side of the diagonal"

SWAPPED_P = "P and its inverse swapped"
INVERSE_FOR_P = "P given for its inverse"
TRANSPOSED = "transposed matrix"
TRANSPOSED_P = "transposed P"
TRANSPOSED_INVERSE = "transposed inverse"
ORDER = "order of P and J does not match"
COLUMNS = "columns exchanged"
ROWS = "rows exchanged"
ENTRIES = "entries exchanged"
MISSING_DETERMINANT = "missing 1/det in the inverse"
DETERMINANT_TWICE = "multiplied by the determinant, not divided"
ADJUGATE_SIGN = "signs of the adjugate"
ADJUGATE_DIAGONAL = "diagonal of the adjugate not exchanged"
CONJUGATE = "vector of the conjugate eigenvalue"
OTHER_EIGENVALUE = "vector of another eigenvalue"
LEFT_VECTOR = "vector of the transposed matrix"
GEOMETRIC = "geometric taken for algebraic multiplicity"
MULTIPLICITY = "eigenvalue counted wrongly"

INITIAL_DROPPED = "dropped initial value"
VELOCITY_DROPPED = "initial velocity taken as zero"
INITIALS_EXCHANGED = "initial values exchanged"
INITIALS_DROPPED = "all initial values taken as zero"
C2_DAMPING = "damping term missing in the second constant"
FITTED_ALONE = "constants fitted without the particular solution"
FREE_MISSING = "free part missing"
FORCED_MISSING = "forced part missing"
PARTICULAR_MISSING = "particular solution missing"
PARTICULAR_TWICE = "particular solution added twice"
STEADY_MISSING = "steady state missing"
STEADY_TWICE = "steady state added twice"
CONSTANT = "constant of integration"
OTHER_STATE = "solution of another state"
DAMPING_SIGN = "particular solution coefficient (sign of the damping term)"
INERTIA_SIGN = "particular solution coefficient (sign of the inertia term)"
STIFFNESS_SIGN = "particular solution coefficient (sign of the stiffness term)"
PARTICULAR_COEFFICIENT = "particular solution coefficient"
NOT_NORMALISED = "probabilities not normalised to one"

NOT_DIFFERENTIATED = "not differentiated"
PRODUCT_RULE = "product rule"
CHAIN_RULE = "missing inner factor (chain rule)"
SUBSTITUTION = "missing factor of a substitution"
SINE_COSINE = "sine and cosine exchanged"
HYPERBOLIC = "circular and hyperbolic function exchanged"

DEGREE_AS_RADIAN = "degree used as radian"
RADIAN_AS_DEGREE = "radian used as degree"
HERTZ = "hertz for rad/s"
RAD_FOR_HERTZ = "rad/s for hertz"
DAMPED_FOR_UNDAMPED = "damped for undamped frequency"
UNDAMPED_FOR_DAMPED = "undamped for damped frequency"
DAMPING_HALF = "damping ratio halved"
DAMPING_DOUBLE = "damping ratio doubled"
NOT_DIVIDED = "decay rate for damping ratio"
NO_ROOT = "square root forgotten"
ROOT_TOO_MANY = "square root too many"
HALF_LIFE = "half-life for time constant"
TIME_CONSTANT = "time constant for half-life"
INVERTED = "reciprocal taken"
TWO_PI = "missing factor 2 pi"
OTHER_NAME = "another quantity in its place"

NOT_DELAYED = "shifted response not delayed"
DELAYED = "response delayed that begins at once"
STEP_MISSING = "step not switched on late"
STEP_TOO_MANY = "switched where nothing is switched"

OTHER_RATE = "rate of another eigenvalue"
EXPONENT_FACTOR = "factor in an exponent"
TIME_CONSTANT_INVERTED = "time constant used as a rate"
FREQUENCY_FACTOR = "factor in a frequency"
LIST_FACTOR = "factor in the root formula"

ONE_EIGENVALUE = "one wrong eigenvalue"
CHAIN_ENTRY = "wrong entry above the diagonal"
COEFFICIENT = "wrong coefficient in the characteristic polynomial"
ENTRY = "one wrong entry"
ONE_COEFFICIENT = "one wrong coefficient"
ONE_NUMBER = "one wrong number"
FRACTION = "fraction upside down"
FACTOR_TWO = "factor 2"
FACTOR = "overall factor"
MISSING_WAVE = "missing exponential or wave"
FACTOR_LEFT_OUT = "factor left out"
FACTOR_TOO_MANY = "factor too many"
TERM_LEFT_OUT = "term left out"
TERM_TOO_MANY = "term too many"

ROUNDING = "wrong rounding in the last digit"
TRUNCATED = "cut off instead of rounded"
EARLY_ROUNDING = "rounded too early"
DIGITS_EXCHANGED = "digits exchanged"
DECIMAL_POINT = "decimal point moved"
ONE_DIGIT = "one wrong digit"

MEANINGS: dict[str, str] = {
    SIGN_SINE_BLOCK: "The sines of a rotation block have the signs of the transposed block.",
    SIGN_SINE: "A term with a sine has the opposite sign.",
    SIGN_COSINE: "A term with a cosine has the opposite sign.",
    SIGN_PHASE: "The phase is added where it is to be subtracted, or the other way round.",
    SIGN_EXPONENT: "The exponent of an exponential has the opposite sign.",
    SIGN_EIGENVALUE: "An eigenvalue, or its real part, has the opposite sign.",
    SIGN_DERIVATIVE: "A sign that comes up in differentiating was lost.",
    SIGN_COEFFICIENT: "A coefficient of the characteristic polynomial has the opposite sign.",
    SIGN_ROOT: "A factor lambda - a stands where lambda + a is right, or the other way round.",
    SIGN_PARTICULAR: "A particular solution or steady state has the opposite sign.",
    SIGN_FREE: "The free part of a solution has the opposite sign.",
    SIGN_INITIAL: "An initial value was put in with the opposite sign.",
    SIGN_ENTRY: "An entry of a matrix or column has the opposite sign.",
    SIGN_TERM: "A term of a sum has the opposite sign.",
    SIGN_OVERALL: "The whole right side has the opposite sign.",
    MISSING_T: "A term that a chain of a repeated eigenvalue gives lacks its factor t.",
    MISSING_TIME: "An exponent or angle lacks the time.",
    MISSING_FACTORIAL: "A power t^k of a chain lacks the factor 1/k!.",
    RESONANCE: "A term driven at resonance lacks its factor t.",
    EXTRA_T: "A factor t stands where there is no chain and no resonance.",
    CHAIN_SIDE: "The ones of J, or the terms that come of them, are below the diagonal.",
    SWAPPED_P: "P^(-1) and P were exchanged in a product such as P e^(Jt) P^(-1).",
    INVERSE_FOR_P: "P itself stands where its inverse was to be.",
    TRANSPOSED: "The matrix is the transpose of the right one.",
    TRANSPOSED_P: "The eigenvectors were written as rows of P.",
    TRANSPOSED_INVERSE: "The inverse is transposed: cofactors were put in their own places.",
    ORDER: "The eigenvalues in J are in another order than the columns of P.",
    COLUMNS: "Two columns have changed places.",
    ROWS: "Two rows have changed places.",
    ENTRIES: "Two entries have changed places.",
    MISSING_DETERMINANT: "The adjugate was not divided by the determinant.",
    DETERMINANT_TWICE: "The adjugate was multiplied by the determinant.",
    ADJUGATE_SIGN: "The adjugate lacks its chequered signs.",
    ADJUGATE_DIAGONAL: "In the inverse of a 2 by 2 matrix the diagonal was left as it is.",
    CONJUGATE: "The vector belongs to the conjugate eigenvalue: i has the opposite sign.",
    OTHER_EIGENVALUE: "The vector belongs to another eigenvalue.",
    LEFT_VECTOR: "The vector is one of the transposed matrix, a left eigenvector.",
    GEOMETRIC: "J was taken to be diagonal, though A has too few eigenvectors.",
    MULTIPLICITY: "An eigenvalue is listed more or less often than it occurs.",
    INITIAL_DROPPED: "The contribution of one initial value is missing.",
    VELOCITY_DROPPED: "The contribution of an initial velocity is missing.",
    INITIALS_EXCHANGED: "The initial value of one state was put in for another one.",
    INITIALS_DROPPED: "The solution is that for zero initial values.",
    C2_DAMPING: "The second constant was taken from x'(0) without the derivative of the decay.",
    FITTED_ALONE: "The constants were fitted to the initial values before the forced part came in.",
    FREE_MISSING: "Only the particular solution was given.",
    FORCED_MISSING: "The solution is that of the free model.",
    PARTICULAR_MISSING: "The particular solution was left out of the sum.",
    PARTICULAR_TWICE: "The particular solution is in the sum twice.",
    STEADY_MISSING: "The steady state was left out of the sum.",
    STEADY_TWICE: "The steady state is in the sum twice.",
    CONSTANT: "The solution is right up to a constant.",
    OTHER_STATE: "The formula is that of another state or output.",
    DAMPING_SIGN: "The damping term was put in with the opposite sign.",
    INERTIA_SIGN: "The second derivative was put in with the opposite sign.",
    STIFFNESS_SIGN: "The term with the unknown itself was put in with the opposite sign.",
    PARTICULAR_COEFFICIENT: "A coefficient of the particular solution is wrong.",
    NOT_NORMALISED: "The long-run probabilities do not add up to one.",
    NOT_DIFFERENTIATED: "The function itself stands where its derivative is right.",
    PRODUCT_RULE: "One of the two terms of the product rule is missing.",
    CHAIN_RULE: "The derivative of the inner function is missing.",
    SUBSTITUTION: "The factor 1/lambda of an integral is missing.",
    SINE_COSINE: "A sine stands for a cosine, or the other way round.",
    HYPERBOLIC: "A sine stands for a hyperbolic sine, or the like.",
    DEGREE_AS_RADIAN: "An angle in degrees stands where one in radian is meant.",
    RADIAN_AS_DEGREE: "An angle in radian was converted as if it were in degrees.",
    HERTZ: "A frequency in hertz stands where one in rad/s is meant.",
    RAD_FOR_HERTZ: "A frequency in rad/s stands where one in hertz is meant.",
    DAMPED_FOR_UNDAMPED: "The damped frequency stands for the undamped one.",
    UNDAMPED_FOR_DAMPED: "The undamped frequency stands for the damped one.",
    DAMPING_HALF: "The damping ratio is half of what it ought to be.",
    DAMPING_DOUBLE: "The damping ratio is twice what it ought to be.",
    NOT_DIVIDED: "The decay rate was not divided by the natural frequency.",
    NO_ROOT: "The square of the quantity was given, as k/m for the frequency.",
    ROOT_TOO_MANY: "The square root of the quantity was given.",
    HALF_LIFE: "The half-life was given for the time constant: a factor ln 2.",
    TIME_CONSTANT: "The time constant was given for the half-life: a factor ln 2.",
    INVERTED: "The reciprocal was given, as a period for a frequency.",
    TWO_PI: "A factor 2 pi is missing or too many.",
    OTHER_NAME: "A name stands where another one is right.",
    NOT_DELAYED: "A response that begins late is written with t instead of t - a.",
    DELAYED: "A response is written with t - a instead of t.",
    STEP_MISSING: "A term lacks the unit step with which it begins.",
    STEP_TOO_MANY: "A term has a unit step that it ought not to have.",
    OTHER_RATE: "An exponential or oscillation goes with the rate of another eigenvalue.",
    EXPONENT_FACTOR: "An exponent lacks a factor, or has one too many.",
    TIME_CONSTANT_INVERTED: "A time constant was used as a rate, or the other way round.",
    FREQUENCY_FACTOR: "An angular frequency lacks a factor, or has one too many.",
    LIST_FACTOR: "A part of the root formula lacks a factor, or has one too many.",
    ONE_EIGENVALUE: "One eigenvalue of a list is wrong.",
    CHAIN_ENTRY: "Blocks of J are joined that ought not to be, or the other way round.",
    COEFFICIENT: "One coefficient of the characteristic polynomial is wrong.",
    ENTRY: "One entry of a matrix or column is wrong.",
    ONE_COEFFICIENT: "One coefficient of a formula is wrong.",
    ONE_NUMBER: "One number in a formula is wrong.",
    FRACTION: "Numerator and denominator have changed places.",
    FACTOR_TWO: "The number is twice or half of what it ought to be.",
    FACTOR: "The whole right side is off by a factor.",
    MISSING_WAVE: "A term lacks the exponential, sine or cosine that goes with it.",
    FACTOR_LEFT_OUT: "A term or an argument lacks a parameter, or is not divided by one.",
    FACTOR_TOO_MANY: "A term has a factor that it ought not to have.",
    TERM_LEFT_OUT: "A term of the sum is missing.",
    TERM_TOO_MANY: "A term stands in the sum that ought not to be there.",
    ROUNDING: "The last digit shown is not the one to which the value rounds.",
    TRUNCATED: "Digits were cut off where the last one is to be rounded up.",
    EARLY_ROUNDING: "Numbers were rounded on the way, so that last digits are lost.",
    DIGITS_EXCHANGED: "Two neighbouring digits have changed places.",
    DECIMAL_POINT: "The number is off by a power of ten.",
    ONE_DIGIT: "One digit of the number is wrong.",
}
"""What each name means, for reports and documentation."""
