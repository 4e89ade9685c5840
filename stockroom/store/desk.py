"""Where rows are read into a store: the open session, and what is looked up on the way."""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date, datetime
from functools import cached_property

from sqlmodel import Session, SQLModel, select

from stockroom.store.ledger import Stamp
from stockroom.store.names import Lines
from stockroom.store.tables import House, Line


@dataclass
class Desk:
    """One sitting of typing rows in: who, on what day, into which store.

    `lines` is read from the store once, at the first look-up; a row that adds a
    line says so to it.
    """

    session: Session
    by: str
    today: date
    at: datetime
    starter: bool = False
    """True while the program's own tables are read: their rules are not the house's."""
    numbered: dict[str, int] = field(default_factory=dict)
    """Entries by the number their history row gave them."""

    @cached_property
    def lines(self) -> Lines:
        """Every line by every name it answers to."""
        return Lines(self.session)

    def line(self, text: str) -> Line:
        """The line a reference stands for. Raises: UnknownName, BadInput."""
        return self.lines.find(text)

    def save(self, row: SQLModel) -> None:
        """Add a row and number it at once, since the next may refer to it."""
        # flush and not commit: the whole folder is one piece
        self.session.add(row)
        self.session.flush()

    def opening_day(self) -> date:
        """The day the shelves are taken to be as listed: the practice day, else today."""
        # a practice college must not age with the machine it is tried on
        setting = self.session.exec(select(House).where(House.setting == "practice_day")).first()
        return date.fromisoformat(setting.value) if setting else self.today

    def stamp(self, happened_on: date, entered_on: date | None = None, by: str = "") -> Stamp:
        """A stamp in this sitting's name, unless the row itself says who and when."""
        return Stamp(happened_on, entered_on or self.opening_day(), self.at, by or self.by)
