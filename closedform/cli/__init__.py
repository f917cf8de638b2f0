"""The command line: arguments in, the work of the rooms below, an exit status out."""

from closedform.cli.commands import main

__all__ = ["main"]
