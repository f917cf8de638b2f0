"""Exact mathematics: fields, spectra, canonical forms, exponentials.  Knows no files."""
