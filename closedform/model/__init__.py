"""Models: stated in TOML files or as Python values, read exactly."""

from closedform.model.building import model_from
from closedform.model.model import Model, Output
from closedform.model.reading import load

__all__ = ["Model", "Output", "load", "model_from"]
