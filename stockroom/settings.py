"""Where the store is: `--store`, else `STOCKROOM_STORE`, else the user's data folder."""

from __future__ import annotations

import os
from pathlib import Path

STORE_NAME = "stockroom.sqlite"
PRACTICE_NAME = "practice.sqlite"


def data_folder() -> Path:
    """The user's data folder for this program (XDG, or the platform's own)."""
    # platformdirs costs a few milliseconds, and an explicit --store never needs it
    from platformdirs import user_data_path

    return user_data_path("stockroom", appauthor=False)


def own_store(given: str | None) -> Path:
    """The path a house of one's own is kept at: the one given, else the usual one."""
    named = given or os.environ.get("STOCKROOM_STORE")
    return Path(named).expanduser() if named else data_folder() / STORE_NAME


def practice_store(given: str | None) -> Path:
    """The path the practice college is made at: the one given, else beside the usual one."""
    named = given or os.environ.get("STOCKROOM_STORE")
    return Path(named).expanduser() if named else data_folder() / PRACTICE_NAME


def store_to_open(given: str | None) -> Path:
    """The store a command opens: one's own; failing that, the practice college."""
    own = own_store(given)
    practice = practice_store(given)
    return practice if not own.exists() and practice.exists() else own
