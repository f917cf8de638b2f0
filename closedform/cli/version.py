"""The version of this program."""

from __future__ import annotations

import tomllib
from importlib import metadata
from pathlib import Path

__all__ = ["version"]


def version() -> str:
    """Return the version: that of the checkout this runs from, else of the installed package."""
    checkout = Path(__file__).parents[2] / "pyproject.toml"
    if checkout.is_file():
        project = tomllib.loads(checkout.read_text(encoding="utf-8"))["project"]
        if project["name"] == "closedform":
            return str(project["version"])
    return metadata.version("closedform")
