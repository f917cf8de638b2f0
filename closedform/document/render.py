"""A derivation through the templates to the text of a document."""

from __future__ import annotations

from collections.abc import Callable
from importlib import resources
from importlib.resources.abc import Traversable
from pathlib import Path
from typing import TYPE_CHECKING, TypeVar, get_args

from closedform.derivation.step import Depth, Derivation, Symbol
from closedform.document.beside import displayed_beside
from closedform.document.display import narrow
from closedform.document.latex import fits
from closedform.document.phrases import FILTERS, FUNCTIONS, stacked_symbol
from closedform.document.references import References
from closedform.errors import InputError
from closedform.notation.expression import Name
from closedform.notation.latex.names import derivatives_of, is_time

if TYPE_CHECKING:
    from jinja2 import BaseLoader, Environment

__all__ = [
    "DEPTHS",
    "TemplateError",
    "UnknownDepthError",
    "UnusableDigitsError",
    "check_options",
    "check_template",
    "render",
    "templates_folder",
]

DEPTHS: tuple[str, ...] = get_args(Depth)
"""From little to all.  In full, every part also names what it rests on."""

MOST_DIGITS = 1000
MAIN = "writeup.tex.j2"
_T = TypeVar("_T")
LONGEST_FOOT = 60


class UnknownDepthError(InputError):
    """A depth that is not in `DEPTHS`."""

    def __init__(self, depth: str) -> None:
        super().__init__(depth)
        self.depth = depth

    def __str__(self) -> str:
        return f"No depth is called {self.depth!r}; choose one of {', '.join(DEPTHS)}."


class UnusableDigitsError(InputError):
    """A number of digits that tables cannot have."""

    def __init__(self, digits: int) -> None:
        super().__init__(digits)
        self.digits = digits

    def __str__(self) -> str:
        return f"Tables have from 1 to {MOST_DIGITS} significant digits, not {self.digits}."


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


def check_options(*, depth: str, digits: int) -> None:
    """Refuse a depth that is none, and digits of tables below 1 or above `MOST_DIGITS`.

    Raises:  UnknownDepthError, UnusableDigitsError.
    """
    if depth not in DEPTHS:
        raise UnknownDepthError(depth)
    if not 1 <= digits <= MOST_DIGITS:
        raise UnusableDigitsError(digits)


def check_template(template: str | Path) -> None:
    """Find and read the main file of a template, so that a wrong name is told at once.

    Raises:  TemplateError if it is not there or not valid.
    """
    _answered(
        template, lambda: _environment(_loader(str(template)), References()).get_template(MAIN)
    )


def render(
    derivation: Derivation, *, template: str | Path = "latex", depth: str = "working"
) -> str:
    """Return the derivation as the text of a document.

    `template` is the name of a shipped template, or a folder whose files take the place
    of the shipped ones of the same name.  The same input gives the same text.

    Raises:  UnknownDepthError; TemplateError if the template is not there or fails.
    """
    if depth not in DEPTHS:
        raise UnknownDepthError(depth)

    time, references = _time(derivation), References()
    environment = _environment(_loader(str(template)), references)
    shown = DEPTHS[: DEPTHS.index(depth) + 1]
    steps = [step for step in derivation.steps if step.depth in shown]
    kinds = {step.kind for step in derivation.steps}
    values: dict[str, object] = {
        "title": derivation.title,
        "steps": steps,
        "depth": depth,
        "shown": frozenset(step.kind for step in steps),
        "time": time,
        "in_time": is_time(time.text),
        "form": Symbol("matrix", ("R",) if "real_form" in kinds else (), letter="J"),
        "foot": _shortened(derivation.title),
    }

    if "input_system" in kinds:
        values["symbol"] = stacked_symbol

    def twice() -> str:
        main = environment.get_template(MAIN)
        main.render(values)
        references.next_pass()
        return main.render(values)

    with derivatives_of(time.text):
        return _answered(template, twice)


def _answered(template: str | Path, work: Callable[[], _T]) -> _T:
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


def _environment(loader: BaseLoader, references: References) -> Environment:
    from jinja2 import StrictUndefined
    from jinja2.sandbox import SandboxedEnvironment

    environment = SandboxedEnvironment(
        loader=loader,
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
    environment.filters |= FILTERS
    environment.globals |= FUNCTIONS
    environment.globals |= {
        "display": references.display,
        "displays": references.displays,
        "beside": displayed_beside,
        "cite": references.cite,
        "refer": references.refer,
        "section_label": references.section,
    }
    environment.tests["fits"] = fits
    environment.tests["narrow"] = narrow
    return environment


def _time(derivation: Derivation) -> Name:
    for step in derivation.steps:
        time = step.facts.get("time")
        if step.kind in ("model", "driven_model") and isinstance(time, str):
            return Name(time)
    return Name("t")


def _shortened(title: str) -> str:
    words = " ".join(title.split())
    return words if len(words) <= LONGEST_FOOT else f"{words[: LONGEST_FOOT - 1].rstrip()}…"
