"""A driven response with one fault in it is refuted, by the check that is there for it."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest

from closedform.algebra.waves import Constant
from closedform.model.driven.generator import Generator
from closedform.model.driven.signal import Burst, Impulse, Signal
from closedform.notation.expression import Number, Product, Sum
from closedform.response.driven.response import respond_driven
from closedform.verification.driven.equations import balance_check, rows_check, state_form_check
from closedform.verification.driven.generated import generator_check, stacked_check
from closedform.verification.driven.joins import initial_check, join_check
from closedform.verification.driven.parts import (
    free_forced_check,
    intervals_check,
    jump_check,
    sustained_check,
    switch_check,
)
from closedform.verification.driven.reduction import reduction_checks
from closedform.verification.driven.typed import typed_check
from closedform.verification.driven.verify import verify_driven
from closedform.verification.driven.written import formula_check
from tests.verification.driven.made import (
    KINDS,
    moved,
    refuted,
    response_to,
    setting_to,
    stated,
    summands_of,
    with_functions,
    with_model,
    with_solution,
)
from tests.verification.tampering import numbers_of, slips, with_number

each_kind = pytest.mark.parametrize("kind", KINDS)
SWITCHED = ("pulse and blow", "ramp to a tank", "rates that may meet")
TYPED = ("pulse and blow", "ramp to a tank", "rates that may meet")
each_switched = pytest.mark.parametrize("kind", SWITCHED)
each_typed = pytest.mark.parametrize("kind", TYPED)

EXACT = {
    "equations as typed",
    "x' = A x + B u",
    "z = C x + D u",
    "x(start) = x0",
    "joins",
    "free + forced = x",
    "unit steps and pieces",
    "sustained by the inputs",
    "jumps h",
    "steady + transient = x",
    "sinusoids of the steady state",
}


@each_kind
def test_what_is_right_is_proved(kind: str) -> None:
    record = verify_driven(response_to(kind))
    assert record.holds
    assert not record.refuted
    assert not record.left_open


# --- functions -----------------------------------------------------------------------------


@each_kind
def test_a_number_in_a_column_that_is_another_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for number, solution in enumerate(response.solutions):
        columns = solution.functions.columns
        places = [place for place, element in numbers_of(columns) if element]
        for place in places[:: max(1, len(places) // 8)]:
            element = dict(numbers_of(columns))[place]
            wrong = with_number(columns, place, -element)
            found = refuted(with_functions(response, number, columns=wrong), number, exact=True)
            assert EXACT & set(found), place


@each_kind
def test_a_summand_that_is_left_out_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for number, solution in enumerate(response.solutions):
        for k, place, _ in summands_of(solution.functions):
            wrong = moved(solution.functions, k, place)
            found = refuted(with_solution(response, number, functions=wrong), number, exact=True)
            assert EXACT & set(found)


@each_kind
def test_an_origin_that_is_shifted_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    for number, solution in enumerate(response.solutions):
        functions = solution.functions
        for k, place, summand in summands_of(functions):
            wrong = moved(functions, k, place, replace(summand, origin=summand.origin + one))
            spoiled = with_solution(response, number, functions=wrong)
            setting = setting_to(spoiled, number)
            difference = setting.wholes[k] - setting_to(response, number).wholes[k]
            if difference.fault(setting.vanishes) is not None:  # a constant has no origin
                assert EXACT & set(refuted(spoiled, number, exact=True))


@each_kind
def test_a_constant_in_front_that_is_another_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    for number, solution in enumerate(response.solutions):
        functions = solution.functions
        for k, place, summand in summands_of(functions):
            own = summand.constant
            other = replace(summand, constant=replace(own, growth=own.growth + one))
            wrong = moved(functions, k, place, other)
            found = refuted(with_solution(response, number, functions=wrong), number, exact=True)
            assert EXACT & set(found)


# --- intervals and joins -------------------------------------------------------------------


@each_switched
def test_an_interval_that_is_missing_is_refuted(kind: str) -> None:
    response = response_to(kind)
    functions = response.solutions[0].functions
    for k in range(len(functions.intervals)):
        intervals = functions.intervals[:k] + functions.intervals[k + 1 :]
        spoiled = with_functions(response, intervals=intervals)
        assert intervals_check(setting_to(spoiled)).outcome == "refuted"


@each_switched
def test_intervals_that_end_elsewhere_are_refuted(kind: str) -> None:
    response = response_to(kind)
    functions = response.solutions[0].functions
    first, *others = functions.intervals
    end = first.end + response.model.field.domain.one
    spoiled = with_functions(response, intervals=(replace(first, end=end), *others))
    assert intervals_check(setting_to(spoiled)).outcome == "refuted"
    spoiled = with_functions(response, switches=functions.switches[1:])
    assert intervals_check(setting_to(spoiled)).outcome == "refuted"


@each_switched
def test_a_switching_that_the_model_does_not_count_is_refuted(kind: str) -> None:
    response = response_to(kind)
    spoiled = with_model(response, timeline=response.model.timeline[:-1])
    assert intervals_check(setting_to(spoiled)).outcome == "refuted"


def test_instants_of_which_the_order_is_open_are_not_proved() -> None:
    response = response_to("ramp to a tank")
    model, case = response.model, response.solutions[0].case
    assert case is not None
    domain = replace(case.domain, conditions=case.domain.conditions[:-1])
    spoiled = with_solution(response, case=replace(case, domain=domain))
    assert len(model.timeline) == 2
    assert intervals_check(setting_to(spoiled)).outcome == "not attempted"


@pytest.mark.parametrize("kind", ["pulse and blow", "rates that may meet"])
def test_a_jump_that_is_left_out_or_too_high_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for amount in (0, 7):
        inputs = tuple(
            replace(
                given,
                signal=replace(
                    given.signal,
                    impulses=tuple(
                        Impulse(response.model.field.domain.convert(amount), impulse.at)
                        for impulse in given.signal.impulses
                    ),
                ),
            )
            for given in response.model.inputs
        )
        spoiled = with_model(response, inputs=inputs)
        for number in range(len(spoiled.solutions)):
            found = refuted(spoiled, number)
            assert {"joins", "inputs as declared", "driven formulas as written"} <= set(found)


@each_switched
def test_whether_a_state_jumps_is_checked(kind: str) -> None:
    response = response_to(kind)
    first, *others = response.solutions[0].functions.switches
    spoiled = with_functions(response, switches=(replace(first, jump=not first.jump), *others))
    (check,) = join_check(setting_to(spoiled))
    assert check.outcome == "refuted"


@each_switched
def test_what_joins_at_a_switching_is_checked(kind: str) -> None:
    response = response_to(kind)
    first, *others = response.solutions[0].functions.switches
    for place in range(len(first.summands)):
        summands = first.summands[:place] + first.summands[place + 1 :]
        spoiled = with_functions(response, switches=(replace(first, summands=summands), *others))
        (check,) = switch_check(setting_to(spoiled))
        assert check.outcome == "refuted"
        assert formula_check(setting_to(spoiled)).outcome == "refuted"


@each_kind
def test_other_initial_values_are_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    for place, value in enumerate(response.model.initial or ()):
        initial = list(response.model.initial or ())
        initial[place] = value + one
        spoiled = with_model(response, initial=tuple(initial))
        (check,) = initial_check(setting_to(spoiled))
        assert check.outcome == "refuted"
        assert stacked_check(spoiled.model).outcome == "refuted"
        assert formula_check(setting_to(spoiled)).outcome == "refuted"


@each_typed
def test_other_stated_values_are_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    assert response.model.stated_initial
    for place, (jet, value) in enumerate(response.model.stated_initial):
        stated = list(response.model.stated_initial)
        stated[place] = (jet, value + one)
        spoiled = with_model(response, stated_initial=tuple(stated))
        (check,) = initial_check(setting_to(spoiled))
        assert check.outcome == "refuted"


# --- the model -----------------------------------------------------------------------------


@each_kind
@pytest.mark.parametrize("part", ["matrix", "input_matrix"])
def test_another_state_form_is_refuted(kind: str, part: str) -> None:
    response = response_to(kind)
    field, reduction = response.model.field, response.model.reduction
    rows = getattr(reduction, part).to_list()
    for i in range(len(rows)):
        for k in range(len(rows[0])):
            changed = [list(row) for row in rows]
            changed[i][k] += field.domain.one
            other = replace(reduction, **{part: field.matrix(changed)})
            spoiled = with_model(response, reduction=other)
            assert state_form_check(setting_to(spoiled)).outcome == "refuted"
            assert formula_check(setting_to(spoiled)).outcome == "refuted"
            if spoiled.model.balances:
                first = next(reduction_checks(setting_to(spoiled)))
                assert first.outcome == "refuted"


def test_another_combination_for_what_is_no_state_is_refuted() -> None:
    response = response_to("pulse and blow")
    field, reduction = response.model.field, response.model.reduction
    for part in ("eliminated_from_states", "eliminated_from_inputs"):
        rows = getattr(reduction, part).to_list()
        for k in range(len(rows[0])):
            changed = [list(row) for row in rows]
            changed[0][k] += field.domain.one
            other = replace(reduction, **{part: field.matrix(changed)})
            spoiled = with_model(response, reduction=other)
            (check,) = rows_check(setting_to(spoiled))
            assert check.outcome == "refuted"


@pytest.mark.parametrize("kind", ["pulse and blow", "rates that may meet"])
def test_another_output_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    (output,) = response.model.outputs
    for part in ("of_states", "of_inputs"):
        weights = list(getattr(output, part))
        for k, weight in enumerate(weights):
            others = (*weights[:k], weight + one, *weights[k + 1 :])
            spoiled = with_model(response, outputs=(replace(output, **{part: others}),))
            (check,) = rows_check(setting_to(spoiled))
            assert check.outcome == "refuted"


@each_typed
def test_a_weight_of_an_equation_that_is_another_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    for number, balance in enumerate(response.model.balances):
        for part in ("of_unknowns", "of_inputs"):
            weights = getattr(balance, part)
            for k, (name, weight) in enumerate(weights):
                others = (*weights[:k], (name, weight + one), *weights[k + 1 :])
                balances = list(response.model.balances)
                balances[number] = replace(balance, **{part: others})
                setting = setting_to(with_model(response, balances=tuple(balances)))
                assert balance_check(setting).outcome == "refuted"
                (read,) = typed_check(setting)
                assert read.outcome == "refuted"


@each_typed
def test_a_typed_equation_that_says_something_else_is_refuted(kind: str) -> None:
    response = response_to(kind)
    count = seen = 0
    for number, balance in enumerate(response.model.balances):
        for _, wrong in slips(balance.right, response.model.time):
            balances = list(response.model.balances)
            balances[number] = replace(balance, right=wrong)
            setting = setting_to(with_model(response, balances=tuple(balances)))
            (read,) = typed_check(setting)
            seen += read.outcome != "enclosed"
            count += 1
    assert seen >= 0.7 * count > 0


@each_typed
def test_an_equation_that_is_missing_is_refuted(kind: str) -> None:
    response = response_to(kind)
    spoiled = with_model(response, balances=response.model.balances[1:])
    checks = list(reduction_checks(setting_to(spoiled)))
    assert not checks or checks[1].outcome == "refuted"
    twice = (*response.model.balances[:1] * 2, *response.model.balances[2:])
    if len(twice) > 1:
        *_, count = reduction_checks(setting_to(with_model(response, balances=twice)))
        assert count.outcome == "refuted"


# --- inputs --------------------------------------------------------------------------------


@each_kind
@pytest.mark.parametrize("part", ["amount", "rate", "frequency", "origin"])
def test_an_input_with_another_wave_is_refuted(kind: str, part: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    for place, given in enumerate(response.model.inputs):
        for number, burst in enumerate(given.signal.bursts):
            for k, wave in enumerate(burst.waves):
                plain = wave.kernel == "one"
                if (part == "frequency" and plain) or (
                    part == "origin" and plain and not wave.rate and not wave.power
                ):
                    continue
                other = replace(wave, **{part: getattr(wave, part) + one})
                waves = (*burst.waves[:k], other, *burst.waves[k + 1 :])
                bursts = list(given.signal.bursts)
                bursts[number] = Burst(waves, burst.start, burst.end)
                inputs = list(response.model.inputs)
                inputs[place] = replace(given, signal=replace(given.signal, bursts=tuple(bursts)))
                spoiled = with_model(response, inputs=tuple(inputs))
                found = refuted(spoiled)
                assert {"x' = A x + B u", "driven formulas as written"} <= set(found)
                if given.definition is not None:
                    assert "inputs as declared" in found


def test_an_input_that_is_switched_off_elsewhere_is_refuted() -> None:
    response = response_to("ramp to a tank")
    (given,) = response.model.inputs
    (burst,) = given.signal.bursts
    signal = Signal((replace(burst, end=None),), given.signal.impulses)
    spoiled = with_model(response, inputs=(replace(given, signal=signal),))
    assert {"x' = A x + B u", "driven formulas as written"} <= set(refuted(spoiled))


@each_kind
def test_a_declared_formula_that_says_something_else_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for place, given in enumerate(response.model.inputs):
        if given.definition is None:
            continue
        for wrong in (
            Sum((given.definition, Number(Fraction(1, 1000)))),
            Product((Number(Fraction(2)), given.definition)),
        ):
            inputs = list(response.model.inputs)
            inputs[place] = replace(given, definition=wrong)
            found = refuted(with_model(response, inputs=tuple(inputs)))
            assert set(found) == {"inputs as declared"}


@each_kind
@pytest.mark.parametrize("part", ["matrix", "readout"])
def test_another_generator_is_refuted(kind: str, part: str) -> None:
    response = response_to(kind)
    field, generator = response.model.field, response.model.generator
    assert isinstance(generator, Generator)
    rows = getattr(generator, part).to_list()
    for i in range(len(rows)):
        for k in range(len(rows[0])):
            changed = [list(row) for row in rows]
            changed[i][k] += field.domain.one
            other = replace(generator, **{part: field.matrix(changed)})
            spoiled = with_model(response, generator=other)
            assert stacked_check(spoiled.model).outcome == "refuted" or part == "readout"
            found = [check.outcome for check in generator_check(setting_to(spoiled))]
            assert found == ["refuted"] or stacked_check(spoiled.model).outcome == "refuted"


# --- parts ---------------------------------------------------------------------------------


@each_kind
def test_free_and_forced_parts_that_are_others_are_refuted(kind: str) -> None:
    response = response_to(kind)
    for number, solution in enumerate(response.solutions):
        functions = solution.functions
        spoiled = with_functions(response, number, free=functions.free[1:])
        if functions.free:
            assert free_forced_check(setting_to(spoiled, number)).outcome == "refuted"
        for k, interval in enumerate(functions.forced):
            if interval.summands:
                forced = list(functions.forced)
                forced[k] = replace(interval, summands=interval.summands[1:])
                spoiled = with_functions(response, number, forced=tuple(forced))
                assert free_forced_check(setting_to(spoiled, number)).outcome == "refuted"


@each_kind
def test_what_is_sustained_may_hold_no_free_response(kind: str) -> None:
    response = response_to(kind)
    functions = response.solutions[0].functions
    for k, interval in enumerate(functions.sustained):
        sustained = list(functions.sustained)
        sustained[k] = replace(interval, summands=(*interval.summands, *functions.free))
        fields = {"sustained": tuple(sustained), "held": sustained[-1].summands}
        spoiled = with_functions(response, **fields)
        check = sustained_check(setting_to(spoiled))
        if kind != "resonance":  # there the free response has the exponents of the input
            assert check.outcome == "refuted"
        assert jump_check(setting_to(spoiled)).outcome == "refuted"
    if functions.held:
        spoiled = with_functions(response, held=functions.held[1:])
        assert sustained_check(setting_to(spoiled)).outcome == "refuted"


@each_kind
def test_jumps_that_are_others_are_refuted(kind: str) -> None:
    response = response_to(kind)
    field, functions = response.model.field, response.solutions[0].functions
    one = Constant(field.domain.zero, "one", field.domain.zero)
    n = len(response.model.names)
    column = field.matrix([[field.domain.one] for _ in range(n)])
    for k, jump in enumerate(functions.jumps):
        jumps = list(functions.jumps)
        jumps[k] = (*jump, (one, column))
        spoiled = with_functions(response, jumps=tuple(jumps))
        assert jump_check(setting_to(spoiled)).outcome == "refuted"


# --- formulas ------------------------------------------------------------------------------


@each_kind
@pytest.mark.parametrize("part", ["solution", "pieces"])
def test_a_slip_in_a_formula_is_refuted(kind: str, part: str) -> None:
    """Slips that leave the value as it is are few: of all, most have to be seen."""
    response = response_to(kind)
    for number, solution in enumerate(response.solutions):
        whole = solution.solution if part == "solution" else solution.pieces[-1]
        formula = whole[-1]
        found = list(slips(formula, response.model.time))
        seen = 0
        for _, wrong in found[:: max(1, len(found) // 10)]:
            copy = replace(solution)
            rows = (*whole[:-1], wrong)
            copy.__dict__[part] = rows if part == "solution" else (*solution.pieces[:-1], rows)
            setting = replace(setting_to(response, number), solution=copy)
            seen += formula_check(setting).outcome == "refuted"
        assert seen >= 0.7 * len(found[:: max(1, len(found) // 10)])


@each_kind
def test_a_column_that_is_written_as_another_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for number, solution in enumerate(response.solutions):
        rows = [list(row) for row in solution.columns]
        for place, formula in enumerate(rows[0]):
            changed = [list(row) for row in rows]
            changed[0][place] = Sum((formula, Number(Fraction(1))))
            columns = tuple(map(tuple, changed))
            spoiled = with_solution(response, number, columns=columns)
            assert formula_check(setting_to(spoiled, number)).outcome == "refuted"


def test_numbers_too_long_to_be_read_back_leave_the_proof_open() -> None:
    mapping = {"equations": [f"x' = -x + sin({'7' * 500}*t)"], "initial": {"x": 1}}
    record = verify_driven(respond_driven(stated(mapping)))
    assert not record.holds
    assert not record.refuted
    assert "formulas as written" in {check.item for check in record.left_open}
    assert all("too large to be held exactly" in check.how for check in record.left_open)


def test_how_far_a_number_is_known_is_told_where_it_is_not_settled() -> None:
    mapping = {"equations": ["x' = -x + sin(t)"], "at_points": ["x(1000000000) = 1"]}
    record = verify_driven(respond_driven(stated(mapping)))
    assert not record.refuted
    (check,) = record.left_open
    assert "is not settled in interval 1 by 32768 bits: it is known to ± " in check.how
