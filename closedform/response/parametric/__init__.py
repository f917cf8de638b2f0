"""Models with parameters solved for every value of the parameters."""
