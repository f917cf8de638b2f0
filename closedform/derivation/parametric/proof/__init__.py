"""Every statement of a derivation with parameters is proved from what is printed."""
