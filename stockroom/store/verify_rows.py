"""Questions about bottles, parents and what rows name: each gives the faults it finds.

Asked in SQL that both engines read, so that nothing but the faults is fetched.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator

from stockroom.findings import Fault
from stockroom.measure.amounts import FULLEST_PERCENT, Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.store.days_held import below
from stockroom.store.kinds import BEGINNINGS, DAY_NOT_WRITTEN, INTO, STANDING, EntryKind
from stockroom.store.reading import Reader, Row
from stockroom.store.verify_replay import Replay, few


def overfull(reader: Reader, _: Replay) -> list[Fault]:
    """Bottles that hold more than they can: somebody was sure of it, so only a remark."""
    text = "holds {1}, and is full with {2}"
    mend = "Look whether that can be: stockroom count {0}."
    return _faults(
        reader, "full", text, mend, _OVERFULL, FULLEST_PERCENT, remark=True, micro=(1, 2)
    )


# the kind of what is in it comes last, as `_faults` wants it where amounts are told
_OVERFULL = (
    "SELECT number, held, size, line.kind FROM kept_balance"
    " JOIN bottle ON bottle.id = bottle_id JOIN line ON line.id = line_id"
    " WHERE size > 0 AND held * 100 > size * ?"
)


def below_nothing(reader: Reader, story: Replay) -> list[Fault]:
    """Bottles that at the end of some day held less than nothing, whatever they hold by now."""
    # what is wrong with the order or the days of its entries shows here a second time
    told = {fault.subject for fault in story.faults if fault.check in ("balance", "days")}
    text = "held {2} at the end of {1}, by the entries up to it"
    mend = "stockroom diary {0} lists them: put the wrong one right, or count {0} --on {1}."
    # entered in the order of its days, a bottle held then what it held after some entry
    if not story.late:
        return []
    faults = _faults(reader, "balance", text, mend, below(story.late), micro=(2,))
    return [fault for fault in faults if fault.subject not in told]


def opened_early(reader: Reader, _: Replay) -> list[Fault]:
    """Bottles opened before the day they came or were made."""
    text = "was opened {2} (entry {1}), before it was there ({3})"
    mend = "One of the days is wrong: stockroom put-right {1} --why …."
    return _faults(reader, "days", text, mend, _EARLY, EntryKind.OPENED, DAY_NOT_WRITTEN)


_EARLY = (
    "SELECT number, entry.id, happened_on, COALESCE(made_on, received_on)"
    " FROM entry JOIN bottle ON bottle.id = bottle_id"
    " WHERE entry.kind = ? AND entry.note <> ? AND decanted_from IS NULL"
    f" AND happened_on < COALESCE(made_on, received_on) AND {STANDING}"
)


def gone_with_something(reader: Reader, _: Replay) -> list[Fault]:
    """Bottles thrown away that still hold something."""
    text = "was thrown away (entry {1}) and still holds something"
    mend = "Put the discard right and enter it anew: stockroom put-right {1} --why …."
    return _faults(reader, "balance", text, mend, _GONE, EntryKind.DISCARDED)


_GONE = (
    "SELECT number, MAX(entry.id) FROM entry JOIN bottle ON bottle.id = entry.bottle_id"
    " JOIN kept_balance ON kept_balance.bottle_id = entry.bottle_id"
    f" WHERE entry.kind = ? AND held <> 0 AND {STANDING} GROUP BY number"
)


def parents(reader: Reader, story: Replay) -> list[Fault]:
    """Bottles made before what they were made from, from themselves, or in a circle."""
    mend = "One of the days is wrong: stockroom diary {}, then put-right."
    faults = []
    for child, older in reader.ask("SELECT bottle_id, parent_id FROM parent ORDER BY id"):
        made, came = min(story.begun.get(child, _NEVER)), min(story.begun.get(older, _NEVER))
        if "" < made[0] < came[0]:
            text = f"was made {made[0]} from {story.number(older)}, which came on {came[0]}"
            number = story.number(child)
            faults.append(Fault(number, text, "parents", mend.format(number)))
    return [*few(faults, "parents"), *_circles(reader)]


_NEVER = (("", 0),)
"""A bottle whose arrival was put right: nothing can be said of its days."""


def _circles(reader: Reader) -> Iterator[Fault]:
    """Bottles that are their own forebears. Only those still part of a circle are named."""
    numbers = reader.pairs("SELECT id, number FROM bottle")
    above: dict[int, set[int]] = {}
    for child, parent in reader.ask("SELECT bottle_id, parent_id FROM parent"):
        above.setdefault(child, set()).add(parent)
    for child, source in reader.ask(
        "SELECT id, decanted_from FROM bottle WHERE decanted_from IS NOT NULL"
    ):
        above.setdefault(child, set()).add(source)
    # who has no parent left is no part of a circle; taken away, others may be free of theirs
    while free := {one for rest in above.values() for one in rest} - above.keys():
        above = {one: rest - free for one, rest in above.items()}
        above = {one: rest for one, rest in above.items() if rest}
    if above:
        named = ", ".join(sorted(numbers.get(one, f"row {one}") for one in above))
        yield Fault(
            named.split(", ")[0],
            f"is made from itself, by way of {named}",
            "parents",
            "No command can do that: put the last good copy back, stockroom restore FILE.",
        )


def no_entry(reader: Reader, _: Replay) -> list[Fault]:
    """Bottles that nothing was ever entered of."""
    text = "is in the list of bottles, and nothing was ever entered of it"
    mend = "No command leaves one so: put the last good copy back, stockroom restore FILE."
    asked = (
        "SELECT number FROM bottle WHERE NOT EXISTS"
        " (SELECT 1 FROM entry WHERE entry.bottle_id = bottle.id) ORDER BY bottle.id"
    )
    return _faults(reader, "entries", text, mend, asked)


def nothing_given(reader: Reader, _: Replay) -> list[Fault]:
    """Bottles made here from one that gave nothing for them.

    Those that came in with a table name what they were made from, and nothing more.
    """
    text = "is said to be made from {1}, which gave nothing for it"
    mend = "Put the last good copy back, stockroom restore FILE; what gave it is in its diary."
    born = (*BEGINNINGS, TYPED)
    return _faults(
        reader, "parents", text, mend, _UNGIVEN, *born, EntryKind.DRAWN, EntryKind.DECANTED
    )


TYPED = "house"
"""Who stands in the ledger for rows of a table, as `service/database.py` writes them."""

_UNGIVEN = (
    "SELECT child.number, source.number FROM parent"
    " JOIN bottle child ON child.id = parent.bottle_id"
    " JOIN bottle source ON source.id = parent.parent_id"
    " WHERE EXISTS (SELECT 1 FROM entry born WHERE born.bottle_id = child.id"
    f' AND born.kind IN ({", ".join("?" * len(BEGINNINGS))}) AND born."by" <> ?)'
    " AND NOT EXISTS (SELECT 1 FROM entry gave WHERE gave.bottle_id = source.id"
    f" AND gave.kind IN (?, ?) AND gave.note = '{INTO}' || child.number)"
    " ORDER BY parent.id"
)


def draws_into(reader: Reader, _: Replay) -> list[Fault]:
    """What left one bottle for another that does not know it, or got another amount."""
    text = "gave {2} (entry {1}), which does not know it for a parent"
    unknown = _faults(reader, "parents", text, _DIARY, _STRAY, EntryKind.DRAWN, EntryKind.DECANTED)
    text = "got {1} from {2}, which gave {3}"
    values = (EntryKind.DECANTED, EntryKind.DECANTED_IN)
    unlike = _faults(reader, "parents", text, _DIARY, _UNLIKE, *values, micro=(1, 3))
    return [*unknown, *unlike]


_DIARY = "stockroom diary {0} shows both; put the wrong one right."

_STRAY = (
    "SELECT bottle.number, entry.id, entry.note FROM entry"
    " JOIN bottle ON bottle.id = entry.bottle_id"
    f" JOIN bottle child ON child.number = SUBSTR(entry.note, {len(INTO) + 1})"
    f" WHERE entry.kind IN (?, ?) AND entry.note LIKE '{INTO}%' AND {STANDING}"
    " AND NOT EXISTS (SELECT 1 FROM parent WHERE parent.parent_id = entry.bottle_id"
    " AND parent.bottle_id = child.id)"
)

_UNLIKE = (
    "SELECT * FROM (SELECT child.number, entry.change AS got, source.number AS of,"
    " COALESCE((SELECT -SUM(gave.change)"
    " FROM entry gave WHERE gave.bottle_id = source.id AND gave.kind = ?"
    f" AND gave.note = '{INTO}' || child.number AND +gave.puts_right IS NULL AND NOT EXISTS"
    " (SELECT 1 FROM entry undone WHERE undone.puts_right = gave.id)), 0) AS given, line.kind"
    " FROM entry JOIN bottle child ON child.id = entry.bottle_id"
    " JOIN bottle source ON source.id = child.decanted_from"
    " JOIN line ON line.id = child.line_id"
    f" WHERE entry.kind = ? AND {STANDING}) AS poured WHERE got <> given"
)


def references(reader: Reader, _: Replay) -> list[Fault]:
    """Entries that name a booking nobody knows, and orders that came as something else."""
    known = set(reader.pairs("SELECT number, number FROM booking"))
    faults = []
    for row in reader.ask(
        f"SELECT booking, MIN(id) FROM entry WHERE booking <> '' AND {STANDING} GROUP BY booking"
    ):
        strange = [name for name in str(row[0]).split(";") if name and name not in known]
        if strange:
            text = f"entry {row[1]} is for {strange[0]}, which is no booking"
            mend = f"stockroom put-right {row[1]} --why …, then enter it for the right one."
            faults.append(Fault(strange[0], text, "references", mend))
    text = "came as entry {1}, which is no arrival of what was ordered"
    mend = "Put that entry right, then: stockroom arrive … --order {0}."
    came = _faults(reader, "references", text, mend, _CAME, EntryKind.ARRIVED)
    return [*few(faults, "references"), *came]


_CAME = (
    "SELECT placed.number, entry.id FROM placed_came JOIN placed ON placed.id = placed_id"
    " JOIN entry ON entry.id = entry_id JOIN bottle ON bottle.id = entry.bottle_id"
    " WHERE entry.kind <> ? OR bottle.line_id <> placed.line_id"
)

CHECKS: tuple[Callable[[Reader, Replay], list[Fault]], ...] = (
    overfull,
    no_entry,
    nothing_given,
    below_nothing,
    opened_early,
    gone_with_something,
    parents,
    draws_into,
    references,
)
"""Every check of this file, in the order they are told."""


def _faults(
    reader: Reader,
    check: str,
    text: str,
    mend: str,
    question: str,
    *values: object,
    remark: bool = False,
    micro: tuple[int, ...] = (),
) -> list[Fault]:
    """One fault a row. `text` and `mend` have gaps for its columns; `micro` are amounts."""
    rows = [_in_words(row, micro) for row in reader.ask(question, *values)]
    told = [Fault(row[0], text.format(*row), check, mend.format(*row), remark) for row in rows]
    return few(told, check)


def _in_words(row: Row, micro: tuple[int, ...]) -> list[str]:
    said = [str(cell) for cell in row]
    for place in micro:
        said[place] = format_amount(Amount(Kind(said[-1]), row[place]))
    return said
