"""Time whole checks of derivations: files read, model solved, every line judged, reports written.

    python tests/benchmarks/bench_check.py [--smoke] [--cutoff 60] [--json FILE] [NAME ...]

A job is what a person waits for: a process of its own that runs `closedform check`.  Each time is
the median of a few jobs, by the clock and of the processor, which others may share; peak memory
is that of the largest.  The verdicts in the record are then held against those that are expected:
every line of a derivation that is right has to pass, and of one with a slip exactly the lines
that are known to be wrong may fail or be carried.
`limit` is the time that the job should take at most, and is shown, not enforced.  The exit
status is 1 if a verdict is wrong or not given; no time decides it.
"""

from __future__ import annotations

import argparse
import json
import math
import shutil
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

ROOT = Path(__file__).parents[2]
if str(ROOT) not in sys.path:  # the checkout that this file is in is what is timed
    sys.path.insert(0, str(ROOT))

from bench_engine import machine, shown  # noqa: E402  beside this file

STARTERS = ROOT / "templates" / "starters"
SMOKE_CUTOFF = 30.0
JOBS = 3
PASSING = ("holds", "holds up to scale", "holds up to order", "holds to the digits shown")
Result = dict[str, Any]


@dataclass(frozen=True)
class Case:
    """What puts a derivation into a folder, the seconds that it should take, its wrong lines."""

    prepare: Callable[[Path], Path]
    limit: float
    fails: tuple[int, ...] = ()
    carried: tuple[int, ...] = ()
    small: bool = True


def starter(name: str) -> Callable[[Path], Path]:
    """Put a shipped derivation and its model into the folder."""

    def prepare(folder: Path) -> Path:
        for file in (STARTERS / "derivations").glob(f"{Path(name).stem}*"):
            shutil.copy(file, folder)
        return folder / name

    return prepare


def written_up(name: str) -> Callable[[Path], Path]:
    """Write up a model, and put the document beside the model."""

    def prepare(folder: Path) -> Path:
        model = Path(shutil.copy(STARTERS / f"{name}.toml", folder))
        command = [sys.executable, "-m", "closedform", "writeup", str(model), "--into", str(folder)]
        subprocess.run(command, cwd=ROOT, check=True, capture_output=True)
        return folder / f"{name}.tex"

    return prepare


def table_of_values(folder: Path) -> Path:
    """Two hundred displays: values of two coupled tables, worked out here in floats."""
    shutil.copy(STARTERS / "derivations" / "coupled_tables_model.toml", folder)
    lines = ["% closedform: model = coupled_tables_model.toml"]
    for k in range(1, 101):
        t = k / 50
        total = math.exp(-t) * (10 * math.cos(2 * t) + 5 * math.sin(2 * t))
        apart = math.exp(-2 * t) * (10 * math.cos(3 * t) + 20 / 3 * math.sin(3 * t))
        for name, value in (("x_1", total + apart), ("x_2", total - apart)):
            lines += ["", f"After {t:g} seconds:", rf"\[ {name}({t:g}) \approx {value / 2:.4f} \]"]
    return written(folder / "values.tex", lines)


def five_megabytes(folder: Path) -> Path:
    """A long report in which only the lines of the two coupled tables are displayed."""
    source = starter("coupled_tables.tex")(folder)
    text = source.read_text(encoding="utf-8")
    sentence = r"The mount at frame $k_{12}$ was seen to creep by \emph{little} (see \cite{a}). "
    padding = (sentence * 12 + "% a remark\n\n") * 5000
    return written(source, [r"\begin{document}", text, padding, r"\end{document}"])


def written(path: Path, lines: list[str]) -> Path:
    path.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return path


