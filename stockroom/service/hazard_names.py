"""What hazards are worked out from: the limits, lines and names of a store, or of none.

A name is looked for among bottles and lines first, then among substances; the tables
that travel along stand behind the store.
"""

from __future__ import annotations

from collections.abc import Callable, Collection, Mapping
from dataclasses import dataclass, field
from datetime import date

from stockroom.errors import BadAmount, BadInput, MissingFigure, UnknownName
from stockroom.measure.parsing import parse_strength
from stockroom.planning.facts import Bottle, Form, Line
from stockroom.safety.clp import NOT_ENTERED
from stockroom.safety.hazards import SheetText
from stockroom.service import bench_tables as shipped
from stockroom.service.bench_names import Stuff, of_line, solute
from stockroom.service.hazard_contents import Recipes
from stockroom.store.former_rules import former_class
from stockroom.store.hazards import LimitBook, limit_book, texts_of
from stockroom.store.likeness import plain
from stockroom.store.reading import Reader, Row
from stockroom.store.snapshot_bottles import bottle_of
from stockroom.store.snapshot_lines import lines_of, methods_of


@dataclass(frozen=True, slots=True)
class House:
    """What a store knows that hazards are worked out from; empty where there is none."""

    book: LimitBook
    recipes: Recipes = field(default_factory=lambda: Recipes({}, {}))
    others: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    texts: Callable[[str], tuple[SheetText, ...]] = lambda _: ()
    bottle: Callable[[str], Bottle | None] = lambda _: None
    numbers: Collection[str] = ()
    substances: tuple[Stuff, ...] = ()
    formers: Mapping[str, str] = field(default_factory=dict)

    def names(self, stuff: Stuff) -> tuple[str, ...]:
        """What its limits may be held under: its own names, then the shipped tables' name."""
        own = (stuff.substance, *self.others.get(stuff.substance, ()), stuff.name)
        named = [shipped.other_names().get(plain(name), "") for name in own if name]
        return (*own, *named)

    def former(self, stuff: Stuff) -> str:
        """The class of peroxide-former it is, as the house says, else the lists; "" for none."""
        written, liquid = self.formers.get(stuff.substance, ""), stuff.form is Form.LIQUID
        return former_class(self.names(stuff), written, liquid=liquid)


def shipped_book(reader: Reader | None = None) -> LimitBook:
    """The limits that travel along, and before them those of an open store."""
    from stockroom.service.database import seeds_folder

    return limit_book(seeds_folder(), reader)


def house_of(reader: Reader, as_at: date) -> House:
    """What an open store knows, as at a day."""
    rows = {row["id"]: row for row in reader.rows("substance")}
    others: dict[str, tuple[str, ...]] = {}
    for row in reader.rows("other_name"):
        substance = rows[row["substance_id"]]["substance"]
        others[substance] = (*others.get(substance, ()), row["name"])
    return House(
        shipped_book(reader),
        Recipes(lines_of(reader), methods_of(reader)),
        others,
        lambda key: texts_of(reader, key),
        lambda number: bottle_of(reader, number, as_at),
        [row["number"] for row in reader.ask("SELECT number FROM bottle ORDER BY number")],
        tuple(
            _stuff(name, row)
            for row in rows.values()
            for name in (row["substance"], *others.get(row["substance"], ()))
        ),
        {row["substance"]: row["peroxide_former"] for row in rows.values()},
    )


def _stuff(name: str, row: Row) -> Stuff:
    return Stuff(
        name,
        row["substance"],
        None,
        row["molar_mass"],
        storage_group=row["storage_group"],
        formula=row["formula"],
        liquid_density=row["density"],
    )


def stuff_named(house: House, what: str, strength: str | None) -> tuple[Stuff, str | None]:
    """The substance and the strength, also where both stand in one text: "NaOH 0.5 mol/dm3"."""
    stuffs = [*map(of_line, house.recipes.lines.values()), *house.substances]
    try:
        return solute(what, stuffs), strength
    except UnknownName as stranger:
        words = what.split()
        for end in range(len(words) - 1, 0, -1) if strength is None else ():
            name, rest = " ".join(words[:end]), " ".join(words[end:])
            try:
                # "hydroxid 0.4 M" is no strength, so "sodium" was not the substance
                parse_strength(rest)
                return solute(name, stuffs), rest
            except (UnknownName, BadInput):
                continue
        nearest, _, _ = stranger.hint.partition(" Or give")
        raise UnknownName(
            f"{what!r} is no bottle, line or substance I know: hazards {NOT_ENTERED}.",
            nearest or "Give its name or its formula.",
        ) from None


def kept_at(stuff: Stuff) -> str | None:
    """The strength of what is kept only as a solution: limewater, saturated.

    None for a substance by its own name, and for what is bought as it is.
    Raises: MissingFigure for one kept at several strengths, or of which nothing says any.
    """
    rows = [row for row in shipped.lines() if plain(row["item"]) == plain(stuff.name)]
    solutions = rows and all(row["form"] == Form.SOLUTION for row in rows)
    if plain(stuff.name) == plain(stuff.substance) or not solutions:
        return None
    strengths = list(dict.fromkeys(row["strength"] for row in rows))
    if len(strengths) == 1 and strengths[0]:
        return strengths[0]
    known = f" It is kept at {' and '.join(strengths)}." if any(strengths) else ""
    raise MissingFigure(
        f"{stuff.name}: how strong is it?{known}",
        "Give a strength, or ask in a store that has its method.",
    )


def line_named(house: House, what: str, strength: str | None) -> Line | None:
    """The line meant: by key, by item and strength as written, or the only one of its name."""
    wanted = {plain(what)} if strength is None else {plain(f"{what} {strength}")}
    lines = house.recipes.lines.values()
    for line in lines:
        if plain(line.key) in wanted:
            return line
    names = {plain(what), plain(_substance(house, what))}
    named = [line for line in lines if {plain(line.item), plain(line.substance)} & names]
    if strength is None:
        alike = [line for line in lines if plain(line.item) == plain(what)]
        return alike[0] if len(alike) == 1 else None
    return next((line for line in named if _same_strength(line, strength)), None)


def _substance(house: House, what: str) -> str:
    own = (name for name, others in house.others.items() if plain(what) in map(plain, others))
    return next(own, shipped.other_names().get(plain(what), what))


def _same_strength(line: Line, strength: str) -> bool:
    if not line.strength_text:
        return False
    try:
        asked, held = parse_strength(strength), parse_strength(line.strength_text)
    except BadAmount:
        return False
    # labels are written to three figures, so half a part in a thousand is the same strength
    return asked.unit is held.unit and abs(asked.value - held.value) <= 5e-4 * held.value
