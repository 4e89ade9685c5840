"""The tables of the work itself: walks along the shelves, submissions, backups that were made.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

from sqlmodel import Field

from stockroom.store.tables_house import Numbered


class Walk(Numbered, table=True):
    """A round of counting the shelves, by name; its counts are entries that point to it."""

    name: str = Field(unique=True)
    # the short names of the places it goes along, ";" between; blank is all of them
    places: str = ""
    started_on: date
    entered_on: date
    entered_at: str
    by: str


class WalkEnd(Numbered, table=True):
    """That a walk was finished; one without it can be taken up again."""

    __tablename__ = "walk_end"

    walk_id: int = Field(foreign_key="walk.id", unique=True)
    ended_on: date
    entered_on: date
    entered_at: str
    by: str
    note: str = ""


class Submission(Numbered, table=True):
    """Something sent in under a token, and the answer it got: sent twice, it counts once."""

    token: str = Field(unique=True)
    entered_on: date
    entered_at: str
    by: str
    # the answer as JSON text, given again to whoever sends the token again
    answer: str


class BackupMade(Numbered, table=True):
    """A backup that was made and proved good; appended, never altered."""

    __tablename__ = "backup_made"

    place: str
    entries: int
    digest: str
    entered_on: date
    entered_at: str
    by: str
