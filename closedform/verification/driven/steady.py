"""Stability, and the steady state: what stays, what decays, amplitude and phase."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from functools import partial

from flint import arb, arb_mat, ctx

from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.waves import Wave
from closedform.notation import enclose as enclose_formula
from closedform.notation import plain, read_formula
from closedform.notation.errors import FormulaError
from closedform.notation.expression import Expression
from closedform.response.driven.phasor import Phasor, Sinusoid
from closedform.response.driven.polar import Angle
from closedform.verification.comparison import AGREED, Pair, check_of, compared
from closedform.verification.driven.grounds import Ground
from closedform.verification.driven.identities import Residual, identity_check
from closedform.verification.driven.parts import is_of_inputs
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import Enclose, TimedSum, wave_sum
from closedform.verification.record import Check, Outcome

__all__ = ["phasor_checks", "stability_check", "steady_checks"]

_BITS = 512


def stability_check(setting: Setting) -> Check:
    """The verdict, against Hurwitz's minors of det(sI - A) in balls at points of the case.

    Not essential: the signs of elements on which it rests stand beside it.
    """
    item, stability = "stability", setting.solution.stability
    a = setting.matrix(setting.model.reduction.matrix.to_list())
    characteristic = setting.field.polynomial(a.charpoly())
    if tuple(characteristic.to_list()) != stability.characteristic:
        return Check(item, "refuted", "the characteristic polynomial is another")
    if stability.verdict == "undecided":
        return Check(item, "not attempted", "the verdict is left open", essential=False)
    for ground in setting.grounds:
        decay = _decays(ground, characteristic)
        wrong = decay is not True if stability.verdict == "stable" else decay is True
        if decay is None and stability.verdict == "stable":
            return Check(item, "not attempted", f"not settled{ground.told}", essential=False)
        if wrong:
            return Check(item, "refuted", f"the model is not {stability.verdict}{ground.told}")
    told = "all roots have" if stability.verdict == "stable" else "not all roots have"
    how = f"{told} a negative real part by Hurwitz's minors in ball arithmetic"
    return Check(item, "enclosed", how, essential=False)


def _decays(ground: Ground, p: Polynomial) -> bool | None:
    """Whether all roots have a negative real part; None where balls do not tell.

    They have if and only if the leading minors of Hurwitz's matrix are positive
    (A. Hurwitz, Ueber die Bedingungen, unter welchen eine Gleichung nur Wurzeln mit
    negativen reellen Theilen besitzt, 1895); repeated roots make no difference.
    """
    with ctx.workprec(_BITS):
        enclose = ground.enclose()
        c, d = [enclose(e) for e in p.to_list()], int(p.degree())
        rows = [
            [c[2 * k - i + 1] if 0 <= 2 * k - i + 1 <= d else arb(0) for k in range(d)]
            for i in range(d)
        ]
        minors = [arb_mat([row[:k] for row in rows[:k]]).det() for k in range(1, d + 1)]
    if all(minor > 0 for minor in minors):
        return True
    return False if any(minor < 0 for minor in minors) else None


# --- what stays and what decays ------------------------------------------------------------


def steady_checks(setting: Setting) -> Iterator[Check]:
    """Yield the check that what stays and what decays make the last interval, and do so."""
    functions = setting.solution.functions
    if functions.steady is None or functions.transient is None:
        return
    steady, transient = setting.total(functions.steady), setting.total(functions.transient)
    item = "steady + transient = x"

    def residuals() -> Iterator[Residual]:
        last = setting.last
        yield Residual("steady + transient", last, setting.wholes[last] - steady - transient)
        own = [p for p in setting.factors if is_of_inputs(setting, p)]
        others = {key: r for key, r in steady.parts.items() if key[2] not in own}
        rest = TimedSum(setting.field, steady.rows, others)
        yield Residual("what is steady at other exponents", last, rest)

    check = identity_check(
        setting,
        item,
        residuals(),
        "both make the last interval, coefficient by coefficient; what is steady has exponents "
        "of the inputs alone, none with a negative real part, and those of the rest have one",
    )
    if check.outcome == "proved":
        fault = _fate_fault(setting, steady, transient)
        check = check if fault is None else Check(item, fault[0], fault[1])
    yield check


def _fate_fault(
    setting: Setting, steady: TimedSum, transient: TimedSum
) -> tuple[Outcome, str] | None:
    """What is wrong with the real parts of the exponents, in words, or None."""
    for function, signs in ((steady, {0, 1}), (transient, {-1})):
        for p in _exponents(setting, function):
            found = [_decays(ground, p) for ground in setting.grounds]
            known = _rate_signs(setting, p)
            if known is not None:
                if not known <= signs:
                    return ("not attempted", "the sign of an exponent was not decided")
            elif signs == {-1} and not all(decay is True for decay in found):
                outcome: Outcome = "refuted" if False in found else "not attempted"
                return (outcome, "an exponent of what decays has no negative real part")
    return None


def _exponents(setting: Setting, function: TimedSum) -> list[Polynomial]:
    found: dict[Polynomial, None] = {}
    for key, residues in function.parts.items():
        one = TimedSum(setting.field, function.rows, {key: residues})
        if one.fault(setting.vanishes) is not None:
            found[key[2]] = None
    return list(found)


def _rate_signs(setting: Setting, p: Polynomial) -> set[int] | None:
    """The signs that the real part of the roots may have, where it is one of the inputs' rates."""
    if not is_of_inputs(setting, p):
        return None
    degree = p.degree()
    rate = -p.nth(degree - 1) / setting.field.domain.convert(degree)
    return setting.signs_of(rate)


