"""Exact values of what was written: numbers, functions of time, matrices."""
