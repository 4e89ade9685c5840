"""What somebody typed into a form: each value read, or refused beside its field."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass
from datetime import date
from typing import TypedDict, TypeVar

from stockroom.errors import BadInput, StockroomError
from stockroom.measure.amounts import Amount
from stockroom.measure.strengths import Strength
from stockroom.service import typed as words
from stockroom.settings import StoreAt
from stockroom.web.forms.field import LONGEST, Form

Value = TypeVar("Value")


class AtField(StockroomError):
    """A refusal that stands beside one field of a form; "" for the form as a whole."""

    def __init__(self, field: str, error: StockroomError) -> None:
        super().__init__(error.message, error.hint)
        self.field, self.error = field, error
        self.exit_code = error.exit_code


class When(TypedDict):
    """What every event carries: the day it happened, the day it is entered, and who."""

    on: date | None
    today: date
    by: str


@dataclass(frozen=True, slots=True)
class Typed:
    """The values of one form, with the store, the day and the initials they are for."""

    form: Form
    values: Mapping[str, str]
    path: StoreAt
    today: date
    by: str

    def text(self, name: str) -> str:
        """What was typed; "" for nothing. Raises: AtField for more than a field takes."""
        value = self.values.get(name, "").strip()
        if len(value) > LONGEST:
            told = f"{value[:30]}… is {len(value)} signs long, and {LONGEST} are taken."
            raise AtField(name, BadInput(told, "Say it shorter."))
        check_plain(name, value)
        return value

    def needed(self, name: str) -> str:
        """What was typed, which must be something. Raises: AtField."""
        value = self.text(name)
        if not value:
            label = self._label(name)
            raise AtField(name, BadInput(f"{label} is empty.", f"Fill in {label.lower()}."))
        return value

    def or_none(self, name: str) -> str | None:
        """What was typed, or None for nothing."""
        return self.text(name) or None

    def choice(self, name: str) -> str:
        """One of the choices, which must be made. Raises: AtField."""
        value, field = self.text(name), self.form.field(name)
        choices = [one for one, _ in field.choices if one] if field else []
        if value not in choices:
            said = f"{value!r} is no choice" if value else "nothing is chosen"
            told = f"{self._label(name)}: {said}."
            raise AtField(name, BadInput(told, f"Choose {' or '.join(choices)}."))
        return value

    def yes(self, name: str) -> bool:
        """Whether a box was ticked."""
        return self.text(name) not in ("", "no", "false")

    def day(self, name: str) -> date | None:
        """A day, or None for nothing. Raises: AtField."""
        return self.read(name, lambda text: words.day_or_none(text, self._label(name)))

    def time(self, name: str) -> int | None:
        """Minutes after midnight, or None for nothing. Raises: AtField."""
        return self.read(name, lambda text: words.time_or_none(text, self._label(name)))

    def day_needed(self, name: str) -> date:
        """A day, which must be said. Raises: AtField."""
        return self._there(name, self.day)

    def time_needed(self, name: str) -> int:
        """Minutes after midnight, which must be said. Raises: AtField."""
        return self._there(name, self.time)

    def amount(self, name: str) -> Amount:
        """An amount with its unit, which must be said. Raises: AtField."""
        return self._there(name, self.amount_or_none)

    def amount_or_none(self, name: str) -> Amount | None:
        """An amount with its unit, or None for nothing. Raises: AtField."""
        return self.read(name, words.amount_of)

    def whole(self, name: str) -> int | None:
        """A whole number, or None for nothing. Raises: AtField."""
        return self.read(name, lambda text: words.whole(text, self._label(name)))

    def whole_needed(self, name: str) -> int:
        """A whole number, which must be said. Raises: AtField."""
        return self._there(name, self.whole)

    def strength(self, name: str) -> Strength:
        """A strength with its unit, which must be said. Raises: AtField."""
        return self._there(name, self.strength_or_none)

    def strength_or_none(self, name: str) -> Strength | None:
        """A strength with its unit, or None for nothing. Raises: AtField."""
        from stockroom.measure.parsing import parse_strength

        return self.read(name, lambda text: parse_strength(text, where=self._label(name)))

    def signed(self) -> str:
        """Whose hand this is. Raises: AtField where nobody says."""
        if not self.by.strip():
            told = "Nobody's initials stand beside this."
            raise AtField("by", BadInput(told, "Write yours: they stand with every entry."))
        return self.by

    def when(self) -> When:
        """The day it happened, the day it is entered, and who. Raises: AtField."""
        return When(on=self.day("on"), today=self.today, by=self.signed())

    @contextmanager
    def about(self, name: str) -> Iterator[None]:
        """Whatever is refused inside stands beside the field of that name. Raises: AtField."""
        try:
            yield
        except AtField:
            raise
        except StockroomError as error:
            raise AtField(name, error) from error

    def read(self, name: str, parse: Callable[[str], Value]) -> Value | None:
        """What was typed as `parse` reads it, None for nothing. Raises: AtField."""
        text = self.text(name)
        if not text:
            return None
        with self.about(name):
            return parse(text)

    def _there(self, name: str, read: Callable[[str], Value | None]) -> Value:
        self.needed(name)
        value = read(name)
        assert value is not None
        return value

    def _label(self, name: str) -> str:
        field = self.form.field(name)
        return field.label if field else name


def check_plain(name: str, value: str) -> None:
    """Pass what can be written on paper. Raises: AtField for signs that no key of a desk gives."""
    odd = next((one for one in value if not one.isprintable() and one not in "\n\r\t"), None)
    if odd is not None:
        told = f"There is a sign in it that cannot be printed (U+{ord(odd):04X})."
        raise AtField(name, BadInput(told, "Type it anew."))
