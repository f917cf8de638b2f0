"""Functions with parameters to write, each with a short form found by hand."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from flint import arb
from hypothesis import strategies as st

from closedform.algebra.parameter_field import ParameterField
from closedform.response.parametric.closed_form import Kernel, Term
from tests.rational_elements import element, field_of, polynomials

OSCILLATOR = field_of("m c k delta omega_n omega_d kappa x0 v0")
CHAIN = field_of("k1 k2 k3 k4 N0 M0")
BOLUS = field_of("D V k10 k12 k21 R alpha beta y0")
CIRCUIT = field_of("R L C delta omega_d U i0")
TANKS = field_of("a b q h0 g0 tau")

CIRCULAR, HYPERBOLIC = ("cos", "sin"), ("cosh", "sinh")


def plain_terms(field: ParameterField, *amounts_and_rates: tuple[str, str]) -> list[Term]:
    """Return sums of amount · e^(rate t)."""
    return [Term(element(field, a), 0, element(field, r)) for a, r in amounts_and_rates]


def pair(
    field: ParameterField, even: str, odd: str, rate: str, kernels: tuple[Kernel, Kernel], w: str
) -> list[Term]:
    """Return e^(rate t) (even · kernel(w t) + odd · other kernel(w t))."""
    return [
        Term(element(field, amount), 0, element(field, rate), kernel, element(field, w))
        for amount, kernel in zip((even, odd), kernels, strict=True)
        if amount != "0"
    ]


def powers(field: ParameterField, rate: str, *amounts: str) -> list[Term]:
    """Return e^(rate t) (amount + amount · t + …)."""
    return [Term(element(field, a), j, element(field, rate)) for j, a in enumerate(amounts)]


def osc(even: str, odd: str, rate: str, kernels: tuple[Kernel, Kernel], w: str) -> list[Term]:
    return pair(OSCILLATOR, even, odd, rate, kernels, w)


CLASSICS: dict[str, tuple[ParameterField, Sequence[Term], str]] = {
    "light damping, named": (
        OSCILLATOR,
        osc("x0", "(v0 + delta*x0)/omega_d", "-delta", CIRCULAR, "omega_d"),
        "exp(-delta*t)*(x0*cos(omega_d*t) + (v0 + delta*x0)*sin(omega_d*t)/omega_d)",
    ),
    "light damping": (
        OSCILLATOR,
        osc("x0", "(2*m*v0 + c*x0)/(2*m*omega_d)", "-c/(2*m)", CIRCULAR, "omega_d"),
        "exp(-c*t/(2*m))*(x0*cos(omega_d*t) + (v0 + c*x0/(2*m))*sin(omega_d*t)/omega_d)",
    ),
    "light damping, speed": (
        OSCILLATOR,
        osc("v0", "-(omega_n^2*x0 + delta*v0)/omega_d", "-delta", CIRCULAR, "omega_d"),
        "exp(-delta*t)*(v0*cos(omega_d*t) - (delta*v0 + omega_n^2*x0)*sin(omega_d*t)/omega_d)",
    ),
    "heavy damping": (
        OSCILLATOR,
        osc("x0", "(v0 + delta*x0)/kappa", "-delta", HYPERBOLIC, "kappa"),
        "exp(-delta*t)*(x0*cosh(kappa*t) + (v0 + delta*x0)*sinh(kappa*t)/kappa)",
    ),
    "critical damping": (
        OSCILLATOR,
        powers(OSCILLATOR, "-c/(2*m)", "x0", "v0 + c*x0/(2*m)"),
        "exp(-c*t/(2*m))*(x0 + (v0 + c*x0/(2*m))*t)",
    ),
    "critical damping from rest": (
        OSCILLATOR,
        powers(OSCILLATOR, "-delta", "x0", "delta*x0"),
        "x0*exp(-delta*t)*(1 + delta*t)",
    ),
    "no damping": (
        OSCILLATOR,
        osc("x0", "v0/omega_n", "0", CIRCULAR, "omega_n"),
        "x0*cos(omega_n*t) + v0*sin(omega_n*t)/omega_n",
    ),
    "first of a decay": (CHAIN, plain_terms(CHAIN, ("N0", "-k1")), "N0*exp(-k1*t)"),
    "second of a decay": (
        CHAIN,
        plain_terms(CHAIN, ("N0*k1/(k2 - k1)", "-k1"), ("N0*k1/(k1 - k2)", "-k2")),
        "k1*N0*(exp(-k1*t) - exp(-k2*t))/(k2 - k1)",
    ),
    "second of a decay, both there": (
        CHAIN,
        plain_terms(CHAIN, ("N0*k1/(k2 - k1)", "-k1"), ("M0 - N0*k1/(k2 - k1)", "-k2")),
        "k1*N0*(exp(-k1*t) - exp(-k2*t))/(k2 - k1) + M0*exp(-k2*t)",
    ),
    "third of a decay": (
        CHAIN,
        plain_terms(
            CHAIN,
            ("N0*k1*k2/((k2 - k1)*(k3 - k1))", "-k1"),
            ("N0*k1*k2/((k1 - k2)*(k3 - k2))", "-k2"),
            ("N0*k1*k2/((k1 - k3)*(k2 - k3))", "-k3"),
        ),
        (
            "k1*k2*N0*((k2 - k3)*exp(-k1*t) + (k3 - k1)*exp(-k2*t) + (k1 - k2)*exp(-k3*t))"
            "/((k1 - k2)*(k1 - k3)*(k2 - k3))"
        ),
    ),
    "end of a decay": (
        CHAIN,
        plain_terms(CHAIN, ("N0", "0"), ("-N0*k2/(k2 - k1)", "-k1"), ("N0*k1/(k2 - k1)", "-k2")),
        "N0*(1 + (k1*exp(-k2*t) - k2*exp(-k1*t))/(k2 - k1))",
    ),
    "fourth of a decay": (
        CHAIN,
        plain_terms(
            CHAIN,
            ("N0*k1*k2*k3/((k2 - k1)*(k3 - k1)*(k4 - k1))", "-k1"),
            ("N0*k1*k2*k3/((k1 - k2)*(k3 - k2)*(k4 - k2))", "-k2"),
            ("N0*k1*k2*k3/((k1 - k3)*(k2 - k3)*(k4 - k3))", "-k3"),
            ("N0*k1*k2*k3/((k1 - k4)*(k2 - k4)*(k3 - k4))", "-k4"),
        ),
        (
            "k1*k2*k3*N0*(exp(-k1*t)/((k2 - k1)*(k3 - k1)*(k4 - k1))"
            " + exp(-k2*t)/((k1 - k2)*(k3 - k2)*(k4 - k2))"
            " + exp(-k3*t)/((k1 - k3)*(k2 - k3)*(k4 - k3))"
            " + exp(-k4*t)/((k1 - k4)*(k2 - k4)*(k3 - k4)))"
        ),
    ),
    "bolus": (
        BOLUS,
        plain_terms(
            BOLUS,
            ("D/V*(alpha - k21)/(alpha - beta)", "-alpha"),
            ("D/V*(k21 - beta)/(alpha - beta)", "-beta"),
        ),
        "D*((alpha - k21)*exp(-alpha*t) + (k21 - beta)*exp(-beta*t))/(V*(alpha - beta))",
    ),
    "bolus, tissue": (
        BOLUS,
        plain_terms(
            BOLUS, ("D*k12/(V*(beta - alpha))", "-alpha"), ("D*k12/(V*(alpha - beta))", "-beta")
        ),
        "D*k12*(exp(-alpha*t) - exp(-beta*t))/(V*(beta - alpha))",
    ),
    "infusion": (
        BOLUS,
        plain_terms(
            BOLUS,
            ("R/(V*k10)", "0"),
            ("R*(k21 - alpha)/(V*alpha*(alpha - beta))", "-alpha"),
            ("R*(beta - k21)/(V*beta*(alpha - beta))", "-beta"),
        ),
        (
            "R*(1/k10 + ((k21/alpha - 1)*exp(-alpha*t) + (1 - k21/beta)*exp(-beta*t))"
            "/(alpha - beta))/V"
        ),
    ),
    "loss to two sides": (
        BOLUS,
        plain_terms(BOLUS, ("y0", "-k10 - k12")),
        "y0*exp(-(k10 + k12)*t)",
    ),
    "series circuit, current": (
        CIRCUIT,
        pair(CIRCUIT, "0", "U/(L*omega_d)", "-R/(2*L)", CIRCULAR, "omega_d"),
        "U*exp(-R*t/(2*L))*sin(omega_d*t)/(L*omega_d)",
    ),
    "series circuit, charge": (
        CIRCUIT,
        plain_terms(CIRCUIT, ("C*U", "0"))
        + pair(CIRCUIT, "-C*U", "-C*U*delta/omega_d", "-delta", CIRCULAR, "omega_d"),
        "C*U*(1 - exp(-delta*t)*(cos(omega_d*t) + delta*sin(omega_d*t)/omega_d))",
    ),
    "series circuit, current there": (
        CIRCUIT,
        pair(CIRCUIT, "i0", "(2*U - R*i0)/(2*L*omega_d)", "-R/(2*L)", CIRCULAR, "omega_d"),
        "exp(-R*t/(2*L))*(i0*cos(omega_d*t) + (U - R*i0/2)*sin(omega_d*t)/(L*omega_d))",
    ),
    "one tank, filled": (
        TANKS,
        plain_terms(TANKS, ("q/a", "0"), ("h0 - q/a", "-a")),
        "q/a + (h0 - q/a)*exp(-a*t)",
    ),
    "one tank, time constant": (TANKS, plain_terms(TANKS, ("h0", "-1/tau")), "h0*exp(-t/tau)"),
    "two tanks": (
        TANKS,
        plain_terms(TANKS, ("a*h0/(b - a)", "-a"), ("g0 - a*h0/(b - a)", "-b")),
        "a*h0*(exp(-a*t) - exp(-b*t))/(b - a) + g0*exp(-b*t)",
    ),
    "two equal tanks": (TANKS, powers(TANKS, "-a", "g0", "a*h0"), "exp(-a*t)*(g0 + a*h0*t)"),
    "two equal tanks, the upper full": (
        TANKS,
        powers(TANKS, "-a", "0", "a*h0"),
        "a*h0*t*exp(-a*t)",
    ),
    "two tanks that level out": (
        TANKS,
        plain_terms(TANKS, ("(h0 + g0)/2", "0"), ("(h0 - g0)/2", "-2*a")),
        "(h0 + g0 + (h0 - g0)*exp(-2*a*t))/2",
    ),
    "nothing": (TANKS, [], "0"),
}


def value_at(field: ParameterField, terms: Sequence[Term], at: Mapping[str, arb]) -> arb:
    """Return a ball for a sum of terms, from its definition."""
    t, total = at["t"], arb(0)
    for term in terms:
        value = field.enclose_at(term.amount, at) * t**term.power
        value *= (field.enclose_at(term.rate, at) * t).exp()
        if term.kernel is not None and term.frequency is not None:
            value *= getattr(field.enclose_at(term.frequency, at) * t, term.kernel)()
        total += value
    return total


@st.composite
def sums(draw: st.DrawFn, field: ParameterField) -> list[Term]:
    """Draw sums of terms; rates and frequencies are few, so that terms meet."""
    rates = [field.scalar(0), *draw(st.lists(polynomials(field, 2), min_size=1, max_size=2))]
    frequency = draw(polynomials(field, 2).filter(bool))
    found = []
    for _ in range(draw(st.integers(0, 4))):
        kernel = draw(st.sampled_from([None, None, "cos", "sin", "cosh", "sinh"]))
        power = draw(st.integers(0, 2))
        rate = draw(st.sampled_from(rates))
        amount = draw(polynomials(field, 3)) / draw(polynomials(field, 2).filter(bool))
        found.append(Term(amount, power, rate, kernel, frequency if kernel else None))
    return found
