"""What to order, by when, in which packs and for whose money; what the term uses."""
