"""Looking for the one change that mends a line."""

from __future__ import annotations

from closedform.checking.claim import Claim
from closedform.checking.setting import Finding, Setting
from closedform.checking.verdict import Slip

__all__ = ["diagnosed"]


def diagnosed(claim: Claim, finding: Finding, setting: Setting) -> tuple[Slip | None, str]:
    """Return the slip behind a failing claim, if one is found, and the reason to be told."""
    return None, finding.reason
