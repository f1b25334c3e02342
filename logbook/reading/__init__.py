"""Typed text to value or state; typing test, counters, ship time, spans."""
