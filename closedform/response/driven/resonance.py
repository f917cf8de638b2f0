"""Resonance: tones of the inputs that are eigenvalues of the model."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, Polynomial, Scalar
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.algebra.sign_argument import SignArgument
from closedform.algebra.waves import Wave
from closedform.model.driven.generator import Tone
from closedform.model.driven.model import DrivenModel
from closedform.response.driven.particular import Drive

__all__ = ["Resonance", "resonances_of"]

Put = Callable[[Scalar], Scalar]


@dataclass(frozen=True)
class Resonance:
    """A tone of an input that coincides with eigenvalues of A in one case.

    `input` is the place of the input; `tone` has the equations of the case put in, and its
    `size` - 1 is the highest power of the time in the input's own waves.  `multiplicity` is
    that of rate ± i frequency as eigenvalues of A.  `order` is the highest power t^k beside
    e^(rate t) in the particular response: `raised` = order - (size - 1) is what the
    coincidence adds, 0 where the input does not reach these eigenvalues.
    `rate` is the sign of the rate, which says whether the resonance is damped.
    `condition` is that of the case, in plain notation ("true" if there is none).
    """

    input: int
    tone: Tone
    multiplicity: int
    order: int
    rate: SignArgument
    condition: str = "true"

    @property
    def raised(self) -> int:
        """The powers of the time that the coincidence adds."""
        return self.order - (self.tone.size - 1)

    @property
    def damped(self) -> bool | None:
        """Whether the response decays all the same; None where the sign is not known."""
        if self.rate.values == {-1}:
            return True
        return None if -1 in self.rate.values else False


def resonances_of(
    model: DrivenModel,
    exponential: ExponentialMatrix,
    sign_of: Callable[[Scalar], SignArgument],
    *,
    put: Put = lambda element: element,
    relation: Scalar | None = None,
) -> tuple[Resonance, ...]:
    """Return the tones that coincide with eigenvalues of A, input by input.

    `exponential` is that of the stacked matrix in the case; `put` puts the equations of the
    case into elements, `relation` is the one that is kept, `sign_of` tells signs.
    Exact:   by division of polynomials, and by coefficients of e^(Mt) that are not zero.
    """
    field = model.field
    rows = model.reduction.matrix.to_list()
    matrix = field.matrix([[put(e) for e in row] for row in rows])
    characteristic = field.polynomial(matrix.charpoly())
    found = []
    for place, tones in enumerate(_tones_of(model, put)):
        for (rate, frequency), waves in tones.items():
            tone = Tone(rate, frequency, max(wave.power for wave in waves) + 1)
            multiplicity = _multiplicity(field, characteristic, tone, relation)
            if multiplicity:
                drive = Drive(field, (tone,), relation)
                order = _order(model, exponential, drive, place, waves, put)
                rate_sign = sign_of(rate)
                found.append(Resonance(place, tone, multiplicity, order, rate_sign))
    return tuple(found)


Tones = dict[tuple[Scalar, Scalar], list[Wave]]


def _tones_of(model: DrivenModel, put: Put) -> list[Tones]:
    """The waves of each input by rate and frequency in the case, those that vanish left out."""
    found = []
    for given in model.inputs:
        tones: Tones = {}
        for wave in (wave for burst in given.signal.bursts for wave in burst.waves):
            rate, frequency = put(wave.rate), put(wave.frequency)
            if not put(wave.amount) or (wave.kernel == "sin" and not frequency):
                continue
            key = (rate, -frequency) if (rate, -frequency) in tones else (rate, frequency)
            tones.setdefault(key, []).append(wave)
        found.append(tones)
    return found


def _multiplicity(
    field: BaseField, polynomial: Polynomial, tone: Tone, relation: Scalar | None
) -> int:
    """How often the roots rate ± i frequency are roots of a polynomial."""
    factor = field.polynomial([field.domain.one, -tone.rate])
    if tone.frequency:
        factor = factor**2 + field.polynomial([tone.frequency**2])
    count, rest = 0, polynomial
    while rest.degree() >= factor.degree():
        if not all(vanishes_under(c, relation) for c in rest.rem(factor).to_list()):
            break
        count, rest = count + 1, rest.quo(factor)
    return count


def _order(
    model: DrivenModel,
    exponential: ExponentialMatrix,
    drive: Drive,
    place: int,
    waves: Sequence[Wave],
    put: Put,
) -> int:
    """The highest power of the time beside the tone in the response to one of the waves."""
    field, n = model.field, len(model.names)
    if model.generator is None:
        raise ValueError("a model without waves has no particular response")
    highest = 0
    for wave in waves:
        start = model.generator.start(place, wave).to_list()
        column = [[field.domain.zero] for _ in range(n)] + [[put(e)] for (e,) in start]
        for term in exponential.times(field.matrix(column)).terms:
            if drive.tone_of(term.factor.p) is None:
                continue
            for j, residue in enumerate(term.residues):
                entries = (m[i, 0].element for m in residue.coefficients for i in range(n))
                if not all(vanishes_under(e, drive.relation) for e in entries):
                    highest = max(highest, j)
    return highest
