"""The rooms of the package are floors: an import points down, and never in a circle."""

from __future__ import annotations

import ast
import graphlib
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parents[1] / "closedform"
FLOORS = (
    "errors",
    "algebra",
    "notation",
    "model",
    "response",
    "verification",
    "derivation",
    "checking",
    "document",
    "cli",
)
ENTRANCES = ("__init__", "__main__")  # the package's own face stands on top of all floors
COMPUTES_NOTHING = ("derivation", "document")


def modules(package: Path) -> dict[str, Path]:
    """Return every module of the package by its dotted name, `__init__` left off."""
    found = {}
    for path in sorted(package.rglob("*.py")):
        parts = (package.name, *path.relative_to(package).with_suffix("").parts)
        found[".".join(parts[:-1] if parts[-1] == "__init__" else parts)] = path
    return found


def imports(name: str, path: Path, known: dict[str, Path]) -> set[str]:
    """Return the dotted names imported anywhere in a file, in functions too.

    ``from a import b`` gives ``a.b`` if that is a module of ours, and ``a`` if not.
    """
    found: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"), str(path))):
        if isinstance(node, ast.Import):
            found.update(alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            base = node.module or ""
            if node.level:
                inside = name.split(".") if path.stem == "__init__" else name.split(".")[:-1]
                above = inside[: len(inside) - node.level + 1]
                base = ".".join([*above, base] if base else above)
            inner = [f"{base}.{alias.name}" for alias in node.names]
            found.update(target if target in known else base for target in inner)
    return found


def floor(name: str) -> int:
    """Return the height of a module's room; the package's own face is above them all."""
    parts = name.split(".")
    if len(parts) == 1 or parts[1] in ENTRANCES:
        return len(FLOORS)
    assert parts[1] in FLOORS, f"{name} stands in no known room"
    return FLOORS.index(parts[1])


def upward(package: Path) -> list[str]:
    """Return one line for each import that points to a higher floor."""
    known = modules(package)
    return [
        f"{name} imports {target}"
        for name, path in known.items()
        for target in sorted(imports(name, path, known))
        if target in known and floor(target) > floor(name)
    ]


def circle(package: Path) -> list[str]:
    """Return the modules of one circle of imports, or nothing.

    A room's `__init__` and its own modules are told apart: a module that imports its own
    room's face is a circle as soon as the face imports the module.
    """
    known = modules(package)
    graph = {
        name: {
            target for target in imports(name, path, known) if target in known and target != name
        }
        for name, path in known.items()
    }
    try:
        graphlib.TopologicalSorter(graph).prepare()
    except graphlib.CycleError as error:
        return list(error.args[1])
    return []


def computing(package: Path) -> list[str]:
    """Return one line for each import of sympy in a room that only lays out."""
    known = modules(package)
    return [
        f"{name} imports {target}"
        for name, path in known.items()
        if any(name.startswith(f"{package.name}.{room}") for room in COMPUTES_NOTHING)
        for target in sorted(imports(name, path, known))
        if target.split(".")[0] == "sympy"
    ]


def test_no_import_points_to_a_higher_floor() -> None:
    assert upward(PACKAGE) == []


def test_no_imports_run_in_a_circle() -> None:
    assert circle(PACKAGE) == []


def test_rooms_that_lay_out_import_no_computer_algebra() -> None:
    assert computing(PACKAGE) == []


def test_every_module_is_seen() -> None:
    assert {"closedform", "closedform.errors", "closedform.algebra.surds"} <= set(modules(PACKAGE))


@pytest.fixture
def synthetic(tmp_path: Path) -> Path:
    """A small sound package of the same name, for the tests to spoil."""
    package = tmp_path / "closedform"
    for room in ("algebra", "response", "document"):
        (package / room).mkdir(parents=True)
        (package / room / "__init__.py").touch()
    (package / "__init__.py").write_text("from closedform.document.text import page\n")
    (package / "errors.py").write_text("class Wrong(Exception): ...\n")
    (package / "algebra" / "ring.py").write_text("import sympy\nfrom ..errors import Wrong\n")
    (package / "response" / "free.py").write_text("from closedform import algebra, errors\n")
    (package / "document" / "text.py").write_text("from closedform.response.free import x\n")
    assert [*upward(package), *circle(package), *computing(package)] == []
    return package


UPWARD = [
    "from closedform.response.free import x\n",
    "import closedform.response.free\n",
    "from closedform.response import free\n",
    "from ..response import free\n",
    "from .. import response\n",
    "from closedform import response\n",
    "def late():\n    from closedform.response import free\n",
    "from closedform import respond\n",
]


@pytest.mark.parametrize("text", UPWARD)
def test_an_import_that_points_up_is_caught_however_it_is_written(
    synthetic: Path, text: str
) -> None:
    (synthetic / "algebra" / "spoiled.py").write_text(text)
    assert any(line.startswith("closedform.algebra.spoiled imports") for line in upward(synthetic))


def test_a_circle_inside_one_room_is_caught(synthetic: Path) -> None:
    (synthetic / "algebra" / "left.py").write_text("from .right import r\n")
    (synthetic / "algebra" / "right.py").write_text("def f():\n    from .left import s\n")
    assert {"closedform.algebra.left", "closedform.algebra.right"} <= set(circle(synthetic))


def test_computer_algebra_in_a_room_that_lays_out_is_caught(synthetic: Path) -> None:
    (synthetic / "document" / "text.py").write_text("def f():\n    from sympy.core import Add\n")
    assert computing(synthetic) == ["closedform.document.text imports sympy.core"]


def test_a_module_outside_the_known_rooms_is_refused(synthetic: Path) -> None:
    (synthetic / "leftovers.py").write_text("from closedform import errors\n")
    with pytest.raises(AssertionError, match="no known room"):
        upward(synthetic)
