"""What people write: formulas in LaTeX or typed, as they stand in reports and papers."""
