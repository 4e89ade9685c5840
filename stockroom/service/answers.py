"""What a use case that writes says back."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Done:
    """What was saved, in one sentence, with what may be wanted next.

    `bottle` and `entry` are the numbers it touched; `next` a command that
    usually follows; `practice` whether the store is the invented college;
    `details` further lines (draws of a make, children of a spoiled bottle).
    """

    text: str
    bottle: str = ""
    entry: int | None = None
    next: str = ""
    practice: bool = False
    details: tuple[str, ...] = ()
