"""The proof that the steps of a driven derivation are true as printed."""
