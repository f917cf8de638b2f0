"""From a model to its exact response."""

from closedform.response.response import Response, respond

__all__ = ["Response", "respond"]
