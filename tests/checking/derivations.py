"""Hand derivations as they stand in a collection: each as a model and as lines to be checked."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from closedform.checking.claim import SourceLine
from closedform.model import DrivenModel, Model, ParametricModel, model_from

FILES = ("derivations.json", "more_derivations.json")
ITEMS: tuple[dict[str, Any], ...] = tuple(
    item
    for name in FILES
    for item in json.loads(Path(__file__).with_name(name).read_text(encoding="utf-8"))["items"]
)
SAYS = {"P_inv": "P inverse", "exp_A": "exp A", "exp_J": "exp J", "real_form": "real form"}


def model_of(item: dict[str, Any]) -> Model | ParametricModel | DrivenModel:
    """Return the model of a derivation."""
    stated = item["model"]
    text: dict[str, Any] = {
        "title": item["scenario"],
        "equations": stated["equations"],
        "states": stated["states"],
        "initial": stated["initial"],
    }
    if stated["parameters"]:
        text["parameters"] = {
            name: {"assume": "positive"} | ({} if value is None else {"value": value})
            for name, value in stated["parameters"].items()
        }
    return model_from(text, name=item["id"])


def lines_of(item: dict[str, Any], *, stated: bool = True) -> tuple[SourceLine, ...]:
    """Return the lines; `stated` says whether what they claim is told in words."""
    return tuple(
        SourceLine(
            number,
            line["latex"],
            says=SAYS.get(line["says"], line["says"]) if stated else "",
            of=(line.get("of") or "") if stated else "",
        )
        for number, line in enumerate(item["lines"], start=1)
    )
