"""From the text of an equation to its two sides, and formulas in what depends on the time.

Primes are derivatives with respect to the time: x'' or x''(t).  An unknown or an input may
have an instant in brackets, as u(t - 2); with exactly the time there it is the name itself.
step(t - a) is 0 before the instant a and 1 from it on, delta(t - a) the unit impulse at a.
`delta` may also be the name of something else: it is the impulse where a bracket follows.
"""

from __future__ import annotations

import re

from closedform.errors import Place
from closedform.notation.errors import FormulaSyntaxError
from closedform.notation.expression import Expression
from closedform.notation.reader import NOWHERE, place_of, read_with
from closedform.notation.timed_mistakes import DIFFERENTIAL, EQUALS_MISTAKES
from closedform.notation.vocabulary import Vocabulary

__all__ = ["read_equation", "read_jet_formula", "read_signal_formula"]

RUN = re.compile("[<>=!:≤≥≠]+")


def read_equation(
    text: str,
    *,
    time: str,
    constants: frozenset[str],
    functions: frozenset[str] | None,
    place: Place = NOWHERE,
) -> tuple[Expression, Expression]:
    """Return what stands on the left and on the right of the equals sign.

    `constants` are the names that stand for numbers (parameters), `functions` those that
    depend on the time (unknowns and inputs); None means every other name, where the unknowns
    are yet to be found.  `place` is as for `read_formula`.

    A derivative is the node Name("x''"), with plain primes.  Input and unknown at another
    instant, unit step and impulse are Call("u'", …), Call("step", …), Call("delta", …).

    Raises:  FormulaSyntaxError unless there is one sign = with a formula on either side, and
             what `read_formula` raises.

    >>> read_equation("x'(t) = u", time="t", constants=frozenset(), functions=None)
    (Name(text="x'"), Name(text='u'))
    """
    runs = list(RUN.finditer(text))
    for run in runs:
        if run[0] != "=":
            raise _mistake(_kind(run[0]), text, run.start(), place, run[0])
    if len(runs) != 1:
        at = runs[1].start() if runs else len(text.rstrip())
        raise _mistake("several" if runs else "none", text, at, place, "")
    (run,) = runs
    left, right = text[: run.start()], text[run.end() :]
    if left.count("(") > left.count(")") and right.count("(") < right.count(")"):
        raise _mistake("bracketed", text, run.start(), place, "")
    if not left.strip() or not right.strip():
        raise _mistake("empty", text, run.start(), place, "")
    vocabulary = _vocabulary(time, constants, functions)
    return (
        _read(left, vocabulary, place_of(text, 0, place)),
        _read(right, vocabulary, place_of(text, run.end(), place)),
    )


def read_jet_formula(
    text: str,
    *,
    time: str,
    constants: frozenset[str],
    functions: frozenset[str] | None,
    place: Place = NOWHERE,
) -> Expression:
    """Return one formula in which derivatives may stand, as on one side of an equation.

    Raises what `read_equation` raises on account of a side.
    """
    return _read(text, _vocabulary(time, constants, functions), place)


def read_signal_formula(
    text: str, *, time: str, constants: frozenset[str], place: Place = NOWHERE
) -> Expression:
    """Return a formula in the time and in numbers, with unit steps and impulses.

    Raises what `read_formula` raises.

    >>> read_signal_formula("step(t)", time="t", constants=frozenset())
    Call(function='step', argument=Name(text='t'))
    """
    return read_with(text, Vocabulary(constants | {time}, time=time, signals=True), place)


def _vocabulary(
    time: str, constants: frozenset[str], functions: frozenset[str] | None
) -> Vocabulary:
    return Vocabulary(constants | {time}, functions, time, signals=True)


def _read(text: str, vocabulary: Vocabulary, place: Place) -> Expression:
    time = vocabulary.time
    if not vocabulary.knows(f"d{time}") or vocabulary.functions is None:
        found = re.search(DIFFERENTIAL % (re.escape(time), re.escape(time)), text)
        if found and f"d{time}" not in vocabulary.names:
            raise _mistake("differential", text, found.start(), place, found[0])
    return read_with(text, vocabulary, place)


def _kind(run: str) -> str:
    """Return which mistake a run of signs is that is no equals sign."""
    if run == "==":
        return "double"
    return "assigned" if run.strip(":=") == "" else "compared"


def _mistake(kind: str, text: str, offset: int, place: Place, found: str) -> FormulaSyntaxError:
    mistake, advice = EQUALS_MISTAKES[kind]
    return FormulaSyntaxError(place_of(text, offset, place), mistake, found, advice)
