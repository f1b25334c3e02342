"""Formulas in SI, floats and arrays alike, no input or output."""
