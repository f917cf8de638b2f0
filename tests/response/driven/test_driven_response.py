"""The driven solution against certified numbers found in another way: step by step in time."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of
from closedform.model.driven.model import DrivenModel
from closedform.model.driven.signal import Burst, Signal
from closedform.notation.evaluation import enclose
from closedform.notation.plain import plain
from closedform.response.driven.response import respond_driven
from tests.response.driven.stated import blow, numeric, pulse, sine, steady, wave

MODELS = {
    "tank and pump": numeric(
        [["-1/5"]], [[1]], lambda e: [pulse(e, 2, None, 10)], initial=[3], timeline=[10]
    ),
    "resonance": numeric(
        [[0, 1], [-9, 0]], [[0], [1]], lambda e: [sine(e, 6, 3, "cos")], initial=[0, 0]
    ),
    "twofold resonance": numeric(
        [[0, 1, 0, 0], [-4, 0, 1, 0], [0, 0, 0, 1], [0, 0, -4, 0]],
        [[0], [0], [0], [1]],
        lambda e: [sine(e, 1, 2)],
        initial=[1, 0, 0, "1/2"],
    ),
    "integrator": numeric(
        [[0, 1], [0, 0]], [[0], [1]], lambda e: [pulse(e, 1, 1, 3)], initial=[0, 0], timeline=[1, 3]
    ),
    "blow": numeric(
        [[0, 1], [-5, -2]],
        [[0, 0], [1, 1]],
        lambda e: [steady(e, 2), blow(e, 3, 4)],
        initial=[1, 0],
        timeline=[4],
    ),
    "sine cut off": numeric(
        [[-1, 2], [0, -3]],
        [[1], [1]],
        lambda e: [
            Signal(
                (
                    Burst(
                        (wave(e, 1, kernel="sin", frequency=3, origin="-1/3", rate="-1/2"),),
                        None,
                        e(2),
                    ),
                )
            )
        ],
        initial=[0, 1],
        timeline=[2],
    ),
    "later start": numeric([[-1]], [[1]], lambda e: [sine(e, 1, 1)], initial=[2], start=1),
}


def _by_steps(model: DrivenModel, t: Fraction) -> list[arb]:
    """x(t) by exponentials of the stacked matrix in balls, from one switching to the next."""
    field, n = model.field, len(model.names)
    exact = model.stacked.matrix
    size = len(exact)
    m = arb_mat(size, size, [ball_of(e) for row in exact for e in row])
    instants = [model.start, *model.timeline]
    state = [field.enclose(x) for x in model.initial or ()]
    for k, at in enumerate(instants):
        if field.surds(at).as_fraction() > t:
            break
        for place, given in enumerate(model.inputs):
            for impulse in given.signal.impulses:
                if impulse.at == at:
                    column = [row[place] for row in model.reduction.input_matrix.to_list()]
                    state = [
                        x + field.enclose(b * impulse.amount)
                        for x, b in zip(state, column, strict=True)
                    ]
        last = k + 1 == len(instants) or field.surds(instants[k + 1]).as_fraction() > t
        until = t if last else field.surds(instants[k + 1]).as_fraction()
        begun = field.surds(at).as_fraction()
        below = [arb(0)] * (size - n)
        for place, given in enumerate(model.inputs):
            for burst in given.signal.bursts:
                on = burst.start is None or field.surds(burst.start).as_fraction() <= begun
                on &= burst.end is None or field.surds(burst.end).as_fraction() > begun
                for own in burst.waves if on else ():
                    start = model.generator.start(place, own).to_list()
                    s = arb_mat(
                        size - n,
                        size - n,
                        [field.enclose(e) for r in model.generator.matrix.to_list() for e in r],
                    )
                    since = begun - field.surds(own.origin).as_fraction()
                    moved = (s * ball_of(since)).exp() * arb_mat(
                        size - n, 1, [field.enclose(e) for (e,) in start]
                    )
                    below = [b + moved[i, 0] for i, b in enumerate(below)]
        column = (m * ball_of(until - begun)).exp() * arb_mat(size, 1, [*state, *below])
        state = [column[i, 0] for i in range(n)]
        if last:
            break
    return state


@pytest.mark.parametrize("name", MODELS)
def test_every_interval_has_the_values_found_step_by_step(name: str) -> None:
    model = MODELS[name]
    response = respond_driven(model)
    (solution,) = response.solutions
    begin = model.field.surds(model.start).as_fraction()
    with ctx.workprec(400):
        for t in (begin + Fraction(k, 7) for k in (0, 1, 5, 9, 13, 20, 26, 35, 80)):
            expected = _by_steps(model, t)
            place = max(
                k
                for k, interval in enumerate(solution.functions.intervals)
                if model.field.surds(interval.start).as_fraction() <= t
            )
            known = {model.time: ball_of(t)}
            known |= {
                c.name: c.definition.enclosure() for c in response.stacked.closed_forms.constants
            }
            for row, value in enumerate(expected):
                written = enclose(solution.pieces[place][row], known)
                assert written.overlaps(value), (name, t, plain(solution.pieces[place][row]))
                assert (written - value).abs_upper() < arb("1e-60")
