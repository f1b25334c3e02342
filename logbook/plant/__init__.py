"""What is installed: readings catalogue, plant.toml as frozen records, units."""
