"""What somebody typed into a form: each value read, or refused beside its field."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import date
from typing import TypedDict, TypeVar

from stockroom.errors import BadAmount, BadDate, BadInput, NotEnough, StockroomError
from stockroom.measure.amounts import Amount
from stockroom.measure.strengths import Strength
from stockroom.service import typed as words
from stockroom.settings import StoreAt
from stockroom.web.forms.field import LONGEST, Field, Form

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

    def yes(self, name: str) -> bool:
        """Whether a box was ticked."""
        return self.text(name) not in ("", "no", "false")

    def day(self, name: str) -> date | None:
        """A day, or None for nothing. Raises: AtField."""
        return self.read(name, lambda text: words.day_or_none(text, self._label(name)))

    def time(self, name: str) -> int | None:
        """Minutes after midnight, or None for nothing. Raises: AtField."""
        return self.read(name, lambda text: words.time_or_none(text, self._label(name)))

    def amount(self, name: str) -> Amount:
        """An amount with its unit. Raises: AtField."""
        self.needed(name)
        amount = self.read(name, words.amount_of)
        assert amount is not None
        return amount

    def amount_or_none(self, name: str) -> Amount | None:
        """An amount with its unit, or None for nothing. Raises: AtField."""
        return self.read(name, words.amount_of)

    def whole(self, name: str) -> int | None:
        """A whole number, or None for nothing. Raises: AtField."""
        return self.read(name, lambda text: words.whole(text, self._label(name)))

    def strength(self, name: str) -> Strength:
        """A strength with its unit. Raises: AtField."""
        from stockroom.measure.parsing import parse_strength

        self.needed(name)
        strength = self.read(name, parse_strength)
        assert strength is not None
        return strength

    def when(self) -> When:
        """The day it happened, the day it is entered, and who. Raises: AtField."""
        if not self.by.strip():
            told = "Nobody's initials stand beside this."
            raise AtField("by", BadInput(told, "Write yours: they stand with every entry."))
        return When(on=self.day("on"), today=self.today, by=self.by)

    def read(self, name: str, parse: Callable[[str], Value]) -> Value | None:
        """What was typed as `parse` reads it, None for nothing. Raises: AtField."""
        text = self.text(name)
        if not text:
            return None
        try:
            return parse(text)
        except StockroomError as error:
            raise AtField(name, error) from error

    def _label(self, name: str) -> str:
        field = self.form.field(name)
        return field.label if field else name


def blamed(form: Form, values: Mapping[str, str], error: StockroomError) -> str:
    """The field a refusal of the use case is about: of its kind, else the one it quotes; or ""."""
    if isinstance(error, AtField):
        return error.field
    filled = [each for each in form.fields if values.get(each.name, "").strip()]
    for each in filled:
        if _fits(each, error):
            return each.name
    quoted = [each for each in filled if _quotes(error.message, values[each.name])]
    # the longest says most: a bottle's number stands in nearly every message
    return max(quoted, key=lambda each: len(values[each.name])).name if quoted else ""


def _quotes(message: str, value: str) -> bool:
    # one sign stands in any sentence
    return len(value.strip()) > 1 and value.strip().lower() in message.lower()


def _fits(field: Field, error: StockroomError) -> bool:
    kinds = {BadDate: ("date", "time"), BadAmount: ("amount", "strength"), NotEnough: ("amount",)}
    return any(isinstance(error, each) and field.kind in of for each, of in kinds.items())
