"""What may pass as a definition, since nothing is claimed by it, and what may not."""

from __future__ import annotations

import pytest

from tests.checking.hold import held

TABLES = {
    "equations": ["x'' + 2*x' + 5*x = 0", "y' = -y/10"],
    "initial": {"x": "1", "x'": "0", "y": "3"},
}


@pytest.mark.parametrize(
    "text",
    [
        r"z(t) = 5e^{-t}",
        r"\dot z = -3z",
        r"\dot z = -3x",
        r"E = m c^2",
        r"\tau_1 = 12\,\mathrm{s}",
        r"\omega_1 = \sqrt{6} \approx 2.449",
        r"\zeta_1 = 0.5",
    ],
)
def test_what_is_no_definition_does_not_pass(text: str) -> None:
    (verdict,) = held(TABLES, text)
    assert not verdict.passes
    assert verdict.verdict == "not read"
    assert verdict.reason


@pytest.mark.parametrize(
    "text",
    [
        r"\tau_1 = 10\,\mathrm{s}",
        r"\omega_1 = \sqrt{5} \approx 2.236",
        r"\omega_1 = 2",
        r"\zeta_1 = \frac{1}{\sqrt{5}}",
        r"a = 3, \quad b = 2a",
        r"d(t) = x(t) - y(t), \quad w = 2 d(1)",
    ],
)
def test_a_definition_or_a_quantity_of_the_model_passes(text: str) -> None:
    (verdict,) = held(TABLES, text)
    assert verdict.passes, verdict.reason


def test_a_function_that_a_later_line_uses_is_a_definition() -> None:
    verdicts = held(TABLES, r"g(t) = e^{-t}", r"x(t) = g(t)(\cos 2t + \tfrac12\sin 2t)")
    assert [v.verdict for v in verdicts] == ["holds", "holds"]


def test_a_numbered_name_that_a_later_line_uses_may_be_anything() -> None:
    verdicts = held(
        TABLES, r"\omega_1 = 4", r"x(t) = e^{-t}(\cos\frac{\omega_1 t}{2} + \tfrac12\sin 2t)"
    )
    assert [v.verdict for v in verdicts] == ["holds", "holds"]


def test_who_says_definition_gets_one() -> None:
    (verdict,) = held(TABLES, ("definition", r"\tau_1 = 12"))
    assert verdict.verdict == "holds"


CIRCUIT = {
    "equations": ["q'' + 2*q' + 5*q = 0"],
    "initial": {"q": "1", "q'": "0"},
}


@pytest.mark.parametrize(
    ("text", "passes"),
    [
        (r"i(t) = \dot q(t) = -\tfrac52 e^{-t}\sin 2t", True),
        (r"i(t) = \dot q(t) = \tfrac52 e^{-t}\sin 2t", False),
        (r"i = \frac{\mathrm{d}q}{\mathrm{d}t} = -\tfrac52 e^{-t}\sin 2t", True),
        (r"i = \frac{\mathrm{d}q}{\mathrm{d}t} = -\tfrac52 e^{-t}\cos 2t", False),
        (r"\lambda_{1,2} = -1 \pm 2i", True),
        (r"i^2 = -1", True),
        (r"i(-i) = 1", True),
    ],
)
def test_a_current_is_a_name_on_the_left_and_the_imaginary_unit_elsewhere(
    text: str, *, passes: bool
) -> None:
    (verdict,) = held(CIRCUIT, text)
    assert verdict.verdict == ("holds" if passes else "fails"), verdict.reason
