"""Forms for what gets a number: a bottle that came, one nobody knows, and that one named."""

from __future__ import annotations

from stockroom.reports.pages.form_cautions import form_caution
from stockroom.service import stock, unknown
from stockroom.service.answers import Done
from stockroom.service.typed import fraction_or_none
from stockroom.web.forms.field import BOTTLE, LINE, ON, Field, Form
from stockroom.web.forms.typed import Typed


def _arrive(typed: Typed) -> Done:
    assay = typed.read("assay", lambda text: fraction_or_none(text, "Assay"))
    opened = None if typed.text("opened").lower() == "no" else typed.day("opened")
    count = typed.whole("count")
    return stock.arrive(
        typed.path,
        typed.needed("line"),
        typed.amount_or_none("size"),
        printed=typed.needed("printed"),
        place=typed.or_none("place"),
        count=1 if count is None else count,
        opened=opened,
        cap=typed.text("cap"),
        note=typed.text("note"),
        label=stock.Label(typed.text("lot"), assay, typed.amount_or_none("tare")),
        order=typed.text("order"),
        **typed.when(),
    )


def _unknown(typed: Typed) -> Done:
    look, size, place = typed.needed("look"), typed.amount("size"), typed.needed("place")
    return unknown.log_unknown(typed.path, look, size, place=place, **typed.when())


def _name_unknown(typed: Typed) -> Done:
    bottle, line, known = typed.needed("bottle"), typed.needed("line"), typed.needed("evidence")
    return unknown.name_unknown(typed.path, bottle, line, evidence=known, **typed.when())


_CAPS = (("", "not looked at"), ("vented", "vented"), ("tight", "tight"))

_ARRIVING = (
    LINE,
    Field("size", "What one holds", "amount", hint="500 g; as last time, if left empty"),
    Field("place", "Put away at", "place", hint="A2; as last time, if left empty"),
    Field(
        "printed", "Date printed on it", needed=True, hint="as it stands there, 2029-01; else none"
    ),
    Field("count", "How many alike", "number", usual="1", hint="each gets a number"),
    Field("opened", "Opened on", "date", hint="only if it came opened"),
    Field("cap", "Its cap", "choice", choices=_CAPS),
    Field("lot", "The maker's lot", hint="if there is one"),
    Field("assay", "Assay of this very bottle", "number", hint="99.5, in per cent"),
    Field("tare", "Empty it weighs", "amount", hint="with its cap, as 172 g"),
    Field("note", "Anything written on it", "long"),
    Field("order", "Of the order", hint="P01, if it came of one"),
    ON,
)

FORMS = (
    Form(
        "arrive",
        "Arrived",
        "A bottle arrived: it gets a number and is put away, as last time if it came before.",
        _ARRIVING,
        _arrive,
    ),
    Form(
        "unknown",
        "Unknown bottle",
        "A bottle nobody can name: a number, and a label that says to leave it alone.",
        (
            Field("look", "How it looks", needed=True, hint="brown powder, label gone"),
            Field("size", "Holds about", "amount", needed=True, hint="100 g, or 250 cm3"),
            Field("place", "Where it stands", "place", needed=True, hint="X1"),
            ON,
        ),
        _unknown,
        caution=form_caution("unknown"),
    ),
    Form(
        "name-unknown",
        "Unknown named",
        "An unknown is known now, by evidence; it stands apart until somebody has looked at it.",
        (
            BOTTLE,
            Field("line", "What it proved to be", "line", needed=True),
            Field("evidence", "How it is known", "long", needed=True, hint="never by guess"),
            ON,
        ),
        _name_unknown,
        caution=form_caution("name-unknown"),
    ),
)
"""The forms of this file."""
