"""What may stand under [inputs], and what is said of the rest."""

from __future__ import annotations

import tomllib
from fractions import Fraction

import pytest

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.algebra.waves import Wave
from closedform.errors import InputError, Place
from closedform.model.driven.instants import signs_in
from closedform.model.driven.piece_errors import (
    ImpulseOutsideError,
    OutsidePeriodError,
    PeriodError,
    PeriodMissingError,
    PieceOrderError,
    PiecesOverlapError,
    RepeatCountError,
    TwoFormsError,
)
from closedform.model.driven.pieces import Declared, declared_inputs
from closedform.model.driven.signal import Burst, Impulse, Repeat, Signal
from closedform.model.driven.signal_errors import (
    NameInInputError,
    NonlinearArgumentError,
    UnknownOrderError,
)
from closedform.model.entries import DecimalText
from closedform.model.errors import (
    BinaryFractionError,
    LookalikeNamesError,
    MisplacedKeyError,
    MissingKeyError,
    UnknownKeyError,
    UnusableNameError,
    WrongKindError,
)
from closedform.model.naming import Names
from closedform.model.parameter_errors import NameHereError
from closedform.model.source import Source
from closedform.notation.arithmetic import Arithmetic
from closedform.notation.exact import NUMBERS
from closedform.notation.plain import plain
from closedform.notation.rational import _Functions

FIELD = ParameterField(parameters=("F0", "T", "T1", "T2", "r", "pi", "w"))
PARAMETRIC = _Functions(FIELD, {})
T, T1, T2 = map(FIELD.symbol, ("T", "T1", "T2"))
DOMAIN = ParameterDomain(
    FIELD,
    (
        Comparison(T, ">"),
        Comparison(T1, ">"),
        Comparison(T2 - T1, ">"),
        Comparison(T - T2, ">="),
    ),
)
NAMES = Names("t", {"x": "an unknown", "F0": "a parameter"})


def declared(text: str, arithmetic: Arithmetic[SurdSum] = NUMBERS) -> tuple[Declared, ...]:
    """Read the lines below [inputs]; with parameters, in the domain."""
    text = f"[inputs]\n{text}"
    table = tomllib.loads(text, parse_float=DecimalText)["inputs"]
    signs = None if arithmetic is NUMBERS else signs_in(FIELD, DOMAIN)
    source = Source(Place("m.toml"), text)
    return declared_inputs(table, NAMES, source, arithmetic, signs)[0]


def one(text: str, arithmetic: Arithmetic[SurdSum] = NUMBERS) -> Declared:
    (found,) = declared(text, arithmetic)
    return found


def surd(value: Fraction | int) -> SurdSum:
    return SurdSum.rational(value)


def constant(value: int) -> tuple[Wave, ...]:
    zero = surd(0)
    return (Wave(surd(value), 0, zero, "one", zero, zero),)


def test_a_formula_a_number_and_a_table_declare_an_input() -> None:
    load, level, noise = declared(
        'F = "6*cos(3*t)"\nG = 5\nv = {is = "t", unit = "m/s", meaning = "speed"}'
    )
    assert (load.name, plain(load.definition or load.name)) == ("F", "6*cos(3*t)")
    assert level.signal == Signal((Burst(constant(5)),))
    assert (noise.unit, noise.meaning, noise.definition is None) == ("m/s", "speed", False)


def test_names_are_added_and_the_parameters_told() -> None:
    text = '[inputs]\nG = "F0*sin(w*t + pi/3)"'
    found, names = declared_inputs(
        tomllib.loads(text)["inputs"], NAMES, Source(Place(), text), PARAMETRIC
    )
    assert names.taken["G"] == "an input"
    assert found[0].names == {"F0", "w", "pi"}


def test_pieces_follow_one_another_and_gaps_are_zero() -> None:
    found = one('u = [{to = "0", is = "1"}, {from = 1, to = 2.5, is = 2}, {from = "3", is = "4"}]')
    assert found.definition is None
    assert found.signal == Signal(
        (
            Burst(constant(1), None, surd(0)),
            Burst(constant(2), surd(1), surd(Fraction(5, 2))),
            Burst(constant(4), surd(3), None),
        )
    )


def test_pieces_may_stand_in_any_order_if_they_do_not_overlap() -> None:
    found = one('u = [{from = 2, to = 3, is = "1"}, {from = 0, to = 2, is = "2"}]')
    assert len(found.signal.bursts) == 2


def test_a_piece_may_stand_alone_in_a_table() -> None:
    found = one('u = {from = 0, to = 2, is = "3", unit = "N"}')
    assert (found.signal, found.unit, found.definition) == (
        Signal((Burst(constant(3), surd(0), surd(2)),)),
        "N",
        None,
    )


def test_instants_may_be_parameters() -> None:
    found = one(
        'u = [{from = "T1", to = "T2", is = "F0"}, {from = "T2", is = "F0*exp(T2 - t)"}]',
        PARAMETRIC,
    )
    assert [(b.start, b.end is None) for b in found.signal.bursts] == [(T1, False), (T2, True)]
    assert found.names == {"T1", "T2", "F0"}


def test_doses_repeat() -> None:
    found = one('d = {is = "5*delta(t)", period = "8", count = 5}')
    assert found.signal == Signal((), (Impulse(surd(5), surd(0)),), Repeat(surd(8), surd(0), 5))
    assert plain(found.definition or found.name) == "5*delta(t)"


