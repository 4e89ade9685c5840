"""Any name finds it: keys, items, other names, formulas, registry numbers, parts of words.

Nothing is ever created by a lookup: no match shows the three nearest, and two
matches are listed for the person to choose from.
"""

from __future__ import annotations

import re
from typing import TypeVar

from sqlalchemy import literal_column
from sqlmodel import Session, SQLModel, col, select

from stockroom.chemistry.strength import canonical
from stockroom.errors import BadInput, StockroomError, UnknownName
from stockroom.measure.parsing import parse_strength
from stockroom.measure.reading import tidy
from stockroom.store.likeness import near, plain, unknown
from stockroom.store.tables import (
    Booking,
    Bottle,
    Department,
    Line,
    OtherName,
    Place,
    Recipe,
    Substance,
)

Table = TypeVar("Table", bound=SQLModel)

_MOST_LISTED = 8
_BARE_NUMBER = re.compile(r"[0-9]+([.,][0-9]+)?")


def find_line(session: Session, text: str, *, kind: str = "") -> Line:
    """The stock line a name, with or without a strength, stands for: "hypo 0.1 M", "KI 0.100".

    `kind` settles a name that could be a solid or its solution, where an amount tells.
    Raises: UnknownName with the nearest three; BadInput listing the choices when several fit.
    """
    return Lines(session).find(text, kind=kind)


def line_keyed(session: Session, key: str) -> Line | None:
    """The line with exactly this key; None where there is none yet."""
    return session.exec(select(Line).where(Line.key == key)).first()


class Lines:
    """Every line with all the names it answers to; read once, `add` as rows come in."""

    def __init__(self, session: Session) -> None:
        self._session = session
        self._lines: dict[str, Line] = {}
        self._named: dict[str, list[Line]] = {}
        self._substances: dict[int | None, Substance] = {
            row.id: row for row in session.exec(select(Substance))
        }
        self._others: dict[int, list[str]] = {}
        for other in session.exec(select(OtherName).order_by(col(OtherName.id))):
            self._others.setdefault(other.substance_id, []).append(other.name)
        for line in session.exec(select(Line).order_by(col(Line.id))):
            self.add(line)

    def add(self, line: Line) -> None:
        """Let a line be found from now on."""
        self._lines[plain(line.key)] = line
        for name in self._names(line):
            self._named.setdefault(name, []).append(line)

    def find(self, text: str, *, kind: str = "") -> Line:
        """As `find_line`."""
        # a key typed in full is never ambiguous
        exact = self._lines.get(plain(text))
        if exact is not None:
            return exact
        words = tidy(text).split()
        # the longest name first, so that "sulfuric acid 2.00" is not read as "sulfuric" of "acid"
        for end in range(len(words), 0, -1):
            named = self._named.get(_spelt(" ".join(words[:end])), [])
            fitting = self._at_strength(named, " ".join(words[end:]))
            if fitting:
                return _only(text, fitting, kind)
        return self._by_part(text, kind)

    def _names(self, line: Line) -> list[str]:
        substance = self._substance(line)
        names = [line.item, line.formula]
        if substance is not None and substance.id is not None:
            names += [substance.substance, substance.formula, substance.cas]
            names += self._others.get(substance.id, [])
        return list(dict.fromkeys(_spelt(name) for name in names if name))

    def _substance(self, line: Line) -> Substance | None:
        if line.substance_id is not None and line.substance_id not in self._substances:
            found = self._session.get_one(Substance, line.substance_id)
            others = select(OtherName).where(OtherName.substance_id == line.substance_id)
            self._substances[line.substance_id] = found
            rows = self._session.exec(others.order_by(col(OtherName.id)))
            self._others[line.substance_id] = [row.name for row in rows]
        return self._substances.get(line.substance_id)

    def _at_strength(self, named: list[Line], written: str) -> list[Line]:
        if not named or not written:
            return named
        # on this bench a bare number after a name is mol/dm³; alone it would be refused
        wanted = f"{written} mol/dm3" if _BARE_NUMBER.fullmatch(written) else written
        return [line for line in named if self._is_strength(line, wanted)]

    def _is_strength(self, line: Line, wanted: str) -> bool:
        if plain(line.strength_text) == plain(wanted):
            return True
        substance = self._substance(line)
        try:
            asked = canonical(
                parse_strength(wanted),
                molar_mass=substance.molar_mass if substance else None,
                density=line.density,
            )
        # not a strength after all: the words belong to a name
        except StockroomError:
            return False
        if line.strength is None or asked.unit != line.unit:
            return False
        # labels are written to three figures, so half a part in a thousand is the same strength
        return abs(asked.value - line.strength) <= 5e-4 * line.strength

    def _by_part(self, text: str, kind: str) -> Line:
        part = plain(text)
        fitting = [line for key, line in self._lines.items() if part and part in key]
        if not fitting:
            names = {line.key for line in self._lines.values()}
            raise _new_here(text, names)
        return _only(text, fitting, kind)


def _new_here(text: str, names: set[str]) -> UnknownName:
    """The error for a line nobody knows: the nearest, and how it is written down if it is new."""
    stranger = unknown("stock line", text, names)
    if not text.strip():
        return UnknownName('Which stock line is ""?', stranger.hint)
    if near(text, names):
        return stranger
    add = f"stockroom add lines item='{text.strip()}' form=solid"
    return UnknownName(stranger.message, f"{stranger.hint} If it is new here: {add}")


