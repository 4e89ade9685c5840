"""The names like what somebody has typed so far, for whoever is still typing.

Light: it reads names only, never the plan, and answers within the time of a keystroke.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.errors import BadInput
from stockroom.measure.days import spell_day
from stockroom.settings import StoreAt
from stockroom.store.likeness import FAR, plain
from stockroom.store.line_names import line_names
from stockroom.store.reading import Reader, reading

MOST = 12
"""Names offered at once: what can be read at a glance. Our choice."""

SHORTEST_GUESS = 3
"""Signs typed before names merely like it are looked for; fewer are like everything. Our choice."""


@dataclass(frozen=True, slots=True)
class Named:
    """One name offered: `value` is what goes into the field, `words` tell it from others."""

    value: str
    words: str


@dataclass(frozen=True, slots=True)
class _Held:
    named: Named
    keys: tuple[str, ...]
    """What it answers to, as names are compared; the first is its number or code."""


def names_like(path: StoreAt, kind: str, text: str, *, today: date) -> tuple[Named, ...]:
    """The names of a kind like `text`, at most twelve: those that begin with it first.

    `kind` is bottle, line, place, booking, recipe, department, reaction or all; any of a
    thing's names finds it. Raises: BadInput for another kind; StoreTrouble.
    """
    readers = _KINDS.get(kind)
    if readers is None:
        raise BadInput(f"{kind[:30]!r} is no kind of name.", f"Ask for {', '.join(_KINDS)}.")
    wanted = plain(text)
    if not wanted:
        return ()
    with reading(path) as reader:
        held = [each for read in readers for each in read(reader, today)]
    return tuple(each.named for each in _likest(held, wanted)[:MOST])


def _likest(held: Sequence[_Held], wanted: str) -> list[_Held]:
    ranked = [(rank, each) for each in held if (rank := _rank(each.keys, wanted)) is not None]
    # in the order they are kept, where nothing else tells
    found = [each for _, each in sorted(ranked, key=lambda pair: pair[0])]
    if found or len(wanted) < SHORTEST_GUESS:
        return found
    return _alike(held, wanted)


def _rank(keys: Sequence[str], wanted: str) -> int | None:
    """How well it fits, 0 the best; None where none of its names holds what was typed."""
    if wanted in keys:
        return 0
    if any(key.startswith(wanted) for key in keys):
        return 1
    if any(f" {wanted}" in key for key in keys):
        return 2
    return 3 if any(wanted in key for key in keys) else None


def _alike(held: Sequence[_Held], wanted: str) -> list[_Held]:
    from rapidfuzz import fuzz, process

    keys = [(key, each) for each in held for key in each.keys]
    found = process.extract(
        wanted, [key for key, _ in keys], scorer=fuzz.WRatio, score_cutoff=FAR, limit=4 * MOST
    )
    return list(dict.fromkeys(keys[place][1] for _, _, place in found))


def _bottle_numbers(reader: Reader, today: date) -> Iterator[_Held]:
    for number, line in reader.ask(_BOTTLES):
        yield _Held(Named(number, f"{number} {line}"), (plain(number),))


def _bottles(reader: Reader, today: date) -> Iterator[_Held]:
    names = {each.key: (*each.words, *each.signs) for each in line_names(reader)}
    for number, line in reader.ask(_BOTTLES):
        yield _Held(Named(number, f"{number} {line}"), (plain(number), *names.get(line, ())))


def _lines(reader: Reader, today: date) -> Iterator[_Held]:
    for each in line_names(reader):
        # the other names stand beside it: a browser shows only what holds the signs typed
        others = [word for word in each.words if word not in plain(each.key)]
        words = f"{each.key} ({', '.join(others)})" if others else each.key
        yield _Held(Named(each.key, words), (*each.words, *each.signs))


def _places(reader: Reader, today: date) -> Iterator[_Held]:
    for short, name in reader.ask("SELECT place, name FROM place ORDER BY place"):
        yield _held(short, name)


def _departments(reader: Reader, today: date) -> Iterator[_Held]:
    asked = "SELECT department, name FROM department ORDER BY department"
    for short, name in reader.ask(asked):
        yield _held(short, name)


def _recipes(reader: Reader, today: date) -> Iterator[_Held]:
    newest = reader.pairs("SELECT recipe, title FROM recipe ORDER BY version")
    for code in sorted(newest):
        yield _held(code, newest[code])


def _reactions(reader: Reader, today: date) -> Iterator[_Held]:
    from stockroom.chemistry.reactions import TITRATIONS

    for each in TITRATIONS:
        yield _held(each.name, "")


def _bookings(reader: Reader, today: date) -> Iterator[_Held]:
    for number, code, title, on, firmness in reader.ask(_BOOKED, today.isoformat()):
        firm = "" if firmness == "firm" else f", {firmness}"
        words = f"{number} {code} {title}, {spell_day(date.fromisoformat(str(on)))}{firm}"
        yield _Held(Named(number, words), (plain(number), plain(code), plain(title)))


def _held(short: str, name: str) -> _Held:
    return _Held(Named(short, f"{short} {name}".strip()), (plain(short), plain(name)))


# what was thrown away is asked for by its number alone, and nobody has to be helped to it
_BOTTLES = """
    SELECT b.number, l.key FROM bottle b JOIN line l ON l.id = b.line_id
    WHERE NOT EXISTS (
        SELECT 1 FROM entry e WHERE e.bottle_id = b.id AND e.kind = 'discarded'
        AND NOT EXISTS (SELECT 1 FROM entry r WHERE r.puts_right = e.id)
    ) ORDER BY b.id
"""

# those still to come first
_BOOKED = """
    SELECT k.number, r.recipe, r.title, k.on_day, k.firmness
    FROM booking k JOIN recipe r ON r.id = k.recipe_id
    ORDER BY CASE WHEN k.on_day >= ? THEN 0 ELSE 1 END, k.on_day, k.id
"""

_KINDS: dict[str, tuple[Callable[[Reader, date], Iterator[_Held]], ...]] = {
    "bottle": (_bottles,),
    "line": (_lines,),
    "place": (_places,),
    "booking": (_bookings,),
    "recipe": (_recipes,),
    "department": (_departments,),
    "reaction": (_reactions,),
    "all": (_bottle_numbers, _bookings, _recipes, _lines),
}
