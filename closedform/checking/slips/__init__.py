"""The likely slip behind a line that fails: one change that mends it, verified."""

from closedform.checking.slips.diagnosis import diagnosed
from closedform.checking.slips.names import MEANINGS
from closedform.checking.slips.right_forms import right_form

__all__ = ["MEANINGS", "diagnosed", "right_form"]
