"""Engine logbook: readings become efficiency, bound, gap and excess."""
