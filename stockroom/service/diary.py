"""The story of one bottle, for whoever wants the number of an entry or its reason."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date

from stockroom.errors import UnknownName
from stockroom.service.database import is_practice
from stockroom.settings import StoreAt
from stockroom.store.diary import Diary, diary_of

# handed on by name: the command line may not reach into the store
from stockroom.store.diary import Told as Told
from stockroom.store.reading import reading


@dataclass(frozen=True, slots=True)
class Story:
    """A bottle's diary, and whether it stands in the practice store."""

    diary: Diary
    practice: bool


def story(path: StoreAt, bottle: str, known_on: date | None = None) -> Story:
    """Everything ever entered for a bottle, slips and their putting-right included.

    With `known_on`, what had been entered by the end of that day.
    Raises: UnknownName with the nearest three numbers; StoreTrouble.
    """
    return Story(diary_of(path, bottle, known_on), is_practice(path))


def entry_story(path: StoreAt, entry: int) -> Story:
    """One entry of a bottle's diary, with whatever put it right.

    Raises: UnknownName for a number no entry has; StoreTrouble.
    """
    with reading(path) as reader:
        # no store numbers further, and an engine would stumble over it
        numbers = reader.ask(_BOTTLE_OF, entry) if entry < 2**63 else []
    if not numbers:
        raise UnknownName(
            f"No entry {entry} in the ledger.", "Each answer ends with the number of its entry."
        )
    told = story(path, numbers[0][0])
    about = [one for one in told.diary.entries if entry in (one.entry, one.puts_right)]
    return replace(told, diary=replace(told.diary, entries=tuple(about)))


_BOTTLE_OF = "SELECT b.number FROM entry e JOIN bottle b ON b.id = e.bottle_id WHERE e.id = ?"
