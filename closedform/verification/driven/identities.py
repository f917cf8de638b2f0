"""Identities between functions of the time, interval by interval, as one check each.

What has to be zero is a `TimedSum`.  Where all its coefficients are zero it is proved.  Where
one is not, balls at instants of the interval may refute it; if they do not, it stays open.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from flint import ctx

from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import TimedSum
from closedform.verification.record import Check

__all__ = ["Residual", "identity_check"]

_BITS = 512


@dataclass(frozen=True)
class Residual:
    """What has to be zero in an interval; `told` says which identity it is of."""

    told: str
    interval: int
    function: TimedSum


def identity_check(setting: Setting, item: str, residuals: Iterable[Residual], how: str) -> Check:
    """Return the check that every residual is zero; `how` says what was done if all are.

    In `how` the word {count} stands for the number of identities.
    """
    count = 0
    left_open: str | None = None
    for residual in residuals:
        count += 1
        row = residual.function.fault(setting.vanishes)
        if row is None:
            continue
        where = f"{residual.told}{_counted(setting, residual.interval)}"
        if _differs(setting, residual):
            return Check(item, "refuted", f"{where} is not met")
        left_open = left_open or f"{where} was not shown to be met"
    if left_open is not None:
        return Check(item, "not attempted", left_open)
    return Check(item, "proved", how.format(count=count))


def _counted(setting: Setting, interval: int) -> str:
    return f" in interval {interval + 1}" if setting.last else ""


def _differs(setting: Setting, residual: Residual) -> bool:
    """Whether a row of a residual is certainly not zero at an instant of its interval."""
    with ctx.workprec(_BITS):
        for ground in setting.grounds:
            enclose, named = ground.enclose(), setting.named(ground)
            for t in setting.inside(residual.interval, enclose):
                values = residual.function.enclosure(enclose, t, named)
                if any(v.is_finite() and not v.contains(0) for v in values):
                    return True
    return False
