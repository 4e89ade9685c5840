"""What a use case that writes says back."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Any


@dataclass(frozen=True, slots=True)
class Done:
    """What was saved, in one sentence, with what may be wanted next.

    `bottle` and `entry` are the numbers it touched; `next` a command that
    usually follows, `undo` the one that takes it back where there is no entry
    to put right; `practice` whether the store is the invented college;
    `also` more entries that are put right by themselves, as each of several arrivals;
    `details` further lines (draws of a make, children of a spoiled bottle).
    """

    text: str
    bottle: str = ""
    entry: int | None = None
    next: str = ""
    practice: bool = False
    details: tuple[str, ...] = ()
    undo: str = ""
    also: tuple[int, ...] = ()

    def telling(self, more: tuple[str, ...]) -> Done:
        """The same with these further lines behind its own."""
        return replace(self, details=(*self.details, *more))

    def as_data(self) -> dict[str, Any]:
        """The same as data, for --json and for the API: keys are added to, never renamed."""
        return {
            "text": self.text,
            "bottle": self.bottle or None,
            "entry": self.entry,
            "practice": self.practice,
            "details": list(self.details),
            "next": self.next or None,
            "undo": self.undo or None,
        }
