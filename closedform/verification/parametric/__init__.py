"""What is proved about a response with parameters, case by case."""
