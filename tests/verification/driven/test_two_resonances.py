"""An undamped absorber under a sine: its two resonances are one kept equation of the parameters."""

from __future__ import annotations

from closedform.model.building import model_from
from closedform.model.driven.model import DrivenModel
from closedform.response.driven.response import respond_driven
from closedform.verification.driven.verify import verify_driven
from closedform.verification.parametric.record import CaseRecords


def test_an_absorber_is_proved_at_its_resonances_too() -> None:
    model = model_from(
        {
            "title": "Absorber",
            "equations": [
                "m1*x1'' + (k1 + k2)*x1 - k2*x2 = F0*sin(w*t)",
                "m2*x2'' + k2*(x2 - x1) = 0",
            ],
            "initial": {"x1": 0, "x1'": 0, "x2": 0, "x2'": 0},
            "parameters": dict.fromkeys(("m1", "m2", "k1", "k2", "F0", "w"), "positive"),
        },
        name="absorber",
    )
    assert isinstance(model, DrivenModel)
    response = respond_driven(model)
    records = verify_driven(response)
    assert isinstance(records, CaseRecords)
    assert records.refuted == ()
    assert records.left_open == ()
    assert len(response.solutions) == 2
