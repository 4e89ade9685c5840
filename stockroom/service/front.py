"""What stands at the top of every page: whose house, which day, and what was just done."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom import clock
from stockroom.service.answers import Done
from stockroom.service.kept import kept
from stockroom.service.once import answered
from stockroom.settings import StoreAt
from stockroom.store.reading import reading


@dataclass(frozen=True, slots=True)
class Front:
    """The house by name, the day to think of as today, whether it is practice, what was done."""

    name: str
    today: date
    practice: bool
    said: Done | None = None


def front(path: StoreAt, given: date | None, token: str = "") -> Front:
    """The front of a page as at the day given, else the practice day, else today.

    `token` is that of the submission whose answer is to be shown. Raises: StoreTrouble.
    """
    house = kept(path, "house", (), lambda: _settings(path))
    said = None
    if token:
        with reading(path) as reader:
            said = answered(reader, token)
    practice_day = house.get("practice_day")
    usual = date.fromisoformat(practice_day) if practice_day else clock.today()
    return Front(house.get("name", ""), given or usual, house.get("practice") == "yes", said)


def _settings(path: StoreAt) -> dict[str, str]:
    with reading(path) as reader:
        return reader.pairs("SELECT setting, value FROM house")
