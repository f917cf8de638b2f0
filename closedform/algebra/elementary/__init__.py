"""Exact comparison of closed forms: constants with square roots, exponentials in time."""

from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.field import Element, ElementaryField

__all__ = ["Element", "ElementaryField", "NotElementaryError"]