SLIP: dict[str, Any] = {"fails": (9,), "carried": (10, 11, 12)}
CASES = {
    "thirteen_lines_of_four_states": Case(starter("coupled_tables.tex"), 3.0, **SLIP),
    "rounded_by_a_calculator": Case(starter("ladder_on_paper.toml"), 3.0),
    "in_letters": Case(starter("free_motion_in_letters.tex"), 3.0),
    "five_megabytes_of_tex": Case(five_megabytes, 5.0, **SLIP),
    "two_hundred_displays": Case(table_of_values, 20.0, small=False),
    "own_write_up": Case(written_up("two_mass_frame"), 10.0, small=False),
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
        print(f"not judged as expected: {', '.join(wrong)}", file=sys.stderr)
    return int(bool(wrong))


def arguments() -> argparse.Namespace:
    parser = argparse.ArgumentParser(description=(__doc__ or "").split("\n", maxsplit=1)[0])
    parser.add_argument("names", nargs="*", metavar="NAME", help="run only these derivations")
    parser.add_argument("--smoke", action="store_true", help="the small ones, once each")
    parser.add_argument("--cutoff", type=float, metavar="S", help="seconds given to one job")
    parser.add_argument("--json", type=Path, metavar="FILE", help="keep the results here")
    options = parser.parse_args()
    unknown = set(options.names) - set(CASES)
    if unknown:
        parser.error(f"no derivation is called {', '.join(sorted(unknown))}: {', '.join(CASES)}")
    return options


def measured(name: str, cutoff: float, jobs: int) -> Result:
    """Run the jobs of one derivation, each ended at the cut-off, and look at the verdicts."""
    case = CASES[name]
    with tempfile.TemporaryDirectory() as place:
        folder = Path(place)
        source = case.prepare(folder)
        result: Result = {
            "name": name,
            "limit": case.limit,
            "bytes": source.stat().st_size,
        }
        command = [sys.executable, "-c", JOB, str(source), place]
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
                said = [line for line in done.stderr.splitlines() if ":" in line]
                return {**result, "raised": said[-1][:60] if said else f"status {done.returncode}"}
            for kept, told in zip((busy, peaks), done.stdout.split()[-2:], strict=True):
                kept.append(float(told))
        record = json.loads((folder / f"{source.stem}.check.json").read_text(encoding="utf-8"))
    unexpected = [
        f"line {line['line']} {line['verdict']}"
        for line in record["lines"]
        if line["verdict"] not in expected(case, line["line"])
    ]
    if unexpected:
        print(f"{name}: {', '.join(unexpected)}", file=sys.stderr)
    return {
        **result,
        "seconds": statistics.median(seconds),
        "processor": statistics.median(busy),
        "peak": max(peaks),
        "lines": len(record["lines"]),
        "holds": not unexpected,
    }


def expected(case: Case, line: int) -> tuple[str, ...]:
    """Return the verdicts that a line may have."""
    if line in case.fails:
        return ("fails",)
    return ("carried",) if line in case.carried else PASSING


JOB = """
import resource, sys
from closedform.cli import main
sys.argv[1:] = ["check", sys.argv[1], "--into", sys.argv[2], "--quiet"]
try:
    main()
except SystemExit as end:
    if end.code not in (0, 1):
        raise
used = resource.getrusage(resource.RUSAGE_SELF)
print(used.ru_utime + used.ru_stime, used.ru_maxrss / 1024)
"""
"""A slip found is a sound result: status 1 is looked at by its record."""


def show(results: list[Result]) -> None:
    from rich.console import Console
    from rich.table import Table

    table = Table(title="Derivations, from the file to the report")
    table.add_column("derivation", no_wrap=True)
    for heading in ("bytes", "lines", "seconds", "of the CPU", "limit", "MiB"):
        table.add_column(heading, justify="right")
    for r in results:
        table.add_row(
            r["name"],
            str(r["bytes"]),
            shown(r.get("lines"), "d"),
            f"> {r['cut off']:g}" if "cut off" in r else r.get("raised") or f"{r['seconds']:.2f}",
            shown(r.get("processor"), ".2f"),
            f"{r['limit']:g}",
            shown(r.get("peak"), ".0f"),
        )
    Console(width=None if sys.stdout.isatty() else 120).print(table)


if __name__ == "__main__":
    sys.exit(main())
