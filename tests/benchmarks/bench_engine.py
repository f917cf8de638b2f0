"""Time the exact engine, its proof included, beside SymPy's own matrix exponential.

    python tests/benchmarks/bench_engine.py [--smoke] [--cutoff 60] [--json FILE] [NAME ...]

Every timing is the median of a few calls in a process of its own, after a first small
call, so neither side pays for its imports; SymPy's cache is cleared before each call.  A
hanging call is ended at the cut-off, and peak memory is that of one side.  The exit status
is 1 if an answer of ours is refuted or not given because of an error, or if a whole command
fails; no time decides it.
"""

from __future__ import annotations

import argparse
import json
import os
import platform
import resource
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from datetime import UTC, datetime
from fractions import Fraction
from importlib.metadata import version
from pathlib import Path
from typing import Any

from matrices import MATRICES, Entry, Rows

ROOT = Path(__file__).parents[2]
SMOKE_CUTOFF = 5.0
REPEAT_BELOW = 2.0
# The checkout that this file is in is what is timed, installed or not.
ENVIRONMENT = {**os.environ, "PYTHONPATH": str(ROOT)}
Result = dict[str, Any]


def main() -> int:
    """Run the benchmark that the command line asks for and return the exit status."""
    options = arguments()
    if options.worker:
        print(json.dumps(WORKERS[options.worker](MATRICES[options.names[0]][0]())))
        return 0
    cutoff = options.cutoff or (SMOKE_CUTOFF if options.smoke else 60.0)
    names = options.names or [n for n, (_, small) in MATRICES.items() if small or not options.smoke]
    results = []
    for name in names:
        if sys.stderr.isatty():
            print(f"{name} ...", file=sys.stderr)
        results.append(compare(name, cutoff))
    processes = whole_processes(repeats=1 if options.smoke else 3)
    show(results, processes, cutoff)
    if options.json:
        report = {**machine(), "cutoff": cutoff, "results": results, "processes": processes}
        options.json.write_text(json.dumps(report, indent=2) + "\n", encoding="utf-8")
    wrong = [r["name"] for r in results if not r["ours"].get("holds", "cut off" in r["ours"])]
    if wrong:
        print(f"not proved: {', '.join(wrong)}", file=sys.stderr)
    broken = [name for name, seconds in processes.items() if isinstance(seconds, str)]
    return int(bool(wrong or broken))


def arguments() -> argparse.Namespace:
    parser = argparse.ArgumentParser(description=(__doc__ or "").split("\n", maxsplit=1)[0])
    parser.add_argument("names", nargs="*", metavar="NAME", help="run only these matrices")
    parser.add_argument("--smoke", action="store_true", help="the small ones, a short cut-off")
    parser.add_argument("--cutoff", type=float, metavar="S", help="seconds given to one call")
    parser.add_argument("--json", type=Path, metavar="FILE", help="keep the results here")
    parser.add_argument("--worker", choices=WORKERS, help=argparse.SUPPRESS)
    options = parser.parse_args()
    unknown = set(options.names) - set(MATRICES)
    if unknown:
        parser.error(f"no matrix is called {', '.join(sorted(unknown))}: {', '.join(MATRICES)}")
    return options


