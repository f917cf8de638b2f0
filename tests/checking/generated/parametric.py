"""Derivations from templates: which lines, in which forms, right or with one slip."""
# ruff: noqa: FBT001, FBT003

from __future__ import annotations

from random import Random
from typing import Any

import mpmath

from tests.checking.generated import reference
from tests.checking.generated.form_slips import slipped
from tests.checking.generated.forms import F, put, value
from tests.checking.generated.lines import Derivation, Line
from tests.checking.generated.pen import pen_of
from tests.checking.generated.reference import Judge, close, far
from tests.checking.generated.template import Said, Template
from tests.checking.generated.templates import TEMPLATES

__all__ = ["parametric"]

POINTS = (mpmath.mpf(7) / 10, mpmath.mpf(29) / 10)


def parametric(seed: int, rng: Random) -> Derivation:
    """Return a derivation from one of the templates."""
    template = rng.choice(TEMPLATES)(rng)
    pen = pen_of(rng, template.names)
    pen.spectral = r"\lambda"
    chosen = [said for said in template.said if said.needed or rng.random() < 0.7]
    if template.kind == "stepped" or not chosen:
        chosen = list(template.said)
    lines = [_line(said, template, rng) for said in chosen]
    made = ""
    if rng.random() < 0.6:
        at = rng.randrange(len(lines))
        changed = slipped(lines[at], rng) if lines[at].says != "definition" else None
        if changed is not None:
            lines[at], made = changed, changed.slip
    return Derivation(
        seed, template.kind, template.text, tuple(line.written(pen) for line in lines), made
    )


def _line(said: Said, template: Template, rng: Random) -> Line:
    left = rng.choice(list(said.lefts)).replace("lambda", r"\lambda")
    form = rng.choice(list(said.forms))
    judge = _judge(said, template)
    right, _ = judge((form,), True)
    assert right, (template.kind, said.says, form)
    return Line(
        said.says,
        (left,),
        (form,),
        judge,
        subject=said.subject,
        stated=said.says != "definition" and rng.random() < 0.4,
        defines=said.needed,
    )


def _judge(said: Said, template: Template) -> Judge:
    def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
        right, plain = True, False
        with mpmath.workdps(reference.DIGITS):
            for sample in template.samples:
                for t in (*reference.INSTANTS, mpmath.mpf(31) / 10):
                    env = {**sample, "t": t, "lambda": t + POINTS[0]}
                    true = said.truth(env)
                    for member in members:
                        one, two = _compared(said, member, env, true, exact=exact)
                        right, plain = right and one, plain or two
        return right, plain

    return judge


def _compared(
    said: Said, member: F, env: dict[str, Any], true: Any, *, exact: bool
) -> tuple[bool, bool]:
    if said.says != "eigenvalues":
        try:
            found = value(member, env, exact=exact)
        except (ZeroDivisionError, ValueError):
            return False, True
        return close(found, true), far(found, true)
    middle, half = true
    found = [value(one, env, exact=exact) for one in _signs(member)]
    wanted = [middle + half, middle - half][: len(found)]
    straight = all(close(f, w) for f, w in zip(found, wanted, strict=True))
    turned = all(close(f, w) for f, w in zip(found, reversed(wanted), strict=True))
    return straight or turned, not (straight or turned)


def _signs(member: F) -> list[F]:
    """Return a formula with plus-or-minus as the two that it stands for."""
    found = [
        put(
            member,
            lambda f, sign=sign: (
                F("add", (f.args[0], f.args[1] if sign > 0 else F("neg", (f.args[1],))))
                if f.op == "pm"
                else None
            ),
        )
        for sign in (1, -1)
    ]
    return found if found[0] != found[1] else found[:1]