# --- amplitude and phase -------------------------------------------------------------------


def phasor_checks(setting: Setting) -> Iterator[Check]:
    """Yield the checks of amplitudes and phases: the sums they stand for, and their formulas."""
    phasors = [phasor for phasor in setting.solution.phasors if phasor is not None]
    functions = setting.solution.functions
    if not phasors or functions.steady is None:
        return
    steady = setting.total(functions.steady)

    def residuals() -> Iterator[Residual]:
        for phasor in phasors:
            own = steady.after(setting.selecting([phasor.row]))
            yield Residual(
                f"the steady state of {setting.model.rows[phasor.row]}",
                setting.last,
                own - _sum_of(setting, phasor),
            )

    yield identity_check(
        setting,
        "sinusoids of the steady state",
        residuals(),
        "mean values, cosines and sines make the steady state, coefficient by coefficient",
    )
    yield _amplitude_check(setting, phasors)


def _sum_of(setting: Setting, phasor: Phasor) -> TimedSum:
    zero = setting.field.domain.zero
    waves = [Wave(phasor.mean, 0, zero, "one", zero, zero)]
    for s in phasor.sinusoids:
        waves.append(Wave(s.cosine, 0, zero, "cos", s.frequency, s.origin))
        waves.append(Wave(s.sine, 0, zero, "sin", s.frequency, s.origin))
    total = setting.nothing(1)
    for wave in waves:
        total = total + wave_sum(setting.field, setting.factors, setting.vanishes, wave)
    return total


Value = Callable[[Expression], arb]
"""What gives a ball for a formula."""
Evaluated = Callable[[Enclose, Value], Pair]


def _amplitude_check(setting: Setting, phasors: Sequence[Phasor]) -> Check:
    item = "amplitudes and phases as written"
    asked: dict[str, Evaluated] = {}
    try:
        for phasor in phasors:
            name = setting.model.rows[phasor.row]
            mean = _read_back(setting, phasor.mean_formula)
            asked[f"the mean value of {name}"] = partial(_mean, mean, phasor.mean)
            for number, s in enumerate(phasor.sinusoids, start=1):
                asked |= dict(_of_sinusoid(setting, f"sinusoid {number} of {name}", s))
    except FormulaError as error:  # its text is longer or deeper than what is read
        return Check(item, "not attempted", f"a formula was not read back: {error}")

    def pairs(ground: Ground, names: Sequence[str]) -> Iterator[Pair]:
        enclose, known = ground.enclose(), ground.balls()
        for name in names:
            yield asked[name](enclose, lambda formula: enclose_formula(formula, known))

    return check_of(
        item,
        (compared(asked, partial(pairs, g), where=g.told) for g in setting.grounds),
        f"read back from their text; amplitude times cosine and sine of the phase agree {AGREED} "
        "with the weights of cosine and sine, and so do gain and lag with the input",
    )


