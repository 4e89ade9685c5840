"""The story of one bottle, for whoever wants the number of an entry or its reason."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.service.database import is_practice
from stockroom.settings import StoreAt
from stockroom.store.diary import Diary, diary_of

# handed on by name: the command line may not reach into the store
from stockroom.store.diary import Told as Told


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