def test_a_formula_that_repeats_holds_in_one_period() -> None:
    found = one('s = {is = "t", period = 2, start = 1}')
    (burst,) = found.signal.bursts
    assert (burst.start, burst.end, found.signal.repeat) == (
        surd(1),
        surd(3),
        Repeat(surd(2), surd(1), None),
    )


def test_pieces_that_repeat_lie_in_one_period() -> None:
    found = one(
        'u = {period = "T", '
        'pieces = [{from = 0, to = "T1", is = "F0"}, {from = "T2", is = "-F0"}]}',
        PARAMETRIC,
    )
    assert [(b.start, b.end) for b in found.signal.bursts] == [(0, T1), (T2, T)]
    assert found.names == {"T1", "T2", "T", "F0"}


def test_a_table_of_tables_is_read() -> None:
    found = one('[inputs.u]\nunit = "A"\n[[inputs.u.pieces]]\nfrom = 0\nto = 1\nis = "2"')
    assert found.signal == Signal((Burst(constant(2), surd(0), surd(1)),))


@pytest.mark.parametrize(
    ("text", "error", "said"),
    [
        (
            'u = [{from = 0, to = 2, is = "1"}, {from = 1, is = "2"}]',
            PiecesOverlapError,
            "'2' from 1",
        ),
        ('u = [{is = "1"}, {is = "2"}]', PiecesOverlapError, "'1'"),
        ('u = [{from = 3, to = 2, is = "1"}]', PieceOrderError, "'1' from 3 to 2"),
        ('u = [{from = 2, to = 2, is = "1"}]', PieceOrderError, "does not begin"),
        ("u = []", WrongKindError, "an empty array"),
        ("u = [3]", WrongKindError, "a number"),
        ("u = [{from = 0, to = 2}]", MissingKeyError, "'is'"),
        ('u = [{from = 0, until = 2, is = "1"}]', UnknownKeyError, "'to'"),
        ('u = [{is = "1", period = 2}]', UnknownKeyError, "from, to, is"),
        ('u = {form = "0", is = "1"}', UnknownKeyError, "'from'"),
        ('u = {is = "1", pieces = [{is = "1"}]}', TwoFormsError, "'u'"),
        ('u = {unit = "N"}', MissingKeyError, "'is'"),
        ('u = {is = "1", period = 0}', PeriodError, "not positive"),
        ('u = {is = "1", count = 2}', PeriodMissingError, "'count'"),
        ('u = {is = "1", start = 2}', PeriodMissingError, "'start'"),
        ('u = {is = "1", period = 1, count = 0}', RepeatCountError, "is 0"),
        ('u = {is = "1", period = 1, count = 1.5}', RepeatCountError, "3/2"),
        ('u = {is = "1", period = 1, count = "sqrt(2)"}', RepeatCountError, "sqrt(2)"),
        (
            'u = {pieces = [{from = 0, to = 3, is = "1"}], period = 2}',
            OutsidePeriodError,
            "from 0 to 2",
        ),
        ('u = {is = "delta(t - 2)", period = 2}', ImpulseOutsideError, "first period"),
        ('u = [{from = 0, to = 2, is = "delta(t - 3)"}]', ImpulseOutsideError, "delta(t - 3)"),
        ('u = "sin(t^2)"', NonlinearArgumentError, "sin(t^2)"),
        ('u = "x*t"', NameInInputError, "'x' is an unknown"),
        ('u = [{from = "t", is = "1"}]', NameHereError, "the time"),
        ('u = [{from = "x", is = "1"}]', NameHereError, "an unknown"),
        ('exp = "1"', UnusableNameError, "function"),
        ('F0 = "1"', UnusableNameError, "a parameter"),
        ('t = "1"', UnusableNameError, "the time"),
        ('u1 = "1"\nu_1 = "2"', LookalikeNamesError, "u_1"),
        ('u = "1"\nmatrix = [[1]]', MisplacedKeyError, "matrix"),
        ('u = {is = "1", unit = 3}', WrongKindError, "a number"),
    ],
)
def test_mistakes_are_told_with_what_is_wrong(
    text: str, error: type[InputError], said: str
) -> None:
    with pytest.raises(error) as raised:
        declared(text)
    assert said in str(raised.value)
    assert str(raised.value).startswith("m.toml, inputs.")


@pytest.mark.parametrize(
    ("text", "error"),
    [
        ('u = [{from = "T2", to = "T1", is = "1"}]', PieceOrderError),
        ('u = [{from = "r", to = "T1", is = "1"}]', PieceOrderError),
        ('u = [{to = "r", is = "1"}, {from = "T1", is = "2"}]', UnknownOrderError),
        ('u = {is = "1", period = "r"}', PeriodError),
        ('u = {is = "1", period = "-T"}', PeriodError),
        ('u = {pieces = [{from = 0, to = "T + r", is = "1"}], period = "T"}', PieceOrderError),
        ('u = {pieces = [{from = 0, to = "2*T", is = "1"}], period = "T"}', OutsidePeriodError),
    ],
)
def test_the_order_of_parameters_has_to_be_known(text: str, error: type[InputError]) -> None:
    with pytest.raises(error) as raised:
        declared(text, PARAMETRIC)
    assert "line 2" in str(raised.value)


def test_a_python_float_is_no_instant() -> None:
    with pytest.raises(BinaryFractionError):
        declared_inputs({"u": [{"from": 0.1, "is": "1"}]}, NAMES, Source(Place()), NUMBERS)
