"""Forms for the bottle as a thing: opened, moved, counted, not found, set aside, thrown away."""

from __future__ import annotations

from stockroom.reports.pages.form_cautions import form_caution
from stockroom.service import checks, stock
from stockroom.service.answers import Done
from stockroom.web.forms.field import AMOUNT, BOTTLE, ON, WHY, Field, Form, sure
from stockroom.web.forms.typed import Typed


def _open(typed: Typed) -> Done:
    return stock.open_bottle(typed.path, typed.needed("bottle"), **typed.when())


def _move(typed: Typed) -> Done:
    bottle, place = typed.needed("bottle"), typed.needed("place")
    return stock.move(typed.path, bottle, place, **typed.when())


def _count(typed: Typed) -> Done:
    bottle, amount, sure = typed.needed("bottle"), typed.amount("amount"), typed.yes("sure")
    return stock.count(typed.path, bottle, amount, sure=sure, **typed.when())


def _lost(typed: Typed) -> Done:
    bottle, note = typed.needed("bottle"), typed.text("note")
    return checks.lost(typed.path, bottle, note=note, **typed.when())


def _turned_up(typed: Typed) -> Done:
    bottle, place = typed.needed("bottle"), typed.or_none("place")
    return checks.turned_up(typed.path, bottle, place, **typed.when())


def _spoil(typed: Typed) -> Done:
    bottle, why = typed.needed("bottle"), typed.needed("why")
    return checks.spoil(typed.path, bottle, why, **typed.when())


def _discard(typed: Typed) -> Done:
    bottle, how, why = typed.needed("bottle"), typed.needed("how"), typed.needed("why")
    return stock.discard(typed.path, bottle, how=how, why=why, **typed.when())


FORMS = (
    Form(
        "open",
        "Opened",
        "A bottle was opened: its life once opened starts.",
        (BOTTLE, ON),
        _open,
        caution=form_caution("open"),
    ),
    Form(
        "move",
        "Moved",
        "A bottle was moved to another place.",
        (BOTTLE, Field("place", "It stands now at", "place", needed=True, hint="F1"), ON),
        _move,
    ),
    Form(
        "count",
        "Counted",
        "A bottle was counted: what is left becomes what was found.",
        (BOTTLE, AMOUNT, sure("Keep it though it is odd"), ON),
        _count,
    ),
    Form(
        "lost",
        "Not found",
        "A bottle cannot be found: no plan counts on it until it turns up.",
        (BOTTLE, Field("note", "Where it was looked for", "long"), ON),
        _lost,
    ),
    Form(
        "turned-up",
        "Turned up",
        "A lost bottle turned up: it is set aside until somebody looks at it.",
        (BOTTLE, Field("place", "Where", "place", hint="its last place, if left empty"), ON),
        _turned_up,
    ),
    Form(
        "spoil",
        "Set aside",
        "A bottle is spoiled or suspected: it is set aside, and what was made from it is in doubt.",
        (BOTTLE, WHY, ON),
        _spoil,
    ),
    Form(
        "discard",
        "Thrown away",
        "A bottle was emptied and thrown away; its number is never used again.",
        (
            BOTTLE,
            Field("how", "How", needed=True, hint="the house way, as: iron waste bottle"),
            Field("why", "Why", needed=True, hint="past, weak, contaminated, surplus"),
            ON,
        ),
        _discard,
        caution=form_caution("discard"),
    ),
)
"""The forms of this file."""
