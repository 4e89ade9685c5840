"""The citations behind the source keys of the tables that travel with the program."""

from __future__ import annotations

import csv
from pathlib import Path


def citations(folder: Path) -> dict[str, str]:
    """Each source key with its citation and how that was come by; a missing file cites nothing."""
    path = folder / "SOURCES.csv"
    if not path.is_file():
        return {}
    with path.open(encoding="utf-8", newline="") as rows:
        return {row["key"]: f"{row['citation']} ({row['how']})" for row in csv.DictReader(rows)}
