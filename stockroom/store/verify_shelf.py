"""The shelf as the plan reads it, held against what the entries say by rules of their own."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.findings import Fault
from stockroom.planning.facts import Bottle
from stockroom.store.kinds import STANDING, TURNED_UP, EntryKind
from stockroom.store.reading import Reader
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.verify_replay import Replay, few

_TOLD = (
    EntryKind.OPENED,
    EntryKind.SET_ASIDE,
    EntryKind.LOOKED,
    EntryKind.TESTED,
    EntryKind.FOUND,
    EntryKind.LOST,
    EntryKind.TURNED_UP,
    EntryKind.DISCARDED,
)


@dataclass(slots=True)
class _State:
    """Where one bottle has got to, entry by entry in the order of the days."""

    opened: str = ""
    not_found: bool = False
    gone: bool = False
    apart: str = ""

    def after(self, kind: str, day: str, *, passed: bool) -> None:
        """Take in one entry."""
        if kind == EntryKind.OPENED:
            self.opened = self.opened or day
        elif kind == EntryKind.DISCARDED:
            self.gone = True
        elif kind == EntryKind.LOST:
            self.not_found = True
        elif kind == EntryKind.TURNED_UP:
            self.not_found, self.apart = False, self.apart or TURNED_UP
        elif kind == EntryKind.FOUND:
            self.apart = "" if self.apart == TURNED_UP else self.apart
        else:
            # looked at or tested; what is set aside carries no such answer
            self.apart = "" if passed else "set aside"


def conditions(reader: Reader, story: Replay) -> list[Fault]:
    """Bottles that the plan sees in another state than their entries leave them in."""
    states = _states(reader)
    try:
        seen = bottles_of(reader, date.max, gone=True)
    # whatever it stumbles over, a store that cannot be read is a finding and no crash
    except (KeyError, ValueError, IndexError) as error:
        text = f"its shelves cannot be read ({type(error).__name__}: {error})"
        return [Fault("store", text, "shelf", _FAULT)]
    rows = reader.pairs("SELECT number, id FROM bottle")
    poured = set(reader.pairs(_POURED, EntryKind.MIXED))
    found = [
        Fault(bottle.number, said, "shelf", _FAULT)
        for bottle in seen
        for said in _differs(
            bottle,
            states.get(rows[bottle.number], _State()),
            story.held[rows[bottle.number]],
            rows[bottle.number] in poured,
        )
    ]
    return few(found, "shelf")


_FAULT = (
    "That is a fault of the program: keep a copy of the store, and tell whoever looks after it."
)

_POURED = (
    "SELECT id, id FROM bottle WHERE decanted_from IS NOT NULL"
    " OR id IN (SELECT bottle_id FROM entry WHERE kind = ?)"
)


def _states(reader: Reader) -> dict[int, _State]:
    marks = ", ".join("?" * len(_TOLD))
    rows = reader.ask(
        "SELECT bottle_id, kind, happened_on, passed FROM entry"
        f" WHERE kind IN ({marks}) AND {STANDING} ORDER BY happened_on, id",
        *_TOLD,
    )
    states: dict[int, _State] = {}
    for bottle, kind, day, passed in rows:
        states.setdefault(bottle, _State()).after(kind, day, passed=bool(passed))
    return states


def _differs(bottle: Bottle, state: _State, held: int, poured: bool) -> Iterator[str]:
    record = bottle.record
    if bottle.left != held:
        yield f"is read as holding {bottle.left}, and its entries come to {held}"
    if record.gone != state.gone:
        yield f"is read as {'gone' if record.gone else 'there'}, and its entries say otherwise"
    if record.not_found != state.not_found:
        yield f"is read as {'not found' if record.not_found else 'found'}, and is not"
    if state.apart and not record.set_aside:
        yield "is read as in use, and its entries set it aside"
    # what was poured goes on where its source had got to
    if not poured and bool(record.opened or record.opened_guessed) != bool(state.opened):
        yield f"is read as {'opened' if record.opened else 'sealed'}, and is not"
