"""Exact, proved closed-form responses of linear models with constant coefficients.

>>> import closedform
>>> model = closedform.system([[0, 1], [-2, -3]], initial=[1, 0])
>>> response = closedform.respond(model)
>>> print(response.transition)
[2*exp(-t) - exp(-2*t)    exp(-t) - exp(-2*t)]
[2*(exp(-2*t) - exp(-t))  2*exp(-2*t) - exp(-t)]
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from closedform.checking.verdict import CheckReport
    from closedform.document.checked_report import write_check
    from closedform.document.own import check_file
    from closedform.document.writeup import WriteUp, write_up
    from closedform.model.building import system
    from closedform.model.driven.model import DrivenModel
    from closedform.model.model import Model
    from closedform.model.parametric import ParametricModel
    from closedform.model.reading import load
    from closedform.response.driven.response import DrivenResponse
    from closedform.response.parametric.response import ParametricResponse
    from closedform.response.response import Response
    from closedform.response.solving import respond
    from closedform.verification.parametric.record import CaseRecords
    from closedform.verification.proving import verify
    from closedform.verification.record import VerificationRecord

__all__ = [
    "CaseRecords",
    "CheckReport",
    "DrivenModel",
    "DrivenResponse",
    "Model",
    "ParametricModel",
    "ParametricResponse",
    "Response",
    "VerificationRecord",
    "WriteUp",
    "check_file",
    "load",
    "respond",
    "system",
    "verify",
    "write_check",
    "write_up",
]

_HOMES = {
    "CaseRecords": "closedform.verification.parametric.record",
    "CheckReport": "closedform.checking.verdict",
    "DrivenModel": "closedform.model.driven.model",
    "DrivenResponse": "closedform.response.driven.response",
    "Model": "closedform.model.model",
    "ParametricModel": "closedform.model.parametric",
    "ParametricResponse": "closedform.response.parametric.response",
    "Response": "closedform.response.response",
    "VerificationRecord": "closedform.verification.record",
    "WriteUp": "closedform.document.writeup",
    "check_file": "closedform.document.own",
    "load": "closedform.model.reading",
    "respond": "closedform.response.solving",
    "system": "closedform.model.building",
    "verify": "closedform.verification.proving",
    "write_check": "closedform.document.checked_report",
    "write_up": "closedform.document.writeup",
}


def __getattr__(name: str) -> object:
    """Import a public name when it is first asked for: `import closedform` stays quick."""
    if name not in _HOMES:
        raise AttributeError(f"module 'closedform' has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)
