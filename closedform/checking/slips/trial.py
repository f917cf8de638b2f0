"""A wrong member of a line, and trying whether another formula in its place mends the line."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field, replace
from fractions import Fraction

from flint import acb, acb_mat, arb, ctx

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.balls.enclosing import NoValueError, enclose_matrix, enclose_written
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import compare, has_decimals
from closedform.checking.judging.judge import judge
from closedform.checking.slips.measuring import distance, largest, real, size
from closedform.checking.slips.spots import Spot, Step, put, spots
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.checking.values.signs import both_signs
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Listing, Symbol, Written, walk

__all__ = ["BITS", "EXACTLY", "SPECTRAL_SAMPLE", "Candidate", "Effort", "Point", "Trial", "Values"]

BITS = 96
MOST_TRIED = 700
MOST_JUDGED = 24
MOST_JUDGED_ONLY = 60
EXACTLY = Fraction(1, 10**12)
ROUGHLY = Fraction(1, 40)
SPECTRAL_SAMPLE = Fraction(17, 13)
CLOSER = Fraction(2, 5)
"""With decimals a candidate has to be this much closer to the truth than what was written."""
OUTSIDE = (NoValueError, NotElementaryError, ArithmeticError)
Values = tuple[tuple[acb, ...], ...]
"""For each point, the entries of a value."""


@dataclass(frozen=True, slots=True)
class Point:
    """An instant and parameters: what every name is worth there, and the true entries."""

    names: dict[str, acb]
    true: tuple[acb, ...]


@dataclass(frozen=True, slots=True)
class Candidate:
    """Another formula for a member, the name of the slip that it would undo, and where that is."""

    name: str
    where: str
    tree: Written
    judged_only: bool = False
    """Whether balls are not to sort it out: it is near to what stands there."""


@dataclass(slots=True)
class Effort:
    """How much was tried so far."""

    seen: set[Written] = field(default_factory=set)
    judged: int = 0


@dataclass(frozen=True)
class Trial:
    """A member of a claim that is wrong, as a whole or in one entry.

    `tree` is it; `kept` the members beside it that are right, those before it if `leads` is
    negative, and after it otherwise.  `points` are what its value is first held against, by
    balls, empty if it has none; `roots` are the values of which any will do.  With one wrong
    entry, `tree` has that in the place of its matrix, `start` is the way to it, `entry` says
    which it is, and `back` puts it into the matrix again.
    """

    claim: Claim
    setting: Setting
    ground: Ground
    group: int
    tree: Written
    kept: tuple[Written, ...] = ()
    leads: bool = False
    points: tuple[Point, ...] = ()
    roots: tuple[acb, ...] = ()
    start: tuple[Step, ...] = ()
    entry: tuple[int, int] | None = None
    back: Callable[[Written], Written] = lambda tree: tree
    effort: Effort = field(default_factory=Effort)
    true: Value | None = None
    right: Written | None = None
    array: tuple[Step, ...] | None = None
    """The way to an array of which several entries are wrong."""
    invariant: acb | None = None
    """For J, what det(z I - J) is at a sample."""

    @property
    def shape(self) -> tuple[int, int]:
        """Rows and columns of its true value, 1 by 1 for a number or where there is none."""
        return self.true.shape if isinstance(self.true, ExactMatrix) else (1, 1)

    def own(self) -> Value | None:
        """Return the exact value of the member as written, None if it has none."""
        try:
            return self.setting.value(self.tree, self.ground)
        except (*OUTSIDE, NotJudgedError):
            return None

    def right_in_known_names(self) -> Written | None:
        """Return the right form in names that the line may use, None if there is none."""
        known = self.setting.ground.facts.names
        right = self.right
        if right is not None and {n.name for n in walk(right) if isinstance(n, Symbol)} <= known:
            return right
        return None if self.true is None else written_back(self.true)

    def equals(self, value: Value) -> bool:
        """Whether the member as written has a certain value, to the digits shown."""
        if not self.points or not self._is_near(value):
            return False
        scope = self.setting.scope_of(self.ground)
        opened = self.setting.opened(self.tree)
        loose = self.claim.approximate
        try:
            return compare(opened, value, scope, self.ground, approximate=loose).passes
        except (*OUTSIDE, NotJudgedError):
            return False

    def _is_near(self, value: Value) -> bool:
        entries = value.entries if isinstance(value, ExactMatrix) else (value,)
        balls = {name: ball.real for name, ball in self.points[0].names.items()}
        limit = real(ROUGHLY if self.loose else EXACTLY)
        with ctx.workprec(BITS):
            for point in self.points:
                own = self.value(self.tree, point)
                at = point.names[self.ground.truth.time]
                other = [entry.enclosure(at, balls) for entry in entries]
                if own is None or len(own) != len(other):
                    return False
                if not distance(own, other) <= limit * largest(own).max(largest(other)):
                    return False
        return True

    @property
    def loose(self) -> bool:
        """Whether rounded numbers stand in it."""
        return self.claim.approximate or has_decimals(self.tree)

    @property
    def spent(self) -> bool:
        """Whether enough was tried."""
        most = MOST_JUDGED if self.points or self.roots or self.invariant else MOST_JUDGED_ONLY
        return len(self.effort.seen) >= MOST_TRIED or self.effort.judged >= most

    def spots(self) -> Iterator[Spot]:
        """Yield the places at which it may be changed: not in one of several wrong entries."""
        for spot in spots(self.tree):
            entered = self.array is not None and len(spot.path) > len(self.array)
            hidden = entered and spot.path[: len(self.array or ())] == self.array
            if spot.path[: len(self.start)] == self.start and not hidden:
                yield spot

    def changed(self, spot: Spot, new: Written) -> Written:
        """Return it with another part at a place."""
        return put(self.tree, spot.path, new)

    def with_member(self, whole: Written) -> Claim:
        """Return the claim with another formula in the place of the wrong member."""
        values = (whole, *self.kept) if self.leads else (*self.kept, whole)
        groups = list(self.claim.groups)
        groups[self.group] = replace(groups[self.group], values=values)
        return replace(self.claim, groups=tuple(groups))

    def mends(self, candidate: Candidate) -> bool:
        """Whether the line holds with a formula in this place: by balls, then exactly."""
        tree = candidate.tree
        if tree in self.effort.seen or tree == self.tree or self.spent:
            return False
        self.effort.seen.add(tree)
        return (candidate.judged_only or self.near(tree)) and self.holds(tree)

    def holds(self, tree: Written) -> bool:
        """Whether the line is judged to hold with a formula in this place."""
        self.effort.judged += 1
        return judge(self.with_member(self.back(tree)), self.setting).passes

    def near(self, tree: Written) -> bool:
        """Whether a formula is the true one as far as balls tell."""
        with ctx.workprec(BITS):
            if self.roots:
                return self._near_roots(tree)
            if self.invariant is not None:
                return self._near_invariant(tree, self.invariant)
            return self._nearer(tree) if self.loose else self._is_there(tree)

    def _is_there(self, tree: Written) -> bool:
        """Whether a formula without decimals has the true value at all points."""
        for point in self.points:
            found = self.value(tree, point)
            if found is None or len(found) != len(point.true):
                return False
            scale = largest(point.true).max(largest(found))
            if not distance(found, point.true) <= scale * real(EXACTLY):
                return False
        return True

    def _nearer(self, tree: Written) -> bool:
        """Whether a formula with decimals is near the true value, and nearer than what stands."""
        far, before = arb(0), arb(0)
        for point in self.points:
            found, own = self.value(tree, point), self.value(self.tree, point)
            if found is None or len(found) != len(point.true):
                return False
            scale = largest(point.true) + arb(1) / 10**30
            off = distance(found, point.true) / scale
            if not off <= real(ROUGHLY):
                return False
            far = far.max(off)
            before = before.max(distance(own, point.true) / scale if own else arb(1))
        return not self.points or bool(far <= before * real(CLOSER))

    def _near_invariant(self, tree: Written, true: acb) -> bool:
        """Whether det(z I - J) is the true one at a sample z."""
        try:
            grid = enclose_matrix(self.setting.opened(tree), self.names)
        except OUTSIDE:
            return False
        if len(grid) != len(grid[0]):
            return False
        z = acb(real(SPECTRAL_SAMPLE))
        rows = [
            [(z if i == j else acb(0)) - e for j, e in enumerate(r)] for i, r in enumerate(grid)
        ]
        found = acb_mat(rows).det()
        limit = real(ROUGHLY if self.loose else EXACTLY)
        return bool(size(found - true) <= limit * size(true).max(size(found)))

    def _near_roots(self, tree: Written) -> bool:
        for form in _listed(self.setting.opened(tree)):
            try:
                value = enclose_written(form, self.names)
            except OUTSIDE:
                return False
            near = min((size(value - root) for root in self.roots), key=lambda r: r)
            limit = real(ROUGHLY if self.loose else EXACTLY)
            if not near <= limit * size(value).max(largest(self.roots)):
                return False
        return True

    @property
    def names(self) -> dict[str, acb]:
        """What the names are worth at the sample, the time not among them."""
        if self.points:
            return self.points[0].names
        return {name: acb(ball) for name, ball in self.setting.ground.sampled().items()}

    def value(self, tree: Written, point: Point) -> tuple[acb, ...] | None:
        """Return the entries of a formula at a point; None if it has none there."""
        return self.value_opened(self.setting.opened(tree), point)

    def value_opened(self, opened: Written, point: Point) -> tuple[acb, ...] | None:
        """Return the same of a formula in which the author's names are replaced."""
        try:
            if len(point.true) == 1:
                found: tuple[acb, ...] = (enclose_written(opened, point.names),)
            else:
                grid = enclose_matrix(opened, point.names)
                found = tuple(entry for row in grid for entry in row)
        except OUTSIDE:
            return None
        return found if all(value.is_finite() for value in found) else None

    def values(self, tree: Written) -> Values | None:
        """Return the entries of a formula at all points."""
        with ctx.workprec(BITS):
            found = [self.value(tree, point) for point in self.points]
        known = tuple(values for values in found if values is not None)
        return known if len(known) == len(found) else None


def _listed(tree: Written) -> Iterator[Written]:
    """Yield the values of a list, both where a sign is plus-or-minus."""
    if isinstance(tree, Listing):
        for item in tree.items:
            yield from _listed(item)
    else:
        yield from both_signs(tree)
