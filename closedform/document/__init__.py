"""Derivation to LaTeX through the templates, and LaTeX to PDF.  Nothing is computed here."""
