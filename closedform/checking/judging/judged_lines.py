"""The lines of a derivation judged one after another, and their verdicts."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass, replace

from closedform.checking.cases import Grounds
from closedform.checking.claim import Claim, SourceLine
from closedform.checking.judging.judge import judged
from closedform.checking.judging.judgement import Judgement, stated
from closedform.checking.recognising.conditions import grounds_meant, is_in_pieces
from closedform.checking.recognising.lines import ReadLine, read_line
from closedform.checking.recognising.meant import as_meant
from closedform.checking.recognising.naming import in_order
from closedform.checking.recognising.recognise import claims_of
from closedform.checking.slips import diagnosed, right_form
from closedform.checking.standing.author import Author
from closedform.checking.standing.facts import Facts
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.truth import Truth
from closedform.checking.verdict import LineVerdict, Slip, Word
from closedform.notation.written.tidied import tidied
from closedform.notation.written.tree import Statement, Symbol, Written, changed, walk

__all__ = ["JudgedLine", "judged_lines", "verdict_on"]

GRAVEST_FIRST: tuple[Word, ...] = (
    "fails",
    "not read",
    "carried",
    "holds to the digits shown",
    "holds up to order",
    "holds up to scale",
    "holds",
)
"""A line that says several things has the verdict of the gravest finding."""
MOST_PRODUCTS = 300_000
"""Products of constants for one line: some seconds of work."""
MOST_IN_ALL = 1_500_000
"""Products of constants for all lines: what is left then is not decided."""
MOST_NODES = 1_500
"""Parts of a line in which its slip is looked for."""


NO_CASE = "it is said under a condition that holds in no case of the model"


@dataclass(frozen=True, slots=True)
class JudgedLine:
    """A line as it was read, what was found of each of its claims, and in which setting.

    There is no judgement of a line that was not read.
    """

    read: ReadLine
    judgements: tuple[Judgement, ...]
    setting: Setting
    notes: tuple[str, ...] = ()

    @property
    def passes(self) -> bool:
        """Whether everything that it says may stand."""
        return bool(self.judgements) and all(j.finding.passes for j in self.judgements)

    @property
    def undecided(self) -> bool:
        """Whether something in it was not decided."""
        return any(j.finding.word == "not read" for j in self.judgements)


def judged_lines(lines: Sequence[SourceLine], truth: Truth, grounds: Grounds) -> list[JudgedLine]:
    """Judge lines in one case of the model, each in the light of those before it.

    A line that names a case of its own, in a comment or by a condition beside its formula, is
    judged in the cases that this allows, the first one in which it holds; one whose pieces the
    parameters tell apart has to hold in all cases.
    """
    ground = grounds.of(truth)
    read = [_read(line, ground.facts) for line in lines]
    author = Author(kept=ground.facts.names, time=ground.facts.time)
    found, left = [], MOST_IN_ALL
    for place, (as_read, claims) in enumerate(read):
        line = as_read
        later = tuple(claim for _, claims in read[place + 1 :] for claim in claims)
        own = grounds_meant(claims, ground, author, grounds)
        in_pieces = is_in_pieces(claims, author, ground)
        if in_pieces:
            own = grounds.all()
        if line.line.where:
            own = tuple(map(grounds.of, grounds.allowed(line.line.where, truth)))
        if not own:
            line, own = replace(line, reading=None, trouble=NO_CASE), (ground,)
        for candidate in own:
            granted = min(MOST_PRODUCTS, left)
            candidate.field.grant(granted)
            judged_line, after = _judged_line(line, Setting(candidate, author, later))
            left -= granted - candidate.field.granted
            if judged_line.passes != in_pieces:
                break
        author = after
        found.append(judged_line)
    return found


def _read(line: SourceLine, facts: Facts) -> tuple[ReadLine, tuple[Claim, ...]]:
    read = read_line(line, facts)
    if read.reading is None:
        return read, ()
    return read, _claims(read, read.reading.statements, facts)


def _claims(read: ReadLine, statements: tuple[Statement, ...], facts: Facts) -> tuple[Claim, ...]:
    return claims_of(read.line, statements, facts, of=read.of, at=read.at)


def _judged_line(read: ReadLine, setting: Setting) -> tuple[JudgedLine, Author]:
    """Judge a line as it is read first, or as it can also be read if it holds so only."""
    if read.reading is None:
        return JudgedLine(read, (), setting), setting.author
    facts, notes = setting.ground.facts, _ambiguities(read)
    best, author = _all(read, _claims(read, read.reading.statements, facts), setting, notes)
    if best.passes:
        return best, author
    for other in read.reading.others:
        found, after = _all(read, _claims(read, other, facts), setting, notes)
        if found.passes and not _gives_more_names(found, best):
            remark = "it holds as it can also be read"
            return replace(found, notes=(remark, *notes)), after
        if best.undecided and not found.undecided:
            best, author = found, after
    return best, author


def _gives_more_names(one: JudgedLine, other: JudgedLine) -> bool:
    """Whether one reading holds because it takes for a definition what another one judges."""
    counts = [sum(j.claim.says == "definition" for j in line.judgements) for line in (one, other)]
    return counts[0] > counts[1]


def _all(
    read: ReadLine, claims: tuple[Claim, ...], setting: Setting, notes: tuple[str, ...]
) -> tuple[JudgedLine, Author]:
    """Judge the claims of a line: first what gives names, then the rest, in order."""
    placed, author = list[tuple[int, Judgement]](), setting.author
    later = (*claims, *setting.later)
    for claim in in_order(claims, setting.ground.facts):
        own = replace(setting, author=author, later=later)
        found = judged(as_meant(claim, own), own)
        placed.append((claims.index(claim), found))
        author = stated(author, found)
    placed.sort(key=lambda pair: pair[0])
    judgements = [found for _, found in placed]
    return JudgedLine(read, tuple(judgements), setting, notes), author


def verdict_on(line: JudgedLine) -> LineVerdict:
    """Return the verdict on a line: that of its gravest finding, with the slip behind it."""
    source, reading = line.read.line, line.read.reading
    if reading is None or not line.judgements:
        says = source.says or "formula"
        return LineVerdict(source, says, "not read", line.read.trouble or "it says nothing")
    gravest = min(line.judgements, key=lambda j: GRAVEST_FIRST.index(j.finding.word))
    finding = gravest.finding
    slip, reason = None, finding.reason
    if finding.word == "fails" and _is_small(gravest.claim):
        slip, reason = diagnosed(gravest.claim, finding, line.setting)
        if slip is not None and slip.mended is not None:
            slip = replace(slip, mended=tidied(slip.mended))
    elif finding.word == "carried":
        reason = f"it follows from line {gravest.carried_from}"
    return LineVerdict(
        source,
        says_text(gravest.claim, line.judgements),
        finding.word,
        reason,
        _right(gravest.claim, finding, slip, line.setting),
        slip,
        gravest.carried_from,
        (*line.notes, *finding.notes),
        reading.statements,
    )


def _is_small(claim: Claim) -> bool:
    """Whether a claim is small enough for its slip to be looked for."""
    return len([node for value in claim.values for node in walk(value)]) <= MOST_NODES


def _right(claim: Claim, finding: Finding, slip: Slip | None, setting: Setting) -> Written | None:
    """Return the right form of a line that does not hold, near to what stands there.

    Names that only the solution of the model has are put in: the author does not know them.
    """
    if finding.passes:
        return None
    mended = slip.mended if slip is not None else None
    right = right_form(claim, finding, setting) if mended is None else mended
    return None if right is None else tidied(_spelled_out(right, setting))


def _spelled_out(tree: Written, setting: Setting) -> Written:
    """Return a formula with the formulas of names that the author has not defined."""
    formulas = {name: f for name, f in setting.ground.truth.quantities if f is not None}
    known = set(setting.author.definitions)

    def change(node: Written) -> Written | None:
        if not isinstance(node, Symbol) or node.name in known or node.name not in formulas:
            return None
        return changed(formulas[node.name], change)

    return changed(tree, change)


def says_text(claim: Claim, judgements: Sequence[Judgement] = ()) -> str:
    """Return what a line claims, with its subjects."""
    if claim.says in ("P", "J", "matrix", "P inverse", "exp J", "exp A", "real form"):
        return claim.says
    same = [j.claim.subject for j in judgements if j.claim.says == claim.says]
    subjects = ", ".join(dict.fromkeys(subject for subject in same if subject))
    short = re.sub("'{5,}", lambda primes: f"^({len(primes[0])})", subjects or claim.subject)
    return f"{claim.says} {short}".strip()


def _ambiguities(read: ReadLine) -> tuple[str, ...]:
    """Return how ambiguous places were read."""
    if read.reading is None:
        return ()
    return tuple(
        f"{found.text} is read as {found.chosen}, not {found.other}"
        + (f", as {found.decided_by} is declared" if found.decided_by else "")
        for found in read.reading.ambiguities
    )