def ours(rows: Rows) -> Result:
    """Time three stages, and count what a reader sees.

    `seconds`: e^(At) as an exact object, and its proof by substitution (the differential
    equation and the initial value).  `whole`: with the second route, chains, solution, and
    every identity of the record.  `written`: with the formulas in their shortest form.
    Operations are those of e^(At) and of the written definitions of the constants named in
    it; beyond the order up to which e^(At) is written out there are none.  The certified
    comparisons of the whole record are made too, outside the timing.
    """
    import closedform
    from closedform.algebra.exponential import exponential_by_resolvent
    from closedform.algebra.field import base_field
    from closedform.algebra.spectrum import spectrum_of
    from closedform.notation.expression import operations
    from closedform.response.response import written_out
    from closedform.verification.identities import (
        differential_equation_check,
        initial_value_check,
    )
    from closedform.verification.verify import prove

    def stated(matrix: Rows) -> Any:
        entries = [[model_entry(entry) for entry in row] for row in matrix]
        return closedform.system(entries, initial=[1] * len(matrix))

    def exponential(model: Any) -> bool:
        field = base_field(entry for row in model.matrix for entry in row)
        a = field.matrix([[field.scalar(entry) for entry in row] for row in model.matrix])
        found = exponential_by_resolvent(field, a, spectrum_of(field, a))
        checks = (
            differential_equation_check("F' = A F", found, a),
            initial_value_check("F(0) = I", found, field.identity(len(model.states))),
        )
        return all(check.outcome == "proved" for check in checks)

    def whole(model: Any) -> tuple[Any, bool]:
        response = closedform.respond(model)
        return response, all(check.outcome == "proved" for check in prove(response))

    model = stated(rows)
    written_out(whole(stated([[Fraction(-1), Fraction(1)], [Fraction(-1), Fraction(-1)]]))[0])
    substituted, seconds = timed(lambda: exponential(model))
    (response, proved), whole_seconds = timed(lambda: whole(model))
    forms, written_seconds = timed(lambda: written_out(response))
    memory = peak()
    definitions = [getattr(c.definition, "formula", None) for c in forms.constants]
    written = [formula for row in forms.transition for formula in row]
    count = sum(operations(formula) for formula in (*written, *definitions) if formula)
    return {
        "seconds": seconds,
        "whole": whole_seconds,
        "written": whole_seconds + written_seconds,
        **({"operations": count} if written else {}),
        "holds": substituted and proved and closedform.verify(response).holds,
        "peak": memory,
    }


def sympys(rows: Rows) -> Result:
    """Time SymPy's exponential of A t, or say what it raised."""
    import sympy
    from sympy.core.cache import clear_cache

    t = sympy.Symbol("t", real=True)

    def number(entry: Entry) -> sympy.Expr:
        factor, radicand = entry if isinstance(entry, tuple) else (entry, 1)
        return sympy.Rational(factor.numerator, factor.denominator) * sympy.sqrt(radicand)

    def answer(matrix: Rows) -> sympy.Matrix:
        clear_cache()
        return (sympy.Matrix([[number(entry) for entry in row] for row in matrix]) * t).exp()

    answer([[Fraction(-1), Fraction(1)], [Fraction(-1), Fraction(-1)]])
    start = time.perf_counter()
    try:
        found, seconds = timed(lambda: answer(rows))
    except Exception as error:  # noqa: BLE001 - whatever it raises is the result
        seconds = time.perf_counter() - start
        return {"raised": type(error).__name__, "after": seconds, "peak": peak()}
    count = sum(int(sympy.count_ops(entry)) for entry in found)
    return {"seconds": seconds, "operations": count, "peak": peak()}


def timed(call: Callable[[], Any]) -> tuple[Any, float]:
    """Return what a call gives, and the median of its seconds: five calls, fewer if long."""
    times: list[float] = []
    while len(times) < 5 and sum(times) < REPEAT_BELOW:
        start = time.perf_counter()
        found = call()
        times.append(time.perf_counter() - start)
    return found, statistics.median(times)


WORKERS = {"ours": ours, "sympy": sympys}


def model_entry(entry: Entry) -> Fraction | str:
    return f"{entry[0]}*sqrt({entry[1]})" if isinstance(entry, tuple) else entry


def peak() -> float:
    """Return this process's peak memory in MiB (Linux counts in KiB)."""
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024


def compare(name: str, cutoff: float) -> Result:
    order = len(MATRICES[name][0]())
    return {"name": name, "n": order, **{side: run(side, name, cutoff) for side in WORKERS}}


