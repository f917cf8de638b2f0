"""Resonance: which tones of the inputs are eigenvalues of A, how often, and what that adds.

A tone has k of them if p^k divides det(sI - A) and p^(k+1) does not, p the polynomial of its
roots.  The powers of the time in the response to a wave are read off the exponential of the
stacked matrix, begun with the derivatives of the wave at its origin.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from closedform.algebra.field import Polynomial
from closedform.algebra.waves import Wave
from closedform.model.driven.generator import Tone
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import wave_sum
from closedform.verification.record import Check
from closedform.verification.residuals import first_nonzero_over_roots

__all__ = ["resonance_check"]


@dataclass(frozen=True)
class _Met:
    """A tone of the input at `place` that A has as eigenvalues."""

    place: int
    tone: Polynomial
    multiplicity: int
    size: int
    order: int


def resonance_check(setting: Setting) -> Check:
    """Every resonance that is told of is one, and none is left out."""
    item = "resonance"
    told = list(setting.solution.resonances)
    for met in _met(setting):
        own = [r for r in told if r.input == met.place and _is_tone(setting, met.tone, r.tone)]
        if len(own) != 1:
            return Check(item, "refuted", f"a tone of input {met.place + 1} is not told of once")
        (resonance,) = own
        told.remove(resonance)
        found = (resonance.multiplicity, resonance.tone.size, resonance.order)
        if found != (met.multiplicity, met.size, met.order):
            how = f"multiplicity, size or order of a tone of input {met.place + 1} is another"
            return Check(item, "refuted", how)
        if not setting.signs_of(resonance.tone.rate) <= set(resonance.rate.values):
            return Check(item, "refuted", f"the sign of a rate of input {met.place + 1} is another")
    if told:
        how = f"a tone of input {told[0].input + 1} is no eigenvalue, or no tone of it"
        return Check(item, "refuted", how)
    count = len(setting.solution.resonances)
    return Check(
        item,
        "proved",
        f"every tone of every input was put to det(sI - A): {count or 'none'} "
        f"{'is' if count == 1 else 'are'} among its roots",
    )


def _met(setting: Setting) -> Iterator[_Met]:
    a = setting.matrix(setting.model.reduction.matrix.to_list())
    characteristic = setting.field.polynomial(a.charpoly())
    for place in range(len(setting.model.inputs)):
        waves = [w for w in _waves(setting, place) if not _is_silent(setting, w)]
        tones: dict[Polynomial, list[Wave]] = {}
        for wave in waves:
            tones.setdefault(_tone(setting, wave), []).append(wave)
        for p, own in tones.items():
            count = 0
            while _divides(setting, p ** (count + 1), characteristic):
                count += 1
            if count:
                order = max(_order(setting, place, p, wave) for wave in own)
                yield _Met(place, p, count, max(w.power for w in own) + 1, order)


def _waves(setting: Setting, place: int) -> list[Wave]:
    """The waves of an input, each in the time from its origin."""
    zero, put = setting.field.domain.zero, setting.put
    return [
        Wave(put(w.amount), w.power, put(w.rate), w.kernel, put(w.frequency), zero)
        for burst in setting.model.inputs[place].signal.bursts
        for w in burst.waves
    ]


def _is_silent(setting: Setting, wave: Wave) -> bool:
    return not wave.amount or (wave.kernel == "sin" and setting.vanishes(wave.frequency))


def _tone(setting: Setting, wave: Wave) -> Polynomial:
    p = setting.field.polynomial([setting.field.domain.one, -wave.rate])
    if setting.vanishes(wave.frequency):
        return p
    return p**2 + setting.field.polynomial([wave.frequency**2])


def _is_tone(setting: Setting, p: Polynomial, tone: Tone) -> bool:
    zero = setting.field.domain.zero
    other = _tone(setting, Wave(zero, 0, tone.rate, "cos", tone.frequency, zero))
    return bool(other == p)


def _divides(setting: Setting, p: Polynomial, polynomial: Polynomial) -> bool:
    if p.degree() > polynomial.degree():
        return False
    return all(setting.vanishes(c) for c in polynomial.rem(p).to_list())


def _order(setting: Setting, place: int, p: Polynomial, wave: Wave) -> int:
    """The highest power of the time that the states have at the exponents of a wave."""
    generator, field = setting.model.generator, setting.field
    if generator is None:
        raise ValueError("a wave has a generator")
    zero = field.domain.zero
    size, first, n = generator.orders[place], generator.first[place], setting.states
    column = [[zero] for _ in range(int(setting.exponential.shape[0]))]
    derivative = wave_sum(field, setting.factors, setting.vanishes, wave)
    for k in range(size):
        parts = [r[0].trace_form().to_list()[0][0] for r in derivative.parts.values()]
        column[n + first + k] = [sum(parts, zero)]
        derivative = derivative.derivative()
    function = setting.transition.times(field.matrix(column))
    return max(
        (
            j
            for term in function.terms
            if _divides(setting, term.factor.p, p)
            for j, residue in enumerate(term.residues)
            if first_nonzero_over_roots(residue, setting.vanishes) is not None
        ),
        default=0,
    )
