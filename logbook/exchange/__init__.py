"""Import with a column map, exports."""
