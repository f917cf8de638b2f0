"""Time whole jobs on driven models: the file read, solved, proved and written up.

    python tests/benchmarks/bench_driven.py [--smoke] [--cutoff 60] [--json FILE] [NAME ...]

A job is what a person waits for: a process of its own that reads a model file and writes
the derivation and the record.  Each time is the median of a few jobs, by the clock and of
the processor, which others may share; peak memory is that of the largest.  The record is
then read by a reader that is not the package's, and held against the equations as typed: at
the start, inside intervals and where something is switched.
`limit` is the time that the job should take at most, and is shown, not enforced.  The exit
status is 1 if an answer is wrong or not given; no time decides it.
"""

from __future__ import annotations

import argparse
import json
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from pathlib import Path
from typing import Any

ROOT = Path(__file__).parents[2]
if str(ROOT) not in sys.path:  # the checkout that this file is in is what is timed
    sys.path.insert(0, str(ROOT))

from bench_engine import machine, shown  # noqa: E402  beside this file

SMOKE_CUTOFF = 30.0
JOBS = 3
Result = dict[str, Any]
Mapped = dict[str, Any]


@dataclass(frozen=True)
class Case:
    """A model, the seconds that its job should take, values of its parameters to look at."""

    model: Callable[[], Mapped]
    limit: float
    values: tuple[Mapping[str, str], ...] = ({},)
    small: bool = True


def heated_rooms() -> Mapped:
    """Four states, two inputs; one of these in three pieces."""
    return {
        "title": "Four rooms with a heater and the weather",
        "equations": [
            "T1' = -3*T1 + T2 + q",
            "T2' = T1 - 4*T2 + T3 + T_out",
            "T3' = T2 - 4*T3 + T4 + T_out",
            "T4' = T3 - 2*T4",
        ],
        "inputs": {
            "q": [
                {"from": "0", "to": "2", "is": "3*t"},
                {"from": "2", "to": "6", "is": "6"},
                {"from": "6", "to": "8", "is": "6*exp(-(t - 6))"},
            ],
            "T_out": "5 + 3*sin(t/4)",
        },
        "initial": {"T1": 15, "T2": 12, "T3": 11, "T4": 10},
        "outputs": {"mean": "(T1 + T2 + T3 + T4)/4"},
    }


def chain(masses: int) -> Mapped:
    """Masses between walls, each with a damper to the ground, the last one driven."""
    equations, initial = [], {}
    for k in range(1, masses + 1):
        before = f"x{k - 1}" if k > 1 else "0"
        after = f"x{k + 1}" if k < masses else "0"
        force = " + F" if k == masses else ""
        equations.append(f"x{k}'' + 0.2*x{k}' = 40*({before} - 2*x{k} + {after}){force}")
        initial |= {f"x{k}": 0, f"x{k}'": 0}
    return {
        "title": "A chain of masses driven at its end",
        "equations": equations,
        "inputs": {"F": "12*sin(3*t)"},
        "initial": initial,
    }


def doses() -> Mapped:
    return {
        "title": "Doses again and again",
        "equations": ["G' = -k_a*G + dose", "P' = k_a*G - k_e*P"],
        "inputs": {"dose": {"is": "D*delta(t)", "period": "T"}},
        "initial": {"G": 0, "P": 0},
        "outputs": {"c": "P/V"},
        "parameters": dict.fromkeys(("k_a", "k_e", "D", "T", "V"), "positive"),
    }


def driven_oscillator() -> Mapped:
    return {
        "title": "A damped oscillator under a sine",
        "equations": ["m*x'' + c*x' + k*x = F0*sin(w*t)"],
        "initial": {"x": 0, "x'": 0},
        "parameters": dict.fromkeys(("m", "c", "k", "F0", "w"), "positive"),
    }


DOSES = {"k_a": "6/5", "D": "250", "T": "8", "V": "40"}
MOUNT = {"m": "5", "k": "2000", "F0": "30", "w": "15"}
CASES = {
    "four_states_three_pieces": Case(heated_rooms, 3.0),
    "chain_of_three": Case(lambda: chain(3), 3.0),
    "repeated_doses": Case(doses, 5.0, ({**DOSES, "k_e": "3/20"}, {**DOSES, "k_e": "6/5"})),
    "driven_oscillator": Case(
        driven_oscillator, 3.0, tuple({**MOUNT, "c": c} for c in ("40", "200", "300"))
    ),
    "chain_of_ten": Case(lambda: chain(10), 20.0, small=False),
}


def main() -> int:
    """Run the benchmark that the command line asks for and return the exit status."""
    options = arguments()
    cutoff = options.cutoff or (SMOKE_CUTOFF if options.smoke else 60.0)
    names = options.names or [n for n, case in CASES.items() if case.small or not options.smoke]
    results = [measured(name, cutoff, 1 if options.smoke else JOBS) for name in names]
    show(results)
    if options.json:
        report = {**machine(), "cutoff": cutoff, "results": results}
        options.json.write_text(json.dumps(report, indent=2) + "\n", encoding="utf-8")
    wrong = [r["name"] for r in results if not r.get("holds", "cut off" in r)]
    if wrong:
        print(f"not proved: {', '.join(wrong)}", file=sys.stderr)
    return int(bool(wrong))


