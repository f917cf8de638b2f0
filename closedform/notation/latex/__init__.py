"""Formulas, names and text as LaTeX, with their widths."""
