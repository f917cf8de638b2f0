"""The derivation of a driven model: what is added to that of its stacked matrix."""
