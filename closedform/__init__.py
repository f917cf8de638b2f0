"""Exact, proved closed-form responses of linear models with constant coefficients."""
