"""From a proved response to the ordered steps of its derivation."""
