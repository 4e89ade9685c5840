"""What reading a list came to: each row with what becomes of it, and the list as a whole."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum

from stockroom.bringing.doubts import Doubt, Weight
from stockroom.bringing.headings import Table
from stockroom.bringing.questions import Question
from stockroom.bringing.row import Incoming


class Status(StrEnum):
    """What becomes of a row."""

    ACCEPTED = "accepted"
    ASKED = "accepted with a question"
    REFUSED = "refused"
    HELD = "here already"
    LEFT_OUT = "left out"


def status_of(doubts: tuple[Doubt, ...]) -> Status:
    """What becomes of a row that is read: the weightiest doubt decides."""
    heaviest = max((doubt.weight for doubt in doubts), default=Weight.NOTE)
    decided = {Weight.REFUSED: Status.REFUSED, Weight.NOTE: Status.ACCEPTED}
    return decided.get(heaviest, Status.ASKED)


@dataclass(frozen=True, slots=True)
class RowRead:
    """One row: its number, the line it stands in, what it says and what becomes of it.

    `cells` are as they count, answers put in their place, and `written` is its name as it
    stood. `mark` is the fingerprint of its text and how often that came before, `reading`
    that of what it was read as. `bottles` are the numbers it has in the store; `why` is said
    of a row that is left out or here already; `like` is a bottle here that it may be.
    """

    row: int
    line: int
    status: Status
    cells: Mapping[str, str]
    incoming: Incoming | None = None
    doubts: tuple[Doubt, ...] = ()
    mark: str = ""
    reading: str = ""
    bottles: tuple[str, ...] = ()
    why: str = ""
    written: str = ""
    like: str = ""

    @property
    def settled(self) -> bool:
        """True where no doubt is left to be answered or judged: held, or left out."""
        return self.status in (Status.HELD, Status.LEFT_OUT)

    @property
    def goes_in(self) -> bool:
        """Whether it is written when that is agreed: nothing is open that has no careful side."""
        return (
            self.incoming is not None
            and self.incoming.whole
            and not self.settled
            and all(doubt.weight <= Weight.CAREFUL for doubt in self.doubts)
        )


@dataclass(frozen=True, slots=True)
class ListRead:
    """A list of bottles as read: how, what its columns are, and every row in its order."""

    file: str
    told: str
    table: Table
    rows: tuple[RowRead, ...]
    questions: tuple[Question, ...]

    def count(self, status: Status) -> int:
        """So many rows, not bottles: one row may stand for several."""
        return sum(row.status is status for row in self.rows)

    @property
    def going_in(self) -> tuple[RowRead, ...]:
        """The rows --agree would write, in the order of the file."""
        return tuple(row for row in self.rows if row.goes_in)
