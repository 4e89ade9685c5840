"""The words of a titration to figures: masses and their balance, volumes and their glass."""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal

from stockroom.chemistry.glassware import ISO, GlassKind, Ware, ware
from stockroom.chemistry.made import mass_input
from stockroom.chemistry.titration import Dilution, Measured
from stockroom.chemistry.uncertainty import Input
from stockroom.errors import BadAmount, BadInput
from stockroom.measure.amounts import Kind
from stockroom.measure.parsing import parse_amount
from stockroom.measure.reading import quote, tidy

_PIPETTES, _FLASKS = (
    tuple(size for size, _ in ISO[kind].sizes) for kind in (GlassKind.PIPETTE, GlassKind.FLASK)
)
# of two burettes of one size the table's coarser is the usual one, and the wider doubt
_BURETTES = dict(sorted(ISO[GlassKind.BURETTE].sizes))
_MADE_UP = re.compile(
    r"(?P<what>.+?),? (?:(?:dissolved(?: in (?:\w+ )?water)?,? (?:and )?)?"
    r"(?:made up|diluted) (?:to|in)|dissolved in|in|to)"
    r" (?P<volume>[0-9][0-9 .,]*\S+(?: of .+| flask| volumetric flask)?)"
)
_AMOUNT = re.compile(
    r"(?P<amount>[0-9][0-9 .,]*(?:e[+-]?[0-9]+)? ?[A-Za-zμ]+3?) (?:of )?(?P<of>.+)", re.IGNORECASE
)
_NUMBER = re.compile(r"[0-9][0-9 .,]*(?:e[+-]?[0-9]+)?", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Held:
    """A standard as typed: "0.3562 g", "sodium oxalate", and the "250 cm3" it was made up to."""

    amount: str
    of: str = ""
    made_up_to: str = ""


def held_of(text: str) -> Held:
    """ "0.3562 g of sodium oxalate in 250 cm3" in its parts. Raises: BadInput for "0.2 g of"."""
    plain = tidy(text)
    made_up = _MADE_UP.fullmatch(plain)
    what, volume = (made_up["what"], made_up["volume"]) if made_up else (plain, "")
    found = _AMOUNT.fullmatch(what)
    amount, of = (found["amount"], found["of"]) if found else (what, "")
    if what.endswith(" of"):
        raise BadInput(f"--standard {quote(text)}: of what?", "Name it after the amount.")
    # "250 cm3 of water" and "250 cm3 flask" are 250 cm³
    volume = re.sub(r" (?:of .+|(?:volumetric )?flask)$", "", volume)
    return Held(amount, of, volume)


def mass_of(text: str, where: str) -> tuple[Input, float]:
    """A mass in g with the doubt of its last figure, and that figure's step in g."""
    amount = parse_amount(text, where=where)
    number = _NUMBER.match(tidy(text))
    if amount.kind is not Kind.MASS or amount.micro <= 0 or number is None:
        raise BadAmount(f"{where} {quote(text)} is not a mass above 0.", "Give it in g, as read.")
    typed = Decimal(number[0].strip().replace(" ", "").replace(",", "."))
    # the last figure written is what the balance showed, in whatever unit it was written
    exponent = typed.as_tuple().exponent
    step = float(Decimal(1).scaleb(min(int(exponent), 0))) * amount.number / float(typed)
    return mass_input(amount.number, step), step


def dilutions_of(text: str, glass_class: str) -> tuple[Dilution, ...]:
    """ "10 cm3 to 250 cm3, then 25 cm3 to 100 cm3" as dilutions, the first done first.

    Raises: BadInput, BadAmount.
    """
    steps = re.split(r"[,;]? +then +|[,;] +", text.strip()) if text.strip() else []
    return tuple(_dilution(step, glass_class) for step in steps)


def _dilution(text: str, glass_class: str) -> Dilution:
    taken, to, made = text.partition(" to ")
    if not to:
        raise BadInput(f"--dilution {text!r}: from what to what?", 'Write "10 cm3 to 250 cm3".')
    return Dilution(
        pipetted(volume_of(taken, "--dilution"), glass_class),
        made_up(volume_of(made, "--dilution"), glass_class),
    )


def volume_of(text: str, where: str) -> float:
    """A volume in cm³. Raises: BadAmount for anything else, or nothing."""
    amount = parse_amount(text, where=where)
    if amount.kind is not Kind.VOLUME or amount.micro <= 0:
        raise BadAmount(f"{where} {text!r} is not a volume above 0.", "Give it in cm3.")
    return amount.number


def pipetted(cm3: float, glass_class: str) -> Measured:
    """A volume measured into the flask: by a bulb pipette of that size, else from a burette."""
    if cm3 in _PIPETTES:
        return Measured(cm3, ware("pipette", cm3, glass_class))
    # no bulb pipette of that size: it was run from a burette
    size = next((each for each in _BURETTES if each >= cm3), 100.0)
    return Measured(cm3, ware("burette", size, glass_class, step=_BURETTES[size]))


def made_up(cm3: float, glass_class: str) -> Measured:
    """A volume made up to the mark of the flask that holds it."""
    size = next((each for each in _FLASKS if each >= cm3), _FLASKS[-1])
    return Measured(cm3, ware("flask", size, glass_class))


def burette_of(cm3: float, glass_class: str) -> Ware:
    """The burette of that size. Raises: BadAmount for a size there is none of."""
    return ware("burette", cm3, glass_class, step=_BURETTES.get(cm3))
