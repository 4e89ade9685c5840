"""The migrations: one file in `versions/` for each change of the tables, written by hand."""

from __future__ import annotations
