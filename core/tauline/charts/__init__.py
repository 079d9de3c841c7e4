"""Charts: from where spacetime is looked at."""
