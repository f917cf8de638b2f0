"""What a write-up prints, read back from its text and held against what was to be printed."""
