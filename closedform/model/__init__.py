"""Models: stated in TOML files or as Python values, read exactly."""

from closedform.model.building import model_from
from closedform.model.driven.model import DrivenModel
from closedform.model.model import Model, Output
from closedform.model.parametric import ParametricModel
from closedform.model.reading import load

__all__ = ["DrivenModel", "Model", "Output", "ParametricModel", "load", "model_from"]
