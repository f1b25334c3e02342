"""What stands between the panes and the terminal: driver, glyphs, fitness of the terminal, settings, a dropped line."""
