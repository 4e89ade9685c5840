"""Two plans held against each other: what changed, each with its cause, and what would if."""
