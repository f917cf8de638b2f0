"""Hand derivations held against their model, line by line."""
