"""That w' = S w and u = R w give the waves that the inputs are made of.

A wave is the output of the generator from w on if both have the same q derivatives at its
origin, and the characteristic polynomial of the block of S, put to d/dt, takes the wave to zero:
it takes R e^(Ss) w to zero too (Cayley-Hamilton), and such a function has q values to choose.
"""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.field import Scalar
from closedform.algebra.waves import Wave
from closedform.model.driven.generator import Generator
from closedform.model.driven.model import DrivenModel
from closedform.model.parametric import ParametricModel
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import TimedSum, wave_sum
from closedform.verification.record import Check
from closedform.verification.residuals import first_nonzero

__all__ = ["generator_check", "stacked_check"]


def stacked_check(model: DrivenModel) -> Check:
    """The matrix that was solved for is [[A, B R], [0, S]], from (x0, 0)."""
    item = "stacked matrix"
    field, n, generator = model.field, len(model.names), model.generator
    stated = model.stacked.matrix
    initial = model.stacked.initial
    if not isinstance(model.stacked, ParametricModel):
        stated = tuple(tuple(field.scalar(e) for e in row) for row in stated)
        initial = tuple(map(field.scalar, initial))
    zero = field.domain.zero
    own = model.reduction.matrix.to_list()
    fed: list[list[Scalar]] = [[] for _ in own]
    below: list[list[Scalar]] = []
    if generator is not None:
        matrix = model.reduction.input_matrix
        fed = (
            [[zero] * generator.order for _ in own]
            if matrix is None
            else (matrix * generator.readout).to_list()
        )
        below = [[*[zero] * n, *row] for row in generator.matrix.to_list()]
    rows = [[*a, *b] for a, b in zip(own, fed, strict=True)] + below
    if [list(row) for row in stated] != rows:
        return Check(item, "refuted", "it is not made of A, B, R and S")
    if model.initial is not None:
        start = [*model.initial, *[zero] * (len(rows) - n)]
        if list(initial) != start:
            return Check(item, "refuted", "its initial values are others")
    return Check(item, "proved", "every entry is that of A, of B R, of S, or 0")


def generator_check(setting: Setting) -> Iterator[Check]:
    """Yield the check that the generator's output is each wave of each input."""
    generator = setting.model.generator
    if generator is None:
        return
    item = "generator of the inputs"
    count = 0
    for place, given in enumerate(setting.model.inputs):
        for wave in dict.fromkeys(w for burst in given.signal.bursts for w in burst.waves):
            fault = _fault(setting, generator, place, wave)
            if fault is not None:
                yield Check(item, "refuted", f"input {place + 1}: {fault}")
                return
            count += 1
    yield Check(
        item,
        "proved",
        f"each of {count} waves has the derivatives of R e^(Ss) w at its origin, and the "
        "characteristic polynomial of S, put to d/dt, takes it to zero",
    )


def _fault(setting: Setting, generator: Generator, place: int, wave: Wave) -> str | None:
    field, vanishes = setting.field, setting.vanishes
    first, size = generator.first[place], generator.orders[place]
    block = generator.matrix.extract(
        list(range(first, first + size)), list(range(first, first + size))
    )
    function = _wave(setting, wave)
    derivatives = [function]
    for _ in range(size):
        derivatives.append(derivatives[-1].derivative())
    w = generator.start(place, wave)
    for k in range(size):
        found = generator.readout * w
        expected = _at_origin(derivatives[k], setting)
        rest = found.to_list()
        rest[place][0] -= expected
        if first_nonzero(setting.matrix(rest), vanishes) is not None:
            return f"derivative {k} at the origin is another"
        w = generator.matrix * w
    total = setting.nothing(1)
    coefficients = field.polynomial(block.charpoly()).to_list()
    for c, derivative in zip(reversed(coefficients), derivatives, strict=True):
        total = total + derivative.scaled(setting.put(c))
    if total.fault(vanishes) is not None:
        return "the characteristic polynomial of S does not take the wave to zero"
    return None


def _wave(setting: Setting, wave: Wave) -> TimedSum:
    """The wave in the time from its own origin."""
    zero = setting.field.domain.zero
    put = setting.put
    own = Wave(put(wave.amount), wave.power, put(wave.rate), wave.kernel, put(wave.frequency), zero)
    return wave_sum(setting.field, setting.factors, setting.vanishes, own)


def _at_origin(function: TimedSum, setting: Setting) -> Scalar:
    total = setting.field.domain.zero
    for residues in function.parts.values():
        total += residues[0].trace_form().to_list()[0][0]
    return total
