"""What was typed, at the command line or into a page, to values; every refusal quotes it."""

from __future__ import annotations

import math
from datetime import date
from typing import TYPE_CHECKING

from stockroom.errors import BadAmount, BadInput

if TYPE_CHECKING:
    from stockroom.measure.amounts import Amount
    from stockroom.measure.by_eye import ByEye
    from stockroom.service.estimates import Weighed


def day_or_none(text: str | None, where: str) -> date | None:
    """A day typed after the option `where`, or None. Raises: BadDate."""
    if text is None:
        return None
    from stockroom.measure.days import parse_day

    return parse_day(text, where=where)


def time_or_none(text: str | None, where: str) -> int | None:
    """Minutes after midnight of a time typed after `where`, or None. Raises: BadDate."""
    if text is None:
        return None
    from stockroom.measure.days import parse_time

    return parse_time(text, where=where)


def amount_of(text: str) -> Amount:
    """An amount with its unit. Raises: BadAmount."""
    from stockroom.measure.parsing import parse_amount

    return parse_amount(text)


def amount_or_none(text: str | None) -> Amount | None:
    """An amount with its unit, or None. Raises: BadAmount."""
    return None if text is None else amount_of(text)


def drawn_of(
    bottle: str, amount: str | None, gross: str | None, tare: str | None
) -> Amount | ByEye | Weighed:
    """What was drawn from a bottle: an amount, an estimate, or the bottle as it weighs now.

    Raises: BadInput unless one of them is said, and only one; BadAmount.
    """
    from stockroom.measure.by_eye import parse_drawn
    from stockroom.service.estimates import Weighed

    if (amount is None) == (gross is None):
        both = "" if amount is None else f" {amount} drawn, and {gross} gross:"
        raise BadInput(
            f"{bottle}:{both} how much was drawn?",
            'Give an AMOUNT ("100 cm3", "a third left"), or --gross "812 g".',
        )
    if gross is not None:
        return Weighed(amount_of(gross), amount_or_none(tare))
    if tare is not None:
        raise BadInput(f"{bottle}: a tare of {tare}, and no gross.", 'Add --gross "812 g".')
    return parse_drawn(amount or "")


def pence_or_none(text: str | None, where: str) -> int | None:
    """Pounds typed after `where`, "£14.50", in whole pence; or None. Raises: BadAmount."""
    if text is None:
        return None
    from stockroom.measure.reading import read_number

    pence = read_number(text.strip().removeprefix("£"), where=where, whole=text) * 100
    if pence != int(pence):
        raise BadAmount(f"{where} {text!r} has parts of a penny.", "Give pounds and pence.")
    return int(pence)


def fraction_or_none(text: str | None, where: str) -> float | None:
    """An assay typed after `where`, "99.5 %" as 0.995, over 0 to 100 %; or None.

    Raises: BadInput.
    """
    value = number_or_none(text, where)
    if value is not None and value > 100:
        raise BadInput(f"{where} {text!r} is over 100 %.", "Read it off the label again.")
    return None if value is None else value / 100


def whole(text: str, where: str) -> int:
    """A whole number, below zero too: what is sensible is for the use case to say.

    Raises: BadInput.
    """
    try:
        return int(text)
    except ValueError:
        raise BadInput(
            f"{where} {text!r} is not a whole number.", "Write a plain one, as 12."
        ) from None


def whole_or_none(text: str | None, where: str) -> int | None:
    """A whole number typed after `where`, or None. Raises: BadInput."""
    return None if text is None else whole(text, where)


def percent(text: str, where: str) -> float:
    """A per cent from 0 up, with or without its sign. Raises: BadInput."""
    value = _number(text)
    if not (math.isfinite(value) and value >= 0):
        raise BadInput(
            f"{where} {text!r} is not a per cent from 0 up.", "Write a plain number, as 10."
        )
    return value


def number_or_none(text: str | None, where: str) -> float | None:
    """A number above zero typed after `where`, "97 %" as 97, or None. Raises: BadInput."""
    if text is None:
        return None
    value = _number(text)
    if not (math.isfinite(value) and value > 0):
        raise BadInput(
            f"{where} {text!r} is not a number above 0.", "Write a plain number, as 1.18."
        )
    return value


def signed_or_none(text: str | None, where: str) -> float | None:
    """A number that may be below zero typed after `where`, "20 °C" as 20, or None.

    Raises: BadInput.
    """
    if text is None:
        return None
    value = _number(text.strip().removesuffix("C").removesuffix("°").replace("−", "-"))
    if not math.isfinite(value):
        raise BadInput(f"{where} {text!r} is not a number.", "Write a plain one, as 20 or -5.")
    return value


def density_or_none(text: str | None, where: str) -> float | None:
    """A density in g/cm³ typed after `where`, 0.5 to 20, or None. Raises: BadInput."""
    value = number_or_none(text, where)
    # as in the store's own tables, where the same slip is caught
    if value is not None and not 0.5 <= value <= 20:
        raise BadInput(f"{where} {text!r} is not between 0.5 and 20.", "In g/cm³, not kg/m³?")
    return value


def _number(text: str) -> float:
    try:
        return float(text.strip().removesuffix("%"))
    except ValueError:
        return math.nan


def column_and_value(word: str) -> tuple[str, str]:
    """A cell typed as COLUMN=VALUE. Raises: BadInput quoting it."""
    column, equals, value = word.partition("=")
    if not equals or not column:
        raise BadInput(f"{word!r} is not COLUMN=VALUE.", "Write it as place=A5.")
    return column.strip(), value.strip()
