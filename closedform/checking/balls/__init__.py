"""Numbers and matrices as written, enclosed in complex balls."""
