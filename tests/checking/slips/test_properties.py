"""Right lines in which one number or one sign is changed: the slip is found, and mended."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

from hypothesis import assume, given
from hypothesis import strategies as st

from closedform.checking.claim import SourceLine
from closedform.checking.judging.judge import judge
from closedform.checking.recognising.lines import read_line
from closedform.checking.recognising.recognise import claims_of
from closedform.checking.slips import diagnosed
from closedform.checking.slips.making import negated
from closedform.checking.slips.spots import put, spots
from closedform.checking.standing.author import Author
from closedform.checking.standing.facts import Facts
from closedform.checking.standing.setting import Setting
from closedform.notation.written.tree import Literal, Sum, Written
from tests.checking.slips.making import Diagnosis, ground
from tests.checking.slips.test_examples import mended_line_holds

RIGHT = (
    ("pendulum", "solution", "x(t) = exp(-t)*(4*cos(4*t) + sin(4*t))"),
    ("thrown", "solution", "x(t) = exp(-3*t)*(cos(4*t) + 5/4*sin(4*t))"),
    ("tanks", "solution", "h_1(t) = 2*exp(-t) - exp(-4*t)"),
    ("loaded", "solution", "x(t) = 2 - 2*exp(-t) + exp(-2*t)"),
    ("tanks", "characteristic polynomial", "lambda^2 + 5*lambda + 4"),
    ("tanks", "matrix", "A = [[-3, 1], [2, -2]]"),
    ("cascade", "exp A", "exp(-t)*[[1, t, t^2/2], [0, 1, t], [0, 0, 1]]"),
)


def changed_at(tree: Written, choice: int, new: int) -> Written:
    """Return a formula with one number or the sign of one term changed."""
    places = [s for s in spots(tree) if isinstance(s.node, Literal | Sum)]
    spot = places[choice % len(places)]
    if isinstance(spot.node, Sum):
        at = new % len(spot.node.terms)
        terms = tuple(negated(t) if k == at else t for k, t in enumerate(spot.node.terms))
        return put(tree, spot.path, Sum(terms))
    return put(tree, spot.path, Literal(Fraction(new)))


@given(st.sampled_from(RIGHT), st.integers(0, 40), st.integers(1, 9))
def test_one_change_is_undone(right: tuple[str, str, str], choice: int, new: int) -> None:
    model, says, text = right
    own = ground(model)
    facts: Facts = own.facts
    line = SourceLine(1, text, typed=True, says=says)
    reading = read_line(line, facts).reading
    assert reading is not None
    (claim,) = claims_of(line, reading.statements, facts)
    setting = Setting(own, Author(kept=facts.names))
    assert judge(claim, setting).passes
    wrong = changed_at(claim.values[-1], choice, new)
    group = replace(claim.groups[0], values=(wrong,))
    spoilt = replace(claim, groups=(group,))
    finding = judge(spoilt, setting)
    assume(finding.word == "fails")
    slip, reason = diagnosed(spoilt, finding, setting)
    assert slip is not None
    assert reason
    assert mended_line_holds(Diagnosis(spoilt, finding, setting, slip, reason))
