"""An independent replay of a finished plan: every rule, day by day, from the facts alone."""
