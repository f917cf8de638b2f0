"""The templates: where they are found, the environment they run in, and what may go wrong."""

from __future__ import annotations

import re
from collections.abc import Callable
from importlib import resources
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import TYPE_CHECKING, TypeVar

from closedform.document.display import narrow
from closedform.document.latex import fits
from closedform.document.phrases import FILTERS, FUNCTIONS, is_complex
from closedform.document.references import References
from closedform.errors import InputError

if TYPE_CHECKING:
    from jinja2 import BaseLoader, Environment

__all__ = [
    "MAIN",
    "TemplateError",
    "answered",
    "check_template",
    "environment",
    "formulas_of_templates",
    "shortened",
    "templates_folder",
]

MAIN = "writeup.tex.j2"
"""The file of a template that a write-up is made by."""

LITERAL_FORMULA = re.compile(r"(?<!\\)\$((?:[^$<>\\]|\\.)+)\$")
LONGEST_FOOT = 60
_T = TypeVar("_T")


class TemplateError(InputError):
    """A template is missing, cannot be read, or asks for something that is not there."""

    def __init__(self, template: str, line: int | None, reason: str) -> None:
        super().__init__(template, line, reason)
        self.template, self.line, self.reason = template, line, reason

    def __str__(self) -> str:
        place = self.template if self.line is None else f"{self.template}, line {self.line}"
        return (
            f"{place}: {self.reason} Name the template that is shipped, latex, or a folder whose "
            "files take the place of its own."
        )


def templates_folder() -> Traversable:
    """Return the folder of templates: inside the installed package, else of the checkout."""
    package = resources.files("closedform")
    inside = package / "templates"
    return inside if inside.is_dir() else Path(str(package)).parent / "templates"


def check_template(template: str | Path) -> None:
    """Find and read the main file of a template, so that a wrong name is told at once.

    Raises:  TemplateError if it is not there or not valid.
    """
    answered(template, lambda: environment(template, References()).get_template(MAIN))


def answered(template: str | Path, work: Callable[[], _T]) -> _T:
    """Return what `work` gives; what goes wrong in a template is a `TemplateError`."""
    import jinja2

    try:
        return work()
    except jinja2.TemplateNotFound as error:
        raise TemplateError(str(template), None, f"it has no file {error.name}.") from error
    except jinja2.TemplateSyntaxError as error:
        place = error.filename or error.name or str(template)
        raise TemplateError(place, error.lineno, f"{error.message}.") from error
    except (OSError, UnicodeDecodeError) as error:
        raise TemplateError(str(template), None, f"it cannot be read: {error}.") from error
    except (jinja2.UndefinedError, jinja2.exceptions.SecurityError) as error:
        place, line = _place(error)
        raise TemplateError(place or str(template), line, f"{error.message}.") from error


def _place(error: BaseException) -> tuple[str, int | None]:
    """Return the innermost template file and line that an error passed through."""
    found: tuple[str, int | None] = ("", None)
    trace = error.__traceback__
    while trace is not None:
        name = trace.tb_frame.f_code.co_filename
        if name.endswith(".j2"):
            found = (name, trace.tb_lineno)
        trace = trace.tb_next
    return found


def _loader(template: str) -> BaseLoader:
    from jinja2 import ChoiceLoader, FileSystemLoader, FunctionLoader

    shipped = templates_folder() / "latex"

    def read(name: str) -> tuple[str, str, None] | None:
        file = shipped.joinpath(*name.split("/"))
        if ".." in name or not file.is_file():
            return None
        return file.read_text(encoding="utf-8"), f"templates/latex/{name}", None

    if template == "latex":
        return FunctionLoader(read)
    if not Path(template).is_dir():
        raise TemplateError(template, None, "no template and no folder has this name.")
    return ChoiceLoader([FileSystemLoader(template), FunctionLoader(read)])


def environment(template: str | Path, references: References) -> Environment:
    """Return the Jinja environment of a template: a shipped name, or a folder.

    Raises:  TemplateError if neither has this name.
    """
    from jinja2 import StrictUndefined
    from jinja2.sandbox import SandboxedEnvironment

    made = SandboxedEnvironment(
        loader=_loader(str(template)),
        block_start_string="<%",
        block_end_string="%>",
        variable_start_string="<<",
        variable_end_string=">>",
        comment_start_string="<#",
        comment_end_string="#>",
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
        undefined=StrictUndefined,
        autoescape=False,  # LaTeX, not HTML: text of the user's goes through `text`
    )
    printed = references.printed
    made.filters |= FILTERS
    made.filters |= {
        "math": printed.math,
        "cell": printed.cell,
        "mixed": printed.mixed,
        "decimal": printed.decimal,
        "unit": printed.unit,
        "field": printed.field,
    }
    made.globals |= FUNCTIONS
    made.globals |= {
        "display": references.display,
        "displays": references.displays,
        "beside": printed.beside,
        "relate": printed.relate,
        "decimal_tables": printed.tabled,
        "cite": references.cite,
        "refer": references.refer,
        "section_label": references.section,
    }
    made.tests["complex"] = is_complex
    made.tests["fits"] = fits
    made.tests["narrow"] = narrow
    return made


def formulas_of_templates(template: str | Path) -> frozenset[str]:
    """Return what stands between dollar signs in the files of a template, nothing put in."""
    folders: list[Traversable] = [templates_folder() / "latex"]
    if str(template) != "latex":
        folders.append(Path(template))
    found: set[str] = set()
    while folders:
        for item in folders.pop().iterdir():
            if item.is_dir():
                folders.append(item)
            elif item.name.endswith(".j2"):
                found |= set(LITERAL_FORMULA.findall(item.read_text(encoding="utf-8")))
    return frozenset(found)


def shortened(title: str) -> str:
    """Return a title as it stands at the foot of a page."""
    words = " ".join(title.split())
    return words if len(words) <= LONGEST_FOOT else f"{words[: LONGEST_FOOT - 1].rstrip()}…"
