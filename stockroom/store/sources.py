"""Where the tables that travel with the program are, and the citations behind their source keys."""

from __future__ import annotations

import csv
from functools import lru_cache
from pathlib import Path


# asked for every line of a store, and the answer stays while the program runs
@lru_cache(maxsize=1)
def seeds_folder() -> Path:
    """Where the tables that travel with the program are: inside it, else beside it."""
    package = Path(__file__).resolve().parent.parent
    # a wheel carries the tables inside the package
    inside = package / "seeds_data"
    return inside if inside.is_dir() else package.parent / "seeds_data"


def citations(folder: Path) -> dict[str, str]:
    """Each source key with its citation and how that was come by; a missing file cites nothing."""
    path = folder / "SOURCES.csv"
    if not path.is_file():
        return {}
    with path.open(encoding="utf-8", newline="") as rows:
        return {row["key"]: f"{row['citation']} ({row['how']})" for row in csv.DictReader(rows)}
