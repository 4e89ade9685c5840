"""Which bottles hold about so much: judged by eye, and neither counted nor weighed since."""

from __future__ import annotations

from stockroom.store.kinds import EVENED, EntryKind
from stockroom.store.reading import Reader, Row

WEIGHED = "weighed: "
"""The note on a draw known by weighing the bottle begins so: what is left was measured."""


def judged_by_eye(reader: Reader, day: str, which: str) -> frozenset[int]:
    """The ids of the bottles whose content on a day (ISO) is an estimate.

    `which` says in SQL which entries count: `kinds.standing_on`, or that and one bottle.
    """
    guessed = reader.ask(
        "SELECT bottle_id, happened_on, id FROM entry"
        f" WHERE about AND happened_on <= ? AND {which}",
        day,
    )
    last: dict[int, tuple[str, int]] = {}
    for row in guessed:
        moment = (str(row["happened_on"]), int(row["id"]))
        last[row["bottle_id"]] = max(moment, last.get(row["bottle_id"], moment))
    return frozenset(
        one for one, moment in last.items() if not _seen_since(reader, one, moment, day, which)
    )


def about_after(entry: Row, before: bool) -> bool:
    """Whether what is left after an entry is an estimate, where it was `before` or was not."""
    return bool(entry["about"]) or (before and not _measured(entry["kind"], entry["note"]))


def _seen_since(reader: Reader, bottle: int, moment: tuple[str, int], day: str, which: str) -> bool:
    rows = reader.ask(
        "SELECT happened_on, id, kind, note FROM entry"
        f" WHERE bottle_id = ? AND happened_on <= ? AND {which}",
        bottle,
        day,
    )
    return any(
        (str(row["happened_on"]), int(row["id"])) > moment and _measured(row["kind"], row["note"])
        for row in rows
    )


def _measured(kind: str, note: str) -> bool:
    # what evens out an earlier count was seen by nobody
    counted = kind == EntryKind.COUNTED and not note.startswith(EVENED)
    return counted or note.startswith(WEIGHED)
