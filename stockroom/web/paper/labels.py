"""Labels as they are asked for at a page: which bottles, of what sort and size, on what sheet."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from stockroom.errors import BadInput, StockroomError
from stockroom.web.forms.field import Field
from stockroom.web.forms.typed import AtField, Typed
from stockroom.web.paper.sheet import Ready, Sheet, numbers_before

if TYPE_CHECKING:
    from stockroom.reports.paper.label_set import Wish

MOST = 200
"""Labels drawn at once: what is drawn keeps everybody else's paper waiting. Our choice."""

_NUMBER = re.compile(r"[A-Za-z]\d+[a-z]*")

_SORTS = (
    ("full", "full: 70 × 37 mm or larger"),
    ("opened", "strip for an opened bottle: received, opened, use by"),
    ("short", "short: for 125 cm³ or less"),
)


_OPTIONS = {
    "size": "the size",
    "sheet": "how many across and down",
    "margin": "the margin",
    "gap": "the gaps",
    "start": "the first free place",
    "full": "the full label",
    "opened": "the strip",
    "short": "the short label",
    "confirm": "the box that the list is read",
}


def _label(typed: Typed) -> Ready:
    try:
        return _made(typed)
    except AtField as refused:
        raise AtField(refused.field, _in_words(refused.error)) from refused
    except StockroomError as error:
        raise _in_words(error) from error


def _in_words(error: StockroomError) -> StockroomError:
    """A refusal that speaks of options, in the words of the fields."""
    # beside its field, what it is of is plain
    message = re.sub(r"^--[a-z]+ (?=[^:]*:)|^--short: ", "", error.message)
    hint = re.sub(r"(Write it so: |Add )--[a-z]+ ", "Write ", error.hint)
    hint = hint.replace("stockroom label ", "").replace("add --confirm", "tick --confirm")
    message = _fields_named(message)
    return type(error)(message[:1].upper() + message[1:], _fields_named(hint))


def _fields_named(text: str) -> str:
    return re.sub(r"--([a-z]+)", lambda found: _OPTIONS.get(found[1], found[1]), text)


def _made(typed: Typed) -> Ready:
    from stockroom.reports.paper.label import LABEL, things_of
    from stockroom.reports.paper.label_set import labels_of
    from stockroom.service.labels import labelled

    words, place, wish = words_of(typed.text("what")), typed.text("place"), _wish(typed)
    _check_made_on(typed, words)
    found = labelled(typed.path, words, place, as_at=typed.today, step=_not_too_many)
    house = (found.house, found.practice)
    sheet = labels_of(house, typed.today, found.bottles, found.batches, found.places, wish)
    # as the command has it: a copy of one is held against a copy of the other
    about = f"{wish.sort}: {' '.join([*words, place])}".strip()
    return Ready(LABEL, sheet, about, numbers_before(typed.path, things_of(sheet)))


def words_of(text: str) -> list[str]:
    """What was typed as names: numbers side by side, or names with commas between them."""
    parts = [each.strip() for each in re.split(r"[,;\n]", text) if each.strip()]
    found: list[str] = []
    for part in parts:
        words = part.split()
        found += words if all(map(_NUMBER.fullmatch, words)) else [part]
    return found


def _wish(typed: Typed) -> Wish:
    from stockroom.reports.paper.label import Sort
    from stockroom.reports.paper.label_grid import FULL, SHORT, STRIP, check_fits, grid_of, size_of
    from stockroom.reports.paper.label_set import Wish

    sort = Sort(typed.choice("sort") if typed.text("sort") else "full")
    usual = {Sort.OPENED: STRIP, Sort.SHORT: SHORT}.get(sort, FULL)
    with typed.about("size"):
        size = size_of(typed.or_none("size"), usual)
    start = typed.whole("start")
    with typed.about("sheet"):
        margin, gap = typed.or_none("margin"), typed.or_none("gap")
        grid = grid_of(typed.or_none("sheet"), margin, gap, 1 if start is None else start)
        if grid:
            paper = "Letter" if typed.text("paper").lower() == "letter" else "A4"
            check_fits(grid, size, paper)
    return Wish(sort, size, grid, typed.day("made_on"), typed.yes("confirm"))


def _check_made_on(typed: Typed, words: list[str]) -> None:
    if typed.text("made_on") and not any(re.fullmatch(r"[Mm]\d+", word) for word in words):
        told = f"{typed.text('made_on')}: made of which make?"
        raise AtField("made_on", BadInput(told, "Name one above, as M14."))


def _not_too_many(done: int, total: int) -> None:
    if total > MOST:
        told = f"These are {total} labels, and {MOST} are drawn at once."
        raise AtField("what", BadInput(told, "Ask shelf by shelf, or name fewer."))


label = Sheet(
    "label",
    "Labels",
    "The name in words, the strength as known, dates, the hazard text for it, number and code.",
    _label,
    (
        Field("what", "Of what", hint="S02, B14; M14 for a batch to come; names of things; or all"),
        Field("place", "Or all that stands in", "place", hint="A2"),
        Field("sort", "Which label", "choice", choices=_SORTS, usual="full"),
        Field("confirm", "Short: I have read the list of classes that may do without", "yes"),
        Field("size", "Size of one, in mm", hint="70x37, if left empty"),
        Field("sheet", "On a sheet of labels, across and down", hint="3x8; each alone, if empty"),
        Field("margin", "The sheet's left and top margin, in mm", hint="7.5,12"),
        Field("gap", "Gaps across and down, in mm", hint="2.5,0"),
        Field("start", "The first free place of a used sheet", "number", hint="1 for a fresh one"),
        Field("made_on", "The day a batch is really made", "date", hint="2027-01-26"),
    ),
    one_of=("what", "place"),
)
"""The labels. Print one sheet of them on plain paper first: many printers leave an edge blank."""
