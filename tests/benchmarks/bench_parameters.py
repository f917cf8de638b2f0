"""Time whole solves of models with parameters, proofs included, beside SymPy's exponential.

    python tests/benchmarks/bench_parameters.py [--smoke] [--cutoff 60] [--json FILE] [NAME ...]

Ours finds every case of the parameters' values and proves it; SymPy is given (A t).exp()
with positive symbols, which holds outside the exceptional cases at best.  Every timing is
the median of a few calls in a process of its own, after a small call that pays for the
imports; SymPy's cache is cleared before each.  A call is ended at the cut-off, and peak
memory is that of one side.  Our answer is read from its record by a reader that is not the
package's, at values drawn from a seed, and held against ball arithmetic.  The exit status
is 1 if an answer of ours is wrong, unproved or not given because of an error; no time
decides it.
"""

from __future__ import annotations

import argparse
import json
import os
import subprocess
import sys
import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

ROOT = Path(__file__).parents[2]
if str(ROOT) not in sys.path:  # the checkout that this file is in is what is timed
    sys.path.insert(0, str(ROOT))

from bench_engine import machine, peak, shown, timed  # noqa: E402  beside this file

SMOKE_CUTOFF = 5.0
Result = dict[str, Any]


@dataclass(frozen=True)
class Case:
    """A model: what is positive, A and x(0) as formulas; `small` ones are in the smoke run."""

    symbols: str
    matrix: Sequence[Sequence[str]]
    initial: Sequence[str]
    small: bool = True

    @property
    def parameters(self) -> dict[str, str]:
        words = " ".join([*(text for row in self.matrix for text in row), *self.initial])
        return {name: "positive" for name in self.symbols.split() if name in words}


def decay(stages: int) -> list[list[str]]:
    """Return a chain of stages, each with a rate of its own."""
    rates = [f"k{i + 1}" for i in range(stages)]
    return [
        [f"-{rates[j]}" if i == j else rates[j] if i == j + 1 else "0" for j in range(stages)]
        for i in range(stages)
    ]


def compartments(around: int) -> list[list[str]]:
    """Return a central compartment that is left for good, and others in exchange with it."""
    outer = range(2, around + 2)
    first = " - ".join(["-k10", *(f"k1{i}" for i in outer)])
    rows = [[first, *(f"k{i}1" for i in outer)]]
    return rows + [[f"k1{i}", *(f"-k{i}1" if i == j else "0" for j in outer)] for i in outer]


def masses() -> list[list[str]]:
    """Return two masses and three springs without damping."""
    return [
        ["0", "0", "1", "0"],
        ["0", "0", "0", "1"],
        ["-(k1 + k2)/m1", "k2/m1", "0", "0"],
        ["k2/m2", "-(k2 + k3)/m2", "0", "0"],
    ]


def depot() -> list[list[str]]:
    return [["-ka", "0", "0"], ["ka", "-k10 - k12", "k21"], ["0", "k12", "-k21"]]


def unit(n: int) -> list[str]:
    return ["1"] + ["0"] * (n - 1)


CASES = {
    "damped_oscillator": Case("m c k", [["0", "1"], ["-k/m", "-c/m"]], unit(2)),
    "depot_two_compartments": Case("ka k10 k12 k21", depot(), unit(3)),
    "three_compartments": Case("k10 k12 k21 k13 k31", compartments(2), unit(3)),
    "three_stage_decay": Case("k1 k2 k3", decay(3), unit(3)),
    "six_stage_decay": Case("k1 k2 k3 k4 k5 k6", decay(6), unit(6), small=False),
    "two_masses_undamped": Case("m1 m2 k1 k2 k3", masses(), unit(4)),
    "four_compartments": Case("k10 k12 k21 k13 k31 k14 k41", compartments(3), unit(4), small=False),
}


def main() -> int:
    """Run the benchmark that the command line asks for and return the exit status."""
    options = arguments()
    if options.worker:
        print(json.dumps(WORKERS[options.worker](CASES[options.names[0]])))
        return 0
    cutoff = options.cutoff or (SMOKE_CUTOFF if options.smoke else 60.0)
    names = options.names or [n for n, case in CASES.items() if case.small or not options.smoke]
    results = [compare(name, cutoff) for name in names]
    show(results, cutoff)
    if options.json:
        report = {**machine(), "cutoff": cutoff, "results": results}
        options.json.write_text(json.dumps(report, indent=2) + "\n", encoding="utf-8")
    wrong = [r["name"] for r in results if not r["ours"].get("holds", "cut off" in r["ours"])]
    if wrong:
        print(f"not proved: {', '.join(wrong)}", file=sys.stderr)
    return int(bool(wrong))


def arguments() -> argparse.Namespace:
    parser = argparse.ArgumentParser(description=(__doc__ or "").split("\n", maxsplit=1)[0])
    parser.add_argument("names", nargs="*", metavar="NAME", help="run only these models")
    parser.add_argument("--smoke", action="store_true", help="the small ones, a short cut-off")
    parser.add_argument("--cutoff", type=float, metavar="S", help="seconds given to one side")
    parser.add_argument("--json", type=Path, metavar="FILE", help="keep the results here")
    parser.add_argument("--worker", choices=WORKERS, help=argparse.SUPPRESS)
    options = parser.parse_args()
    unknown = set(options.names) - set(CASES)
    if unknown:
        parser.error(f"no model is called {', '.join(sorted(unknown))}: {', '.join(CASES)}")
    return options


