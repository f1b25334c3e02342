"""Renderers of the monthly summary."""
