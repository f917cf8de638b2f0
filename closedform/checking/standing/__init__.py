"""What claims stand on: a case of the model in exact values, and what the author has said."""