def arguments() -> argparse.Namespace:
    parser = argparse.ArgumentParser(description=(__doc__ or "").split("\n", maxsplit=1)[0])
    parser.add_argument("names", nargs="*", metavar="NAME", help="run only these models")
    parser.add_argument("--smoke", action="store_true", help="the small ones, once each")
    parser.add_argument("--cutoff", type=float, metavar="S", help="seconds given to one job")
    parser.add_argument("--json", type=Path, metavar="FILE", help="keep the results here")
    options = parser.parse_args()
    unknown = set(options.names) - set(CASES)
    if unknown:
        parser.error(f"no model is called {', '.join(sorted(unknown))}: {', '.join(CASES)}")
    return options


def measured(name: str, cutoff: float, jobs: int) -> Result:
    """Run the jobs of one model, each ended at the cut-off, and check what came out."""
    case = CASES[name]
    mapping = case.model()
    result: Result = {"name": name, "limit": case.limit, "equations": len(mapping["equations"])}
    with tempfile.TemporaryDirectory() as folder:
        model = Path(folder, f"{name}.toml")
        model.write_text(toml_of(mapping), encoding="utf-8")
        command = [sys.executable, "-c", JOB, str(model), folder]
        seconds, busy, peaks = [], [], []
        for _ in range(jobs):
            start = time.perf_counter()
            try:
                done = subprocess.run(
                    command, capture_output=True, text=True, timeout=cutoff, cwd=ROOT, check=False
                )
            except subprocess.TimeoutExpired:
                return {**result, "cut off": cutoff}
            seconds.append(time.perf_counter() - start)
            if done.returncode:
                print(done.stderr, file=sys.stderr)
                return {**result, "raised": done.stderr.strip().splitlines()[-1][:60]}
            for kept, told in zip((busy, peaks), done.stdout.split()[-2:], strict=True):
                kept.append(float(told))
        record = json.loads(Path(folder, f"{name}.record.json").read_text(encoding="utf-8"))
    check(mapping, record, case.values)
    return {
        **result,
        "seconds": statistics.median(seconds),
        "processor": statistics.median(busy),
        "peak": max(peaks),
        "states": len(record["states"]),
        "cases": len(record.get("cases", [record])),
        "holds": True,
    }


JOB = """
import resource, sys
from closedform.cli import main
sys.argv[1:] = ["writeup", sys.argv[1], "--into", sys.argv[2], "--quiet"]
try:
    main()
except SystemExit as end:
    if end.code:
        raise
used = resource.getrusage(resource.RUSAGE_SELF)
print(used.ru_utime + used.ru_stime, used.ru_maxrss / 1024)
"""


def toml_of(mapping: Mapped) -> str:
    """A model file; all values are texts, numbers, lists and tables of these."""
    return "\n".join(f"{key} = {_value(told)}" for key, told in mapping.items()) + "\n"


def _value(told: Any) -> str:
    if isinstance(told, Mapping):
        inner = ", ".join(f"{json.dumps(key)} = {_value(v)}" for key, v in told.items())
        return f"{{ {inner} }}"
    if isinstance(told, list):
        return f"[{', '.join(map(_value, told))}]"
    return json.dumps(told)


def check(mapping: Mapped, record: Mapping[str, Any], values: tuple[Any, ...]) -> None:
    """Raise unless the record solves the equations as typed, by readers of their own."""
    from flint import ctx

    from tests.driven.held import check as hold
    from tests.driven.told import Told
    from tests.driven.typed import Stated

    with ctx.workprec(600):
        for given in values:
            at = {name: Fraction(text) for name, text in given.items()}
            stated = Stated(mapping, at)
            for told in Told.cases(record, at):
                hold(stated, told.functions, [*stated.instants[:8], Fraction(2, 7)])


def show(results: list[Result]) -> None:
    from rich.console import Console
    from rich.table import Table

    table = Table(title="Driven models, from the file to the write-up")
    table.add_column("model", no_wrap=True)
    for heading in ("equations", "states", "cases", "seconds", "of the CPU", "limit", "MiB"):
        table.add_column(heading, justify="right")
    for r in results:
        table.add_row(
            r["name"],
            str(r["equations"]),
            shown(r.get("states"), "d"),
            shown(r.get("cases"), "d"),
            f"> {r['cut off']:g}" if "cut off" in r else r.get("raised") or f"{r['seconds']:.2f}",
            shown(r.get("processor"), ".2f"),
            f"{r['limit']:g}",
            shown(r.get("peak"), ".0f"),
        )
    Console(width=None if sys.stdout.isatty() else 120).print(table)


if __name__ == "__main__":
    sys.exit(main())
