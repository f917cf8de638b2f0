"""From the steps of a derivation to the proof that they are true as printed."""
