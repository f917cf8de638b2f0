"""LaTeX documents: which formulas they display, and where."""
