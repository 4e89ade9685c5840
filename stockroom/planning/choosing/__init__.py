"""Which bottle serves which need: a look ahead over all needs of a line."""
