"""Resonance: tones of the inputs that are eigenvalues of the model."""

from __future__ import annotations

from dataclasses import dataclass

from closedform.algebra.sign_argument import SignArgument
from closedform.model.driven.generator import Tone

__all__ = ["Resonance"]


@dataclass(frozen=True)
class Resonance:
    """A tone of an input that coincides with eigenvalues of A in one case.

    `input` is the place of the input; `tone` has the equations of the case put in, and its
    `size` - 1 is the highest power of the time in the input's own waves.  `multiplicity` is
    that of rate ± i frequency as eigenvalues of A.  `order` is the highest power t^k beside
    e^(rate t) in the particular response: `raised` = order - (size - 1) is what the
    coincidence adds, 0 where the input does not reach these eigenvalues.
    `rate` is the sign of the rate, which says whether the resonance is damped.
    `condition` is that of the case, in plain notation ("true" if there is none).
    """

    input: int
    tone: Tone
    multiplicity: int
    order: int
    rate: SignArgument
    condition: str

    @property
    def raised(self) -> int:
        """The powers of the time that the coincidence adds."""
        return self.order - (self.tone.size - 1)

    @property
    def damped(self) -> bool | None:
        """Whether the response decays all the same; None where the sign is not known."""
        if self.rate.values == {-1}:
            return True
        return None if -1 in self.rate.values else False
