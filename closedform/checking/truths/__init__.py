"""The truth about a model, case by case, from its proved response."""
