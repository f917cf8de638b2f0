"""What a usual user may not do, tested by the superuser too."""

from __future__ import annotations

import os
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

NOBODY = 65534


@contextmanager
def as_a_usual_user() -> Iterator[None]:
    """Give up the superuser's rights inside the block; a usual user has none to give up."""
    if os.geteuid() != 0:
        yield
        return
    os.seteuid(NOBODY)
    try:
        yield
    finally:
        os.seteuid(0)


@contextmanager
def folder_open_to_all() -> Iterator[Path]:
    """A folder that everybody may enter and read, and only its owner may write to."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        folder.chmod(0o755)
        yield folder
