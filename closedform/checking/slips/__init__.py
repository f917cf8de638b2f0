"""The likely slip behind a line that fails: one change that mends it, verified."""

from closedform.checking.slips.diagnosis import diagnosed

__all__ = ["diagnosed"]
