"""Published systems and formulas as lines of derivations, and the models they belong to."""

from __future__ import annotations

import json
from collections.abc import Iterator, Mapping, Sequence
from functools import cache
from pathlib import Path
from typing import Any

from closedform.checking.check import check_lines
from closedform.checking.claim import SourceLine
from closedform.checking.source.reading import Source
from closedform.checking.verdict import LineVerdict
from closedform.model import DrivenModel, Model, ParametricModel, model_from

FOLDER = Path(__file__).parent
ITEMS: tuple[dict[str, Any], ...] = tuple(
    json.loads((FOLDER / "derivations.json").read_text(encoding="utf-8"))["items"]
)


def published(file: str) -> dict[str, dict[str, Any]]:
    """Return the items of a collection by their names."""
    content = json.loads((FOLDER / file).read_text(encoding="utf-8"))
    return {item["id"]: item for item in content.get("items", content.get("values"))}


COLLECTIONS = {file: published(file) for file in sorted({item["file"] for item in ITEMS})}


def origin(item: Mapping[str, Any]) -> dict[str, Any]:
    """Return what a derivation was made from."""
    return COLLECTIONS[item["file"]][item["id"]]


def model_of(item: Mapping[str, Any]) -> Model | ParametricModel | DrivenModel:
    """Return the model of a published system; where no states are named they are x1, x2, ..."""
    told = origin(item)
    text: dict[str, Any] = {"title": item["id"]}
    if "model" in told:
        text |= told["model"]
    else:
        size = len(told["matrix"])
        text["states"] = told.get("states", [f"x{k}" for k in range(1, size + 1)])
        text |= {"matrix": told["matrix"], "initial": told.get("initial", [0] * size)}
        if item["file"] == "parametric.json":
            text["parameters"] = told["parameters"]
    return model_from(text, name=item["id"])


def verdicts(
    item: Mapping[str, Any], texts: Sequence[str], says: Sequence[str]
) -> tuple[LineVerdict, ...]:
    """Return the verdicts on lines, the definitions of the source standing before them."""
    before = item.get("before", [])
    lines = [SourceLine(k, text) for k, text in enumerate(before, 1)]
    lines += [
        SourceLine(k, text, says=word)
        for k, (text, word) in enumerate(zip(texts, says, strict=True), len(before) + 1)
    ]
    source = Source(Path("published.tex"), "model.toml", Path("model.toml"), "", tuple(lines))
    return check_lines(source, model_of(item)).lines[len(before) :]


def as_printed(item: Mapping[str, Any]) -> tuple[LineVerdict, ...]:
    """Return the verdicts on the lines as they are published, judged once."""
    return _as_printed(ITEMS.index(item))


@cache
def _as_printed(number: int) -> tuple[LineVerdict, ...]:
    item = ITEMS[number]
    lines = item["lines"]
    return verdicts(item, [line["latex"] for line in lines], _says(lines))


def changed(item: Mapping[str, Any]) -> Iterator[tuple[dict[str, Any], LineVerdict]]:
    """Yield each line that was changed, with its verdict; the lines beside it are right."""
    for k, line in enumerate(item["lines"]):
        texts = [other["latex"] for other in item["lines"]]
        texts[k] = line["changed"]
        yield line, verdicts(item, texts, _says(item["lines"]))[k]


def _says(lines: Sequence[Mapping[str, Any]]) -> list[str]:
    return [line.get("says", "") for line in lines]
