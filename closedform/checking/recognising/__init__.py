"""What a line says: read, and taken for a claim by its left side."""
