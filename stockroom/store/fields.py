"""One row of a table as typed, read column by column; the last column read is remembered."""

from __future__ import annotations

from datetime import date
from decimal import Decimal
from enum import StrEnum
from typing import TypeVar

from stockroom.errors import BadAmount, BadDate, BadInput
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import parse_day, parse_time
from stockroom.measure.reading import read_number

Choice = TypeVar("Choice", bound=StrEnum)

_YES, _NO = {"yes", "y", "true", "1"}, {"no", "n", "false", "0"}
_SUFFIX = {Kind.MASS: "g", Kind.VOLUME: "cm3", Kind.ITEMS: "items"}
_MAKE = {Kind.MASS: Amount.grams, Kind.VOLUME: Amount.cm3, Kind.ITEMS: Amount.items}


def yes_or_no(text: str, *, where: str) -> bool:
    """Whether a word says yes: "Yes", "y", "true", "1". Raises: BadInput when it says neither."""
    found = text.lower()
    if found not in _YES | _NO:
        raise BadInput(f'{where} "{text}" is neither yes nor no.', "Write yes or no.")
    return found in _YES


MOST = 10**12
"""No figure in a table of a prep room is larger. Our choice."""


class Fields:
    """The cells of one row by column name. Blank means not known.

    `column` is the last one asked for, so that whoever catches an error can say
    where it stood without every reader repeating it. `other_names` are those a
    reader learnt on the way.
    """

    def __init__(self, values: dict[str, str]) -> None:
        self._values = {name: value.strip() for name, value in values.items()}
        self.column = ""
        self.other_names: tuple[str, ...] = ()

    def at(self, column: str) -> None:
        """Say that whatever is wrong next stands in this column."""
        self.column = column

    def names(self) -> set[str]:
        """What other rows may call this one by: its first cell, a line by its substance too."""
        first = next(iter(self._values.values()), "")
        return {first, self._values.get("substance", ""), *self.other_names} - {""}

    def cells(self) -> list[str]:
        """Every cell that is not blank."""
        return [cell for cell in self._values.values() if cell]

    def text(self, column: str) -> str:
        """The cell's text, "" when blank or not given."""
        self.column = column
        return self._values.get(column, "")

    def need(self, column: str) -> str:
        """The cell's text. Raises: BadInput when it is blank."""
        found = self.text(column)
        if not found:
            raise BadInput(f"{column} is blank.", f"Give {column}=…")
        return found

    def number(self, column: str) -> float | None:
        """A plain number of zero or more, None when blank. Raises: BadAmount."""
        found = self._decimal(column)
        return None if found is None else float(found)

    def signed(self, column: str) -> float | None:
        """A number that may be below zero, such as a temperature. Raises: BadAmount."""
        found = self.text(column)
        # amounts are never below zero, temperatures may be
        negative = found.startswith(("-", "−"))
        if not found:
            return None
        value = float(read_number(found[1:] if negative else found, where=column))
        return -value if negative else value

    def within(self, column: str, least: float, most: float, doubt: str) -> float | None:
        """A number from `least` to `most`, None when blank; `doubt` asks what else was meant.

        Raises: BadAmount, quoting the cell as typed.
        """
        found = self.signed(column)
        if found is not None and not least <= found <= most:
            raise BadAmount(
                f'{column} "{self._values[column]}" is not between {least:g} and {most:g}.', doubt
            )
        return found

    def whole(self, column: str) -> int | None:
        """A whole number of zero or more, None when blank. Raises: BadAmount."""
        found = self._decimal(column)
        if found is not None and found != int(found):
            raise BadAmount(f'{column} "{found}" is not a whole number.', "Give a whole number.")
        return None if found is None else int(found)

    # through Decimal: 0.29 pounds as a float is 28.999 pence
    def pence(self, column: str) -> int | None:
        """An amount of pounds as whole pence. Raises: BadAmount for parts of a penny."""
        found = self._decimal(column)
        if found is not None and found * 100 != int(found * 100):
            raise BadAmount(f'{column} "{found}" has parts of a penny.', "Give pounds and pence.")
        return None if found is None else int(found * 100)

    def part(self, column: str, *, most: float | None = None) -> float | None:
        """A per cent as a fraction, None when blank. Raises: BadAmount above `most` per cent."""
        found = self.number(column)
        if found is not None and most is not None and found > most:
            raise BadAmount(f'{column} "{found:g}" is over {most:g}.', "Check the figure.")
        return None if found is None else found / 100

    def flag(self, column: str, *, usual: bool = False) -> bool:
        """A yes or a no, `usual` when blank. Raises: BadInput."""
        found = self.text(column)
        return yes_or_no(found, where=column) if found else usual

    def day(self, column: str) -> date | None:
        """A day, None when blank. Raises: BadDate."""
        found = self.text(column)
        return parse_day(found, where=column) if found else None

    def need_day(self, column: str) -> date:
        """A day. Raises: BadInput when blank, BadDate when unreadable."""
        return parse_day(self.need(column), where=column)

    def span(self, first: str, last: str) -> tuple[date, date]:
        """Two days in order. Raises: BadDate when the second comes before the first."""
        start, end = self.need_day(first), self.need_day(last)
        if end < start:
            raise BadDate(f"{start} to {end} runs backwards.", "Swap the two days.")
        return start, end

    def minute(self, column: str) -> int:
        """A time of day in minutes after midnight. Raises: BadInput, BadDate."""
        return parse_time(self.need(column), where=column)

    def choice(self, column: str, choices: type[Choice], usual: Choice | None = None) -> Choice:
        """One of a fixed list of words. Raises: BadInput naming them all."""
        # spreadsheets like to begin a cell with a capital
        found = self.text(column).lower() if usual is not None else self.need(column).lower()
        if not found and usual is not None:
            return usual
        if found not in [choice.value for choice in choices]:
            known = ", ".join(choices)
            raise BadInput(f'{column} "{found}" is not known.', f"Choose from: {known}.")
        return choices(found)

    def amount(self, stem: str, kind: Kind) -> int | None:
        """Micro-units from the column for this kind ("size_g"), None when blank.

        Raises: BadInput when a column for another kind is filled instead.
        """
        # a mass typed in the volume column is a slip worth catching, not a blank
        for other in Kind:
            column = f"{stem}_{_SUFFIX[other]}"
            if other is not kind and self.text(column):
                wanted = f"{stem}_{_SUFFIX[kind]}"
                raise BadInput(
                    f"{column} is filled, but this is measured in {_SUFFIX[kind]}.",
                    f"Use {wanted}.",
                )
        found = self.number(f"{stem}_{_SUFFIX[kind]}")
        return None if found is None else _MAKE[kind](found).micro

    def volume(self, column: str) -> int | None:
        """A volume in cm³ as micro-units, None when blank. Raises: BadAmount."""
        found = self.number(column)
        return None if found is None else Amount.cm3(found).micro

    def _decimal(self, column: str) -> Decimal | None:
        found = self.text(column)
        number = read_number(found, where=column) if found else None
        if number is not None and number > MOST:
            # no column of a table holds it, and a figure without end would pass for one
            raise BadAmount(f'{column} "{found}" is too large to be meant.', "Check the figure.")
        return number
