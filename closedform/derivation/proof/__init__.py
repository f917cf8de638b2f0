"""From the steps of a derivation to the proof that they are true as printed."""

from closedform.derivation.proof.finding import StatementRefutedError
from closedform.derivation.proof.rewriting import require_equal
from closedform.derivation.proof.statements import prove_statements

__all__ = ["StatementRefutedError", "prove_statements", "require_equal"]
