"""Formulas in SI, floats and arrays alike, no input or output.

Units inside are Pa, K, kg, J, W, m3, s and their products, unless a name ends in another one. Every argument may be a
float or an array; arrays broadcast, and the result is a float only where every argument was one.

A state that cannot be (not enough air, a temperature or a ratio out of range) raises ValueError with a sentence that
says what to enter where all arguments are scalars. Where any is an array, that element of the result becomes NaN and
the rest is worked out; NaN in is NaN out. `checks.py` is the one place that does this.
"""