def _spelt(name: str) -> str:
    # the three ways of writing a hydrate's dot
    return plain(re.sub(r"[*.](?=[0-9]*H2O)", "·", tidy(name)))


def _only(text: str, fitting: list[Line], kind: str) -> Line:
    # a kind nothing has settles nothing: better to list all the choices
    fitting = [line for line in fitting if line.kind == kind] or fitting
    if len(fitting) == 1:
        return fitting[0]
    items = [line for line in fitting if plain(line.item) == plain(text)]
    if len(items) == 1:
        return items[0]
    keys = sorted(line.key for line in fitting)
    listed = "; ".join(keys[:_MOST_LISTED]) + ("; …" if len(keys) > _MOST_LISTED else "")
    raise BadInput(f'"{text.strip()}" could be {len(keys)} things: {listed}.', "Say which.")


def find_bottle(session: Session, text: str) -> Bottle:
    """The bottle with that number. Raises: UnknownName with the nearest three."""
    return _by_column(session, Bottle, "number", text, "bottle")


def find_booking(session: Session, text: str) -> Booking:
    """The booking with that number. Raises: UnknownName with the nearest three."""
    return _by_column(session, Booking, "number", text, "booking")


def number_in_use(session: Session, text: str) -> bool:
    """Whether a booking carries that number already."""
    return plain(text) in {plain(number) for number in session.exec(select(Booking.number))}


def find_place(session: Session, text: str) -> Place:
    """The place by its short or its long name. Raises: UnknownName with the nearest three."""
    return _by_column(session, Place, "place", text, "place", "name")


def find_department(session: Session, text: str) -> Department:
    """The department by code or name. Raises: UnknownName with the nearest three."""
    return _by_column(session, Department, "department", text, "department", "name")


def find_substance(session: Session, text: str) -> Substance:
    """The substance by name, another name, formula or registry number.

    Raises: UnknownName with the nearest three; BadInput listing several of one formula.
    """
    # as it stands in the table, which is how nearly every row of another table has it
    exact = session.exec(select(Substance).where(Substance.substance == text.strip())).first()
    if exact is not None:
        return exact
    for other in session.exec(select(OtherName).order_by(col(OtherName.id))):
        if _spelt(other.name) == _spelt(text):
            return session.get_one(Substance, other.substance_id)
    rows = list(session.exec(select(Substance).order_by(col(Substance.id))))
    fitting = [row for row in rows if _spelt(text) in {_spelt(row.formula), _spelt(row.cas)} - {""}]
    if len(fitting) > 1:
        # propanal and propanone are both C3H6O, and only a person knows which is meant
        listed = " or ".join(row.substance for row in fitting[:_MOST_LISTED])
        raise BadInput(f'"{text.strip()}" could be {listed}.', "Write the name.")
    return fitting[0] if fitting else _by_column(session, Substance, "substance", text, "substance")


def other_names(session: Session, substance: Substance | None) -> tuple[str, ...]:
    """The other names of a substance, in the order they were entered."""
    if substance is None:
        return ()
    rows = select(OtherName).where(OtherName.substance_id == substance.id)
    return tuple(row.name for row in session.exec(rows.order_by(col(OtherName.id))))


def substance_of(session: Session, line: Line) -> Substance | None:
    """The substance a line holds, None for mixtures and sundries."""
    return session.get(Substance, line.substance_id) if line.substance_id else None


def find_recipe(session: Session, text: str, version: int | None = None) -> Recipe:
    """The recipe by code or title; the newest version unless one is named.

    Raises: UnknownName with the nearest three codes.
    """
    rows = list(session.exec(select(Recipe).order_by(col(Recipe.version).desc())))
    named = [row for row in rows if plain(text) in (plain(row.recipe), plain(row.title))]
    for row in named:
        if version is None or row.version == version:
            return row
    if named:
        raise UnknownName(
            f"{named[0].recipe} has no version {version}.", f"The newest is {named[0].version}."
        )
    codes, titles = {row.recipe for row in rows}, {row.title for row in rows}
    raise unknown("recipe", text, codes | titles)


def _by_column(
    session: Session, table: type[Table], column: str, text: str, what: str, *also: str
) -> Table:
    # as it stands in the table, which is how nearly everybody writes it
    held = getattr(table, column)
    exact = session.exec(select(table).where(col(held).in_((text, text.strip().upper())))).first()
    if exact is not None:
        return exact
    rows = list(session.exec(select(table).order_by(literal_column("id"))))
    for name in (column, *also):
        for row in rows:
            if plain(str(getattr(row, name))) == plain(text) != "":
                return row
    raise unknown(what, text, (str(getattr(row, column)) for row in rows))


def bookings_alike(session: Session, booking: Booking) -> list[str]:
    """The numbers of standing bookings of the same recipe, hour, groups and department."""
    alike = select(Booking).where(
        Booking.recipe_id == booking.recipe_id,
        Booking.on_day == booking.on_day,
        Booking.minute == booking.minute,
        Booking.groups == booking.groups,
        Booking.department_id == booking.department_id,
        Booking.firmness != "dropped",
    )
    return sorted(one.number for one in session.exec(alike))
