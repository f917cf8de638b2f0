"""What a line that gives a name may pass as.

A definition passes, since nothing is claimed by it.  So it has to be one: a misspelt state, or a
quantity of the model under another index than the customary one, must not pass as a name.
"""

from __future__ import annotations

from dataclasses import replace

from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.judging.constants import is_constant_of_integration
from closedform.checking.recognising.left_sides import base_and_indices, spelled_jet
from closedform.checking.recognising.naming import given_names, used_names
from closedform.checking.standing.setting import Setting
from closedform.notation.written.tree import Jet, Symbol, walk

__all__ = ["quantities_meant", "require_definition"]

NUMBERED = {
    "omega": ("natural frequency", "damped frequency"),
    "zeta": ("damping ratio",),
    "tau": ("time constant",),
}
"""What a name with a number as its index customarily stands for: that of a mode."""


def require_definition(claim: Claim, setting: Setting) -> None:
    """Raise NotJudgedError unless a line can be a definition as it stands."""
    facts, later = setting.ground.facts, setting.later
    used = frozenset().union(*(used_names(other) for other in later), ())
    for name in claim.names:
        if not isinstance(name, Jet) or name.name in facts.names:
            continue
        if name.name in setting.author.definitions or _says_more(claim, setting):
            continue
        if name.order or name.name not in used:
            spelled = spelled_jet(name.name, name.order)
            raise NotJudgedError(
                f"the model has no {spelled}, and no later line uses it; if it is a state, spell "
                "it as the model does"
            )
    given = given_names(claim, facts).union(*(given_names(other, facts) for other in later))
    for unknown in sorted(used_names(claim) - given - facts.names):
        try:
            setting.value(Symbol(unknown))
        except UnknownNameError:
            if not is_constant_of_integration(unknown, setting):
                raise
        except NotJudgedError:
            continue


def _says_more(claim: Claim, setting: Setting) -> bool:
    """Whether a new function is made of the model's, or has two members that have to agree."""
    varying = setting.ground.facts.varying
    parts = (node for value in claim.values for node in walk(value))
    made = any(isinstance(node, Jet) and node.name in varying for node in parts)
    return made or len(claim.values) > 1


def quantities_meant(claim: Claim, setting: Setting) -> tuple[Claim, ...]:
    """Return what a line claims if its name is that of a quantity of a mode: omega_1, tau_2.

    A name that later lines use may be anything: if it is wrong, they are.
    """
    used = frozenset().union(*(used_names(other) for other in setting.later), ())
    found = []
    for name in claim.names:
        base, index = base_and_indices(name.name) if isinstance(name, Symbol) else ("", "")
        if index.isdigit() and isinstance(name, Symbol) and name.name not in used:
            found += [replace(claim, says=says) for says in NUMBERED.get(base, ())]
    return tuple(found)
