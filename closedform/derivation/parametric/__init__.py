"""The derivation of a model with parameters, case by case."""
