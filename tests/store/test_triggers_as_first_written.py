"""What the first seven migrations make on SQLite is, to the letter, what they always made.

They were put into words for two engines later on. A store that stands was made by the old
words, and `verify` compares its triggers with those of today.
"""

from __future__ import annotations

import hashlib
import sqlite3
from contextlib import closing
from pathlib import Path

from alembic import command
from alembic.config import Config
from sqlalchemy import create_engine

from stockroom.store.engine import MIGRATIONS

# of all 92 tables, indexes and triggers, worked out from the migrations before they were reworded
AS_WRITTEN = "59d97e654eaba38b3ae47c42f699554b1418723b014d8760f9afc808de5ce398"


def test_the_first_seven_layouts_come_out_as_they_always_did(tmp_path: Path) -> None:
    path = tmp_path / "old.sqlite"
    config = Config()
    config.set_main_option("script_location", str(MIGRATIONS))
    engine = create_engine(f"sqlite:///{path}")
    with engine.begin() as connection:
        config.attributes["connection"] = connection
        command.upgrade(config, "0007")
    engine.dispose()
    with closing(sqlite3.connect(path)) as raw:
        made = raw.execute(
            "SELECT type, name, sql FROM sqlite_master WHERE sql IS NOT NULL ORDER BY name"
        ).fetchall()
    text = "\n".join("|".join(each) for each in made)
    assert (len(made), hashlib.sha256(text.encode()).hexdigest()) == (92, AS_WRITTEN)
