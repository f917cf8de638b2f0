"""Run the command line: ``python -m closedform``."""

from __future__ import annotations

from closedform.cli import main

if __name__ == "__main__":
    main()
