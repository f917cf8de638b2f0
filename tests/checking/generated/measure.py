"""Generated derivations held against the checker, and how often it was right."""

from __future__ import annotations

import time
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass, field
from pathlib import Path

from closedform.checking.check import check_lines
from closedform.checking.claim import SourceLine
from closedform.checking.source.reading import Source
from closedform.checking.verdict import LineVerdict
from closedform.model import model_from
from tests.checking.generated.lines import Derivation, Line

__all__ = ["Fault", "Tally", "checked", "measured"]


@dataclass(frozen=True)
class Fault:
    """A line whose verdict is not what it ought to be: `kind` says how."""

    kind: str
    seed: int
    number: int
    line: Line
    verdict: LineVerdict
    derivation: Derivation

    def __str__(self) -> str:
        found = self.verdict
        return (
            f"[{self.kind}] seed {self.seed} line {self.number} ({self.derivation.kind}; "
            f"slip: {self.line.slip or self.derivation.slip or 'none'})\n"
            f"    {self.line.says} {'(told)' if self.line.stated else ''}: {self.line.latex}\n"
            f"    {found.says}: {found.verdict}: {found.reason}"
        )


@dataclass
class Tally:
    """Counts over derivations, and the faults."""

    counts: Counter[str] = field(default_factory=Counter)
    slips: Counter[tuple[str, str]] = field(default_factory=Counter)
    faults: list[Fault] = field(default_factory=list)
    weak: list[Fault] = field(default_factory=list)
    """Slips that were found and not named, and consequences that were not recognised."""
    crashes: list[str] = field(default_factory=list)
    seconds: float = 0.0


def checked(derivation: Derivation) -> tuple[LineVerdict, ...]:
    """Return the verdicts on a derivation."""
    model = model_from(derivation.model, name="generated")
    lines = tuple(
        SourceLine(
            number,
            line.latex,
            says=line.says if line.stated else "",
            of=(line.of or line.subject) if line.stated else "",
            at=line.at if line.stated else "",
        )
        for number, line in enumerate(derivation.lines, start=1)
    )
    source = Source(Path("generated"), "model", Path("model"), "", lines)
    return check_lines(source, model).lines


def measured(derivations: Iterable[Derivation]) -> Tally:
    """Return what the checker made of derivations."""
    tally = Tally()
    for derivation in derivations:
        began = time.perf_counter()
        try:
            verdicts = checked(derivation)
        except Exception as error:  # noqa: BLE001  the fault is counted, and told
            tally.counts["crashed"] += 1
            tally.crashes.append(f"seed {derivation.seed}: {type(error).__name__}: {error}")
            continue
        tally.seconds += time.perf_counter() - began
        _count(derivation, verdicts, tally)
    return tally


def _count(derivation: Derivation, verdicts: tuple[LineVerdict, ...], tally: Tally) -> None:
    tally.counts["derivations"] += 1
    tally.counts["with a slip" if derivation.slip else "right"] += 1
    wrong = [k for k, line in enumerate(derivation.lines, start=1) if line.wrong]
    first = next((v.line.number for v in verdicts if v.verdict == "fails"), None)
    if wrong and derivation.lines[wrong[0] - 1].slip:
        tally.counts["first wrong found" if first == wrong[0] else "first wrong not found"] += 1
    for number, (line, found) in enumerate(zip(derivation.lines, verdicts, strict=True), start=1):
        tally.counts["lines"] += 1
        kind = _fault(derivation, line, found, tally)
        if kind.startswith("-"):
            tally.weak.append(Fault(kind[1:], derivation.seed, number, line, found, derivation))
        elif kind:
            tally.faults.append(Fault(kind, derivation.seed, number, line, found, derivation))
            tally.counts[kind] += 1


def _fault(derivation: Derivation, line: Line, found: LineVerdict, tally: Tally) -> str:
    if found.verdict == "not read":
        return "not read"
    if not line.wrong:
        tally.counts["right lines"] += 1
        if found.passes:
            return ""
        if found.verdict == "carried" and any(x.defines and x.wrong for x in derivation.lines):
            tally.counts["carried by a name"] += 1
            return ""
        beside = line.says in ("P inverse", "exp J") and derivation.slip
        return "right beside a wrong one fails" if beside else "right line failed"
    tally.counts["wrong lines"] += 1
    if found.passes:
        exchanged = found.verdict == "holds up to order"
        return "wrong order passed" if exchanged else "wrong line passed"
    if line.slip:
        named = found.slip.name if found.slip is not None else ""
        tally.slips[line.slip, named] += 1
        tally.counts["slip told" if named else "slip not told"] += 1
        if found.verdict != "fails":
            return "slip taken for carried"
        return "" if named else "-slip not told"
    if found.verdict == "carried":
        tally.counts["carried recognised"] += 1
        return ""
    tally.counts["carried not recognised"] += 1
    return "-carried not recognised"
