"""Commands, exit codes, the environment."""