def ours(case: Case) -> Result:
    """Time the solution (`seconds`) and with all proofs (`whole`); check the record's answer."""
    import closedform
    from closedform.document.record import record_text
    from tests.parametric.admissible import draws
    from tests.parametric.record_reader import check_names, check_record
    from tests.parametric.solving import stated

    def model(of: Case) -> Any:
        states = [f"x{i + 1}" for i in range(len(of.matrix))]
        return stated(states, of.matrix, of.initial, of.parameters)

    def whole() -> tuple[Any, Any]:
        response = closedform.respond(asked)
        return response, closedform.verify(response)

    first = closedform.respond(model(Case("a", [["-a"]], ["1"])))
    record_text(first, closedform.verify(first))
    asked = model(case)
    _, seconds = timed(lambda: closedform.respond(asked))
    (response, verification), whole_seconds = timed(whole)
    memory = peak()
    record = json.loads(record_text(response, verification))
    check_names(record)
    for values in draws(case.parameters, (), 4):
        check_record(record, values)
    return {
        "seconds": seconds,
        "whole": whole_seconds,
        "cases": len(record["cases"]),
        "not covered": len(record["not_covered"]),
        "characters": sum(len(text) for row in record["cases"][0]["transition"] for text in row),
        "holds": verification.holds,
        "peak": memory,
    }


def sympys(case: Case) -> Result:
    """Time SymPy's exponential of A t, or say what it raised."""
    import sympy
    from sympy.core.cache import clear_cache

    t = sympy.Symbol("t", real=True)

    def matrix(of: Case) -> sympy.Matrix:
        symbols = {name: sympy.Symbol(name, positive=True) for name in of.parameters}
        return sympy.Matrix(
            [[sympy.parse_expr(text, local_dict=symbols) for text in row] for row in of.matrix]
        )

    def answer(a: sympy.Matrix) -> sympy.Matrix:
        clear_cache()
        return (a * t).exp()

    answer(matrix(Case("a", [["-a"]], ["1"])))
    asked = matrix(case)
    start = time.perf_counter()
    try:
        found, seconds = timed(lambda: answer(asked))
    except Exception as error:  # noqa: BLE001 - whatever it raises is the result
        after = time.perf_counter() - start
        return {"raised": type(error).__name__, "after": after, "peak": peak()}
    characters = sum(len(str(entry)) for entry in found)
    return {"seconds": seconds, "characters": characters, "peak": peak()}


WORKERS: dict[str, Callable[[Case], Result]] = {"ours": ours, "sympy": sympys}


def compare(name: str, cutoff: float) -> Result:
    case = CASES[name]
    size = {"name": name, "n": len(case.matrix), "symbols": len(case.parameters)}
    return {**size, **{side: run(side, name, cutoff) for side in WORKERS}}


def run(side: str, name: str, cutoff: float) -> Result:
    """Run one worker, ended at the cut-off (a second more is given to start it)."""
    command = [sys.executable, __file__, "--worker", side, name]
    environment = {**os.environ, "PYTHONPATH": str(ROOT)}
    try:
        done = subprocess.run(
            command,
            capture_output=True,
            text=True,
            timeout=cutoff + 1,
            cwd=ROOT,
            env=environment,
            check=False,
        )
    except subprocess.TimeoutExpired:
        return {"cut off": cutoff}
    if done.returncode:
        print(done.stderr, file=sys.stderr)
        lines = done.stderr.strip().splitlines() or [f"ended by signal {-done.returncode}"]
        return {"raised": lines[-1].split(":")[0].rsplit(".", maxsplit=1)[-1]}
    result: Result = json.loads(done.stdout)
    return result


def show(results: list[Result], cutoff: float) -> None:
    """Print the table: `left` are conditions not covered, `length` characters of e^(At)."""
    from rich.console import Console
    from rich.table import Table

    table = Table(title=f"Models with parameters beside SymPy (cut-off {cutoff:g} s)")
    table.add_column("model", no_wrap=True)
    for heading in (
        *("n", "symbols", "cases", "left", "solved s", "proved s", "SymPy s", "ratio"),
        *("length", "SymPy length", "MiB", "SymPy MiB"),
    ):
        table.add_column(heading, justify="right")
    for r in results:
        left, right = r["ours"], r["sympy"]
        both = left.get("whole") and right.get("seconds")
        table.add_row(
            r["name"],
            str(r["n"]),
            str(r["symbols"]),
            shown(left.get("cases"), "d"),
            shown(left.get("not covered"), "d"),
            outcome(left, "seconds"),
            outcome(left, "whole"),
            outcome(right, "seconds"),
            shown(right["seconds"] / left["whole"] if both else None, ".1f"),
            shown(left.get("characters"), "d"),
            shown(right.get("characters"), "d"),
            shown(left.get("peak"), ".0f"),
            shown(right.get("peak"), ".0f"),
        )
    Console(width=None if sys.stdout.isatty() else 150).print(table)


def outcome(side: Result, stage: str) -> str:
    if "cut off" in side:
        return f"> {side['cut off']:g}"
    if "raised" in side:
        return str(side["raised"])
    return f"{side[stage]:.4f}{'' if side.get('holds', True) else ' REFUTED'}"


if __name__ == "__main__":
    sys.exit(main())