def run(side: str, name: str, cutoff: float) -> Result:
    """Run one worker, ended at the cut-off (a second more is given to start it)."""
    command = [sys.executable, __file__, "--worker", side, name]
    try:
        done = subprocess.run(
            command,
            capture_output=True,
            text=True,
            timeout=cutoff + 1,
            cwd=ROOT,
            env=ENVIRONMENT,
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


def whole_processes(repeats: int) -> dict[str, float | str]:
    """Return the shortest time of whole commands, start of the interpreter included."""
    model = ROOT / "templates" / "starters" / "two_mass_frame.toml"
    with tempfile.TemporaryDirectory() as folder:
        commands = {
            "closedform writeup, 4 states": [
                "-m",
                "closedform",
                "writeup",
                str(model),
                "--into",
                folder,
            ],
            "closedform --help": ["-m", "closedform", "--help"],
            'python -c "import sympy"': ["-c", "import sympy"],
        }
        return {name: shortest(command, repeats) for name, command in commands.items()}


def shortest(command: list[str], repeats: int) -> float | str:
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        done = subprocess.run(
            [sys.executable, *command],
            capture_output=True,
            text=True,
            cwd=ROOT,
            env=ENVIRONMENT,
            check=False,
        )
        times.append(time.perf_counter() - start)
        if done.returncode:
            return f"exit status {done.returncode}"
    return min(times)


def show(results: list[Result], processes: dict[str, float | str], cutoff: float) -> None:
    """Print the table, the median ratio and the whole-process times."""
    from rich.console import Console
    from rich.table import Table

    table = Table(title=f"e^(At) with its proof beside SymPy (cut-off {cutoff:g} s)")
    table.add_column("matrix")
    for heading in (
        *("n", "proved s", "whole s", "written s", "SymPy s", "ratio", "ratio, written"),
        *("ops", "SymPy ops", "MiB", "SymPy MiB"),
    ):
        table.add_column(heading, justify="right")
    for r in results:
        left, right = r["ours"], r["sympy"]
        table.add_row(
            r["name"],
            str(r["n"]),
            outcome(left),
            shown(left.get("whole"), ".4f"),
            shown(left.get("written"), ".4f"),
            outcome(right),
            shown(ratio(r, "seconds"), ".1f"),
            shown(ratio(r, "written"), ".1f"),
            shown(left.get("operations"), "d"),
            shown(right.get("operations"), "d"),
            shown(left.get("peak"), ".0f"),
            shown(right.get("peak"), ".0f"),
        )
    console = Console(width=None if sys.stdout.isatty() else 150)
    console.print(table)
    for stage, words in STAGES.items():
        ratios = [x for r in results if (x := ratio(r, stage)) is not None]
        if ratios:
            console.print(
                f"SymPy finishes {len(ratios)} of {len(results)}; where it does, the median"
                f" ratio is {statistics.median(ratios):.1f} {words}"
            )
    for name, seconds in processes.items():
        text = seconds if isinstance(seconds, str) else f"{seconds:.2f} s"
        console.print(f"{name}: {text}", markup=False, highlight=False)


STAGES = {
    "seconds": "for e^(At) and its proof by substitution",
    "whole": "with the second route and all identities",
    "written": "with the formulas written out as well",
}


def ratio(result: Result, stage: str) -> float | None:
    """Return SymPy's seconds over ours up to a stage, where both have finished."""
    left, right = result["ours"].get(stage), result["sympy"].get("seconds")
    return right / left if left and right else None


def outcome(side: Result) -> str:
    if "cut off" in side:
        return f"> {side['cut off']:g}"
    if "raised" in side:
        return str(side["raised"])
    proof = "" if side.get("holds", True) else " REFUTED"
    return f"{side['seconds']:.4f}{proof}"


def shown(value: float | None, form: str) -> str:
    return "" if value is None else format(value, form)


def machine() -> Result:
    """Return what the numbers depend on: machine, versions and the day."""
    cpu = Path("/proc/cpuinfo")
    lines = cpu.read_text(encoding="utf-8").splitlines() if cpu.exists() else []
    models = [line.split(":", 1)[1].strip() for line in lines if line.startswith("model name")]
    return {
        "date": datetime.now(UTC).date().isoformat(),
        "machine": models[0] if models else platform.processor(),
        "cores": os.cpu_count(),
        "python": platform.python_version(),
        **{name: version(name) for name in ("sympy", "python-flint")},
    }


if __name__ == "__main__":
    sys.exit(main())
