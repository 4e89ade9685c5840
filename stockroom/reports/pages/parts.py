"""Small values pages share: a line, what can be entered beside it, and lines under a name."""

from __future__ import annotations

from dataclasses import dataclass

Pairs = tuple[tuple[str, str], ...]
"""Names with what stands in them, in their order."""


@dataclass(frozen=True, slots=True)
class Act:
    """An event that ticks a line off: pressed, it enters what the page knows already.

    `form` is the name of its form, `known` the fields that are sent unseen, `asked` those shown
    to be filled in, with what stands in them. `buttons` are (value, words); a value goes into the
    field `choice`. `other` are the words of the link to the whole form; without buttons there is
    only that.
    """

    form: str
    known: Pairs
    buttons: Pairs = ()
    asked: Pairs = ()
    choice: str = ""
    other: str = ""


@dataclass(frozen=True, slots=True)
class Row:
    """One line: an hour where one is fixed, what, what goes with it, the cautions of its step.

    `done` says what of it is entered already. `mark` is a mark with its word, as "short".
    `links` are (words, address).
    """

    what: str
    time: str = ""
    more: tuple[str, ...] = ()
    cautions: tuple[str, ...] = ()
    ref: str = ""
    done: str = ""
    mark: str = ""
    links: Pairs = ()
    acts: tuple[Act, ...] = ()
    rows: tuple[Row, ...] = ()
    """What stands under it: the things one class is set out with."""


@dataclass(frozen=True, slots=True)
class Part:
    """Lines under their heading."""

    title: str
    rows: tuple[Row, ...]


def in_address(text: str) -> str:
    """A text as it stands in an address: each sign but plain letters and digits by its bytes.

    >>> in_address("5 % & 2 cm³")
    '5%20%25%20%26%202%20cm%C2%B3'
    """
    return "".join(
        each if each.isascii() and each.isalnum() else "".join(f"%{b:02X}" for b in each.encode())
        for each in text
    )