def _read_back(setting: Setting, formula: Expression) -> Expression:
    return read_formula(plain(formula), names=setting.names)


def _mean(formula: Expression, mean: Scalar, enclose: Enclose, value: Value) -> Pair:
    return value(formula), enclose(mean)


def _of_sinusoid(setting: Setting, told: str, s: Sinusoid) -> Iterator[tuple[str, Evaluated]]:
    amplitude = _read_back(setting, s.amplitude)
    angles = _angles(setting, s.phase)
    for way, angle in angles.items():
        yield f"{told}, cosine{way}", partial(_part, amplitude, angle, s.cosine, "cos")
        yield f"{told}, sine{way}", partial(_part, amplitude, angle, s.sine, "sin")
    if s.sine_phase is not None:
        for way, angle in _angles(setting, s.sine_phase).items():
            by = f"{told}, by the sine{way}"
            yield f"{by}, cosine", partial(_part, amplitude, angle, -s.cosine, "sin")
            yield f"{by}, sine", partial(_part, amplitude, angle, s.sine, "cos")
    if s.lag is None:
        return
    waves = [
        w
        for w in setting.waves_on(s.lag.input, setting.last)
        if w.kernel != "one" and not w.rate and _is_of(setting, w, s)
    ]
    zero = setting.field.domain.zero
    cosine = sum((w.amount for w in waves if w.kernel == "cos"), zero)
    sine = zero
    for w in waves:
        if w.kernel == "sin":
            sine += w.amount if setting.vanishes(w.frequency - s.frequency) else -w.amount
    gain = _read_back(setting, s.lag.gain)
    for way, angle in _angles(setting, s.lag.angle).items():
        own = _Lag(gain, angle, cosine, sine)
        yield f"{told}, gain and lag{way}", partial(own.pair, s.cosine, "cos")
        yield f"{told}, lag and gain{way}", partial(own.pair, s.sine, "sin")


def _is_of(setting: Setting, wave: Wave, s: Sinusoid) -> bool:
    """Whether a wave has the frequency of a sinusoid and counts from its origin."""
    if not setting.vanishes(wave.origin - s.origin):
        return False
    own = wave.frequency
    return setting.vanishes(own - s.frequency) or setting.vanishes(own + s.frequency)


def _angles(setting: Setting, angle: Angle) -> dict[str, Callable[[Value], arb]]:
    """The ways in which an angle is written."""
    above, beside = _read_back(setting, angle.above), _read_back(setting, angle.beside)
    found: dict[str, Callable[[Value], arb]] = {
        "": lambda value: arb.atan2(value(above), value(beside))
    }
    if angle.arc is not None:
        turn, direction, ratio = angle.arc
        read = _read_back(setting, ratio)
        found[" by its arc"] = lambda value: (
            arb.pi() * turn.numerator / turn.denominator + direction * value(read).atan()
        )
    return found


def _part(
    amplitude: Expression,
    angle: Callable[[Value], arb],
    expected: Scalar,
    kernel: str,
    enclose: Enclose,
    value: Value,
) -> Pair:
    phi = angle(value)
    turned = phi.cos() if kernel == "cos" else phi.sin()
    return value(amplitude) * turned, enclose(expected)


@dataclass(frozen=True)
class _Lag:
    """gain times the input cosine · cos + sine · sin, turned by an angle."""

    gain: Expression
    angle: Callable[[Value], arb]
    cosine: Scalar
    sine: Scalar

    def pair(self, expected: Scalar, kernel: str, enclose: Enclose, value: Value) -> Pair:
        """Return the part of it with a kernel, and what this has to be."""
        phi, u, v = self.angle(value), enclose(self.cosine), enclose(self.sine)
        part = u * phi.cos() - v * phi.sin() if kernel == "cos" else u * phi.sin() + v * phi.cos()
        return value(self.gain) * part, enclose(expected)
