"""The lines of a derivation, from a LaTeX document or a list of claims."""
