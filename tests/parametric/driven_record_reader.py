"""An independent reader of the record of a driven model: is its solution one, and the only one?

From the record's JSON alone, at values of the parameters: x' = A x + B u inside each interval,
with the derivative taken of the formula itself; x as stated at the start; jumps where an
impulse strikes and nowhere else.  That is the initial value problem, and it has one solution.
Nothing of the package is used.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from fractions import Fraction
from itertools import pairwise
from typing import Any

from flint import arb, ctx

from tests.parametric.plain_reader import (
    DRIVEN_FUNCTIONS,
    Number,
    Tree,
    ball_of,
    names_in,
    parse,
    step,
    value,
)
from tests.parametric.record_reader import (
    DisagreementError,
    covering_cases,
    names_at,
    parameter_values,
)

__all__ = ["check_driven_record", "check_driven_texts", "jet"]

Record = Mapping[str, Any]
Jet = tuple[Number, Number]
"""A value and the derivative by the time."""

BITS = 400
DIGITS = 25
LATER = (Fraction(1, 3), Fraction(7, 5))
ONE = Fraction(1)
PERIODS = (1, 2, 5)
SHARES = (Fraction(1, 5), Fraction(2, 3))


def check_driven_record(
    record: Record, values: Mapping[str, Fraction | int | str] | None = None
) -> int:
    """Check all that the record says at values of the parameters; return how many cases hold.

    Raises DisagreementError.
    """
    with ctx.workprec(BITS):
        if "cases" not in record:
            known = {n: _decimal(e["value"]) for n, e in record["names"].items()}
            _check(record, record, known)
            return 1
        given = parameter_values(values or {})
        places = covering_cases(record, given)
        for place in places:
            case = record["cases"][place]
            _check(record, case, names_at(case, given))
        return len(places)


def check_driven_texts(record: Record) -> None:
    """Raise if a formula is not plain notation, or has a name that nothing defines."""
    time = record["time"]
    constants = {"pi", *record.get("parameters", {}), *record.get("restated", {})}
    for entry in record["inputs"].values():
        _names(entry["function"], {time, *constants})
        for impulse in entry["impulses"]:
            _names(impulse["amount"], constants)
            _names(impulse["at"], constants)
    for text in record["made_of"].values():
        _names(text, {*record["states"], *record["inputs"], *constants})
    for case in record.get("cases", (record,)):
        known = {time, *constants, *case["names"]}
        own = case.get("base", case)
        whole = [case] if "solution" in case else []
        for rows in (*whole, own, own["free"], own["forced"], *_optional(case), *_optional(own)):
            for text in (
                *rows["solution"],
                *rows["eliminated"].values(),
                *rows["outputs"].values(),
            ):
                _names(text, known)


def jet(tree: Tree, values: Mapping[str, Jet]) -> Jet:
    """Return the value of a formula and its derivative by the time; that of a step is 0."""
    zero = Fraction(0)
    if tree.kind in {"number", "name"}:
        if tree.leaf in values:
            return values[tree.leaf]
        return value(tree, {}), zero
    parts = [jet(part, values) for part in tree.parts]
    (a, da), (b, db) = parts[0], parts[-1]
    match tree.kind:
        case "neg":
            return -a, -da
        case "+":
            return _add(a, b), _add(da, db)
        case "-":
            return _add(a, -b), _add(da, -db)
        case "*":
            return _mul(a, b), _add(_mul(da, b), _mul(a, db))
        case "/":
            whole = _div(a, b)
            return whole, _div(_add(da, -_mul(whole, db)), b)
        case "^":
            if not isinstance(b, Fraction) or b.denominator != 1 or db != 0:
                raise DisagreementError("a power with an exponent that is not whole")
            n = int(b)
            return a**n, _mul(_mul(b, a ** (n - 1) if n else zero), da)
        case "step":
            return step(a), zero
    return _called(tree.kind, a, da)


def _called(name: str, a: Number, da: Number) -> Jet:
    x = ball_of(a)
    match name:
        case "exp":
            found, slope = x.exp(), x.exp()
        case "sin":
            found, slope = x.sin(), x.cos()
        case "cos":
            found, slope = x.cos(), -x.sin()
        case "sinh":
            found, slope = x.sinh(), x.cosh()
        case "cosh":
            found, slope = x.cosh(), x.sinh()
        case "sqrt":
            found = x.sqrt()
            slope = 1 / (2 * found) if da != 0 else arb(0)
        case _:
            raise DisagreementError(f"{name} has no value")
    return found, _mul(slope, da)


def _add(a: Number, b: Number) -> Number:
    return a + b if isinstance(a, Fraction) == isinstance(b, Fraction) else ball_of(a) + ball_of(b)


def _mul(a: Number, b: Number) -> Number:
    if a == 0 or b == 0:
        return Fraction(0)
    return a * b if isinstance(a, Fraction) == isinstance(b, Fraction) else ball_of(a) * ball_of(b)


def _div(a: Number, b: Number) -> Number:
    return a / b if isinstance(a, Fraction) == isinstance(b, Fraction) else ball_of(a) / ball_of(b)


def _decimal(text: str) -> Number:
    """A rounded decimal as a ball around the number; one that may be exact, too."""
    middle = arb(text)
    return middle + arb(0, abs(middle) * arb(10) ** -39)


def _optional(case: Record) -> list[Record]:
    found = [case[key] for key in ("steady_state", "transient") if key in case]
    return [*found, *case.get("pieces", ())]


def _names(text: str, allowed: set[str]) -> None:
    strange = names_in(parse(text, DRIVEN_FUNCTIONS)) - allowed
    if strange:
        raise DisagreementError(f"{text!r} uses {', '.join(sorted(strange))}")


# --- one case -----------------------------------------------------------------------------------


def _check(record: Record, case: Record, known: Mapping[str, Number]) -> None:
    own = case.get("base", case)
    here = _Case(record, own, known)
    told = [_Periodic(here, own) for own in case.get("periodic", ())]
    for periodic in told:
        periodic.check()
    names = [name for periodic in told for name in periodic.inputs]
    if sorted(names) != sorted(set(record["inputs"]) - set(here.inputs)):
        raise DisagreementError(f"{', '.join(names) or 'none'} of the inputs that repeat are told")
    instants = [here.number(text) for text in (record["start"], *record["instants"])]
    if told and "solution" in case:
        _check_whole(here, case, told)
    pieces = own.get("pieces", [{**own, "from": record["start"], "to": None}])
    if len(pieces) != len(instants):
        raise DisagreementError(f"{len(instants)} intervals, but {len(pieces)} pieces")
    here.starts(pieces[0], instants[0])
    for condition in record.get("at_points", ()):
        here.meets(condition, pieces, instants)
    for (before, after), at in zip(pairwise(pieces), instants[1:], strict=True):
        here.joins(before, after, at)
    for k, (piece, begun) in enumerate(zip(pieces, instants, strict=True)):
        last = k + 1 == len(instants)
        inside = (
            [_add(begun, later) for later in LATER]
            if last
            else [_add(begun, _mul(_add(instants[k + 1], -begun), share)) for share in SHARES]
        )
        for t in inside:
            here.holds(piece, t)
            if last:
                here.parts(piece, t)


def _check_whole(here: _Case, case: Record, told: Sequence[_Periodic]) -> None:
    """One formula for all times: what does not repeat, and what repeats."""
    instants = [
        _add(periodic.start, _mul(_add(Fraction(n), share), periodic.period))
        for periodic in told
        for n in range((periodic.own.get("count") or 1) + 2)
        for share in SHARES
    ]
    for t in instants:
        for kind in ("solution", "eliminated", "outputs"):
            expected = here.values(_texts(here.case[kind]), t)
            for periodic in told:
                expected = _sums(expected, periodic.added(kind, t))
            here.same(here.values(_texts(case[kind]), t), expected, f"{kind} for all times")


class _Case:
    """A case with its names: what it says at an instant."""

    def __init__(self, record: Record, case: Record, known: Mapping[str, Number]) -> None:
        self.record, self.case, self.known = record, case, known
        self.matrix = [[self.number(e) for e in row] for row in record["matrix"]]
        self.inputs = {
            name: entry for name, entry in record["inputs"].items() if "repeat" not in entry
        }
        self.feed = self.columns(self.inputs)

    def columns(self, names: Iterable[str]) -> list[list[Number]]:
        """The columns of the input matrix that belong to these inputs."""
        places = [list(self.record["inputs"]).index(name) for name in names]
        rows = self.record.get("input_matrix", [[] for _ in self.matrix])
        return [[self.number(row[k]) for k in places] for row in rows]

    def number(self, text: str) -> Number:
        return value(parse(text, DRIVEN_FUNCTIONS), self.known)

    def at(self, text: str, t: Number, **more: Jet) -> Jet:
        known: dict[str, Jet] = {name: (v, Fraction(0)) for name, v in self.known.items()}
        known |= more or {self.record["time"]: (t, Fraction(1))}
        return jet(parse(text, DRIVEN_FUNCTIONS), known)

    def values(self, texts: Sequence[str], t: Number) -> list[Number]:
        return [self.at(text, t)[0] for text in texts]

    def starts(self, first: Record, start: Number) -> None:
        """At the start the states are those stated, and what impulses there add."""
        if "initial" in self.record:
            stated = [self.number(text) for text in self.record["initial"]]
            expected = _sums(stated, self.blows(start))
            self.same(self.values(first["solution"], start), expected, "the start")
            free = self.values(self.case["free"]["solution"], start)
            self.same(free, stated, "the free response at the start")

    def meets(
        self, condition: Record, pieces: Sequence[Record], instants: Sequence[Number]
    ) -> None:
        """A condition holds at its instant, just before what strikes there."""
        at = self.number(condition["at"])
        begun = [k for k, start in enumerate(instants) if ball_of(_add(at, -start)) > 0]
        states = self.values(pieces[max(begun, default=0)]["solution"], at)
        if not begun:
            states = _sums(states, [-x for x in self.blows(at)])
        found = _times([[self.number(w) for w in condition["of_states"]]], states)
        self.same(found, [self.number(condition["value"])], condition["written"])

    def joins(self, before: Record, after: Record, at: Number) -> None:
        """At a switching the states go on, but for what impulses add."""
        earlier = self.values(before["solution"], at)
        expected = _sums(earlier, self.blows(at))
        self.same(self.values(after["solution"], at), expected, "a switching")

    def blows(self, at: Number) -> list[Number]:
        return _times(self.feed, self.struck(self.inputs, at))

    def struck(self, inputs: Mapping[str, Any], at: Number) -> list[Number]:
        """What strikes at an instant, by input."""
        amounts: list[Number] = []
        for entry in inputs.values():
            total: Number = Fraction(0)
            for impulse in entry["impulses"]:
                gap = _add(self.number(impulse["at"]), -at)
                if (isinstance(gap, Fraction) and gap == 0) or (
                    isinstance(gap, arb) and gap.contains(0)
                ):
                    total = _add(total, self.number(impulse["amount"]))
            amounts.append(total)
        return amounts

    def holds(self, piece: Record, t: Number) -> None:
        """Inside an interval: the equation, and every way to say what the solution is."""
        jets = [self.at(text, t) for text in piece["solution"]]
        states = [x for x, _ in jets]
        driven = [self.at(entry["function"], t)[0] for entry in self.inputs.values()]
        slopes = _sums(_times(self.matrix, states), _times(self.feed, driven))
        self.same([d for _, d in jets], slopes, f"x' = A x + B u at {t}")
        self.same(self.values(self.case["solution"], t), states, "the solution for all times")
        free = [self.at(text, t) for text in self.case["free"]["solution"]]
        unfed = _times(self.matrix, [x for x, _ in free])
        self.same([d for _, d in free], unfed, "the free response")
        forced = self.values(self.case["forced"]["solution"], t)
        self.same(_sums([x for x, _ in free], forced), states, "free and forced")
        self.made_of(piece, t, states, driven)

    def made_of(
        self, piece: Record, t: Number, states: Sequence[Number], driven: Sequence[Number]
    ) -> None:
        """Eliminated unknowns and outputs are what they are made of."""
        if len(self.inputs) != len(self.record["inputs"]):
            return
        known = dict(self.known) | dict(zip(self.record["states"], states, strict=True))
        known |= dict(zip(self.inputs, driven, strict=True))
        for name, text in self.record["made_of"].items():
            kind = "outputs" if name in piece["outputs"] else "eliminated"
            expected = value(parse(text, DRIVEN_FUNCTIONS), known)
            found = [self.at(rows[kind][name], t)[0] for rows in (piece, self.case)]
            self.same(found, [expected] * 2, name)

    def parts(self, piece: Record, t: Number) -> None:
        """In the last interval: the steady state and the transient part add up."""
        if "steady_state" not in self.case:
            return
        for kind in ("solution", "eliminated", "outputs"):
            steady, transient, whole = (
                self.values(_texts(rows[kind]), t)
                for rows in (self.case["steady_state"], self.case["transient"], piece)
            )
            self.same(_sums(steady, transient), whole, "steady and transient")
        self.sinusoids(t)

    def sinusoids(self, t: Number) -> None:
        """Amplitudes and phases say what the steady state does."""
        steady = self.case["steady_state"]
        formulas = dict(zip(self.record["states"], steady["solution"], strict=True))
        formulas |= steady["eliminated"] | steady["outputs"]
        for name, told in steady["sinusoids"].items():
            total = self.number(told["mean"])
            for term in told["terms"]:
                since = _add(t, -self.number(term["origin"]))
                angle = ball_of(_mul(self.number(term["frequency"]), since))
                cosine, sine = self.direction(term["phase"])
                turned = angle.cos() * cosine + angle.sin() * sine
                total = _add(total, _mul(self.number(term["amplitude"]), turned))
            self.same([total], self.values([formulas[name]], t), f"the sinusoids of {name}")

    def direction(self, angle: Mapping[str, str]) -> tuple[arb, arb]:
        """Cosine and sine of the angle of a point."""
        x, y = (ball_of(self.number(angle[key])) for key in ("x", "y"))
        size = (x * x + y * y).sqrt()
        return x / size, y / size

    def same(self, found: Sequence[Number], expected: Sequence[Number], what: str) -> None:
        scale = max((abs(ball_of(v)) for v in expected), default=arb(0), key=float)
        for k, (ours, theirs) in enumerate(zip(found, expected, strict=True), start=1):
            gap = abs(ball_of(ours) - ball_of(theirs))
            if not gap < arb(10) ** -DIGITS * (1 + scale):
                raise DisagreementError(
                    f"{what}: {k} is {ball_of(ours).str(15)}, not {ball_of(theirs).str(15)}"
                )


class _Periodic:
    """What inputs that repeat add: from rest, the equation in every period, and the joins."""

    def __init__(self, here: _Case, own: Record) -> None:
        self.here, self.own = here, own
        self.start, self.period = here.number(own["start"]), here.number(own["period"])
        self.inputs = {name: here.record["inputs"][name] for name in own["inputs"]}
        for name, entry in self.inputs.items():
            if any(
                entry["repeat"].get(key) != own.get(key) for key in ("period", "start", "count")
            ):
                raise DisagreementError(f"{name} repeats in another way")
        self.feed = here.columns(self.inputs)
        self.bounds = [here.number(s["from"]) for s in own["stretches"]]
        self.ends = [here.number(s["to"]) for s in own["stretches"]]

    def check(self) -> None:
        here, count = self.here, self.own.get("count")
        here.same(self.states(0, 1, Fraction(0)), self.blows(Fraction(0)), "the first period")
        shown = [n for n in PERIODS if count is None or n < count]
        shown += [] if count is None else [count]
        for n in shown:
            for place, (low, high) in enumerate(zip(self.bounds, self.ends, strict=True)):
                for share in SHARES:
                    self.holds(place, n, _add(low, _mul(_add(high, -low), share)))
                if place:
                    before = self.states(place - 1, n, low)
                    expected = _sums(before, self.blows(low))
                    here.same(self.states(place, n, low), expected, f"within period {n}")
            last = self.states(len(self.bounds) - 1, n, self.period)
            if n == count:
                self.after(last, n)
            else:
                again = _sums(last, self.blows(Fraction(0)))
                here.same(self.states(0, n + 1, Fraction(0)), again, f"after period {n}")
        if "steady" in self.own:
            self.own = {**self.own, "stretches": self.own["steady"]}
            for place, low in enumerate(self.bounds):
                self.holds(place, 1, _add(low, _mul(_add(self.ends[place], -low), SHARES[0])))
            again = _sums(
                self.states(len(self.bounds) - 1, 1, self.period), self.blows(Fraction(0))
            )
            here.same(self.states(0, 1, Fraction(0)), again, "the periodic steady state")

    def added(self, kind: str, t: Number) -> list[Number]:
        """What is added at an instant that is no end of a part of a period."""
        here, since = self.here, _add(t, -self.start)
        rows = self.own["stretches"][0][kind]
        if ball_of(since) < 0:
            return [Fraction(0)] * len(rows)
        n = int(ball_of(_div(since, self.period)).mid().floor().unique_fmpz() or 0) + 1
        if n > self.own.get("count", n):
            return here.values(_texts(self.own["after"][kind]), t)
        local = _add(since, -_mul(Fraction(n - 1), self.period))
        place = max(k for k, low in enumerate(self.bounds) if not ball_of(_add(low, -local)) > 0)
        names = {self.own["number"]: (Fraction(n), Fraction(0)), self.own["local"]: (local, ONE)}
        texts = _texts(self.own["stretches"][place][kind])
        return [here.at(text, local, **names)[0] for text in texts]

    def jets(self, place: int, n: int, local: Number) -> list[Jet]:
        names = {self.own["number"]: (Fraction(n), Fraction(0)), self.own["local"]: (local, ONE)}
        texts = self.own["stretches"][place]["solution"]
        return [self.here.at(text, local, **names) for text in texts]

    def states(self, place: int, n: int, local: Number) -> list[Number]:
        return [x for x, _ in self.jets(place, n, local)]

    def blows(self, local: Number) -> list[Number]:
        struck = self.here.struck(self.inputs, _add(self.start, local))
        return _times(self.feed, struck)

    def holds(self, place: int, n: int, local: Number) -> None:
        jets = self.jets(place, n, local)
        at = _add(self.start, local)
        driven = [self.here.at(entry["function"], at)[0] for entry in self.inputs.values()]
        slopes = _sums(_times(self.here.matrix, [x for x, _ in jets]), _times(self.feed, driven))
        self.here.same([d for _, d in jets], slopes, f"the equation in period {n}")

    def after(self, last: Sequence[Number], count: int) -> None:
        """When all periods are over it goes on, driven by nothing."""
        end = _add(self.start, _mul(Fraction(count), self.period))
        texts = self.own["after"]["solution"]
        self.here.same(self.here.values(texts, end), last, "the end of all periods")
        jets = [self.here.at(text, _add(end, LATER[0])) for text in texts]
        slopes = _times(self.here.matrix, [x for x, _ in jets])
        self.here.same([d for _, d in jets], slopes, "the time after all periods")


def _texts(rows: Sequence[str] | Mapping[str, str]) -> list[str]:
    return list(rows.values()) if isinstance(rows, Mapping) else list(rows)


def _sums(first: Sequence[Number], second: Sequence[Number]) -> list[Number]:
    return [_add(a, b) for a, b in zip(first, second, strict=True)]


def _times(matrix: Sequence[Sequence[Number]], column: Sequence[Number]) -> list[Number]:
    found = []
    for row in matrix:
        total: Number = Fraction(0)
        for a, b in zip(row, column, strict=True):
            total = _add(total, _mul(a, b))
        found.append(total)
    return found
