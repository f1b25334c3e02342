"""Figures, reference, trend: what the readings carry and what they do not."""
