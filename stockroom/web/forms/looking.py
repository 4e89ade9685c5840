"""Forms for what was seen of a bottle: a strength found, a look, a test, its printed date."""

from __future__ import annotations

from stockroom.reports.pages.form_cautions import form_caution
from stockroom.service import checks
from stockroom.service.answers import Done
from stockroom.web.forms.field import BOTTLE, ON, Field, Form, sure
from stockroom.web.forms.typed import Typed


def _found(typed: Typed) -> Done:
    return checks.found(
        typed.path,
        typed.needed("bottle"),
        typed.strength("strength"),
        spread=typed.strength_or_none("uncertainty"),
        note=typed.text("note"),
        sure=typed.yes("sure"),
        **typed.when(),
    )


def _look(typed: Typed) -> Done:
    bottle, good = typed.needed("bottle"), typed.choice("passed") == "good"
    return checks.look(typed.path, bottle, passed=good, note=typed.text("note"), **typed.when())


def _tested(typed: Typed) -> Done:
    said = typed.choice("passed") if typed.text("passed") else ""
    return checks.tested(
        typed.path,
        typed.needed("bottle"),
        passed=said == "passed" if said else None,
        peroxide=typed.text("peroxide"),
        seen=typed.text("seen"),
        note=typed.text("note"),
        **typed.when(),
    )


def _printed(typed: Typed) -> Done:
    bottle = typed.needed("bottle")
    return checks.printed(typed.path, bottle, typed.day_needed("reading"), **typed.when())


_SUBJECT = "Looks and strengths"

FORMS = (
    Form(
        "found",
        "Strength found",
        "A strength was found by titration: the bottle's recheck starts again.",
        (
            BOTTLE,
            Field(
                "strength",
                "Strength",
                "strength",
                needed=True,
                hint="0.0987 mol/dm3",
            ),
            Field("uncertainty", "Its standard uncertainty", "strength", hint="0.0002 mol/dm3"),
            Field("note", "How it was found", "long"),
            sure("Keep it all the same"),
            ON,
        ),
        _found,
        _SUBJECT,
    ),
    Form(
        "look",
        "Looked at",
        "A bottle was looked at: good starts its life again, bad sets it aside.",
        (
            BOTTLE,
            Field(
                "passed",
                "The look said",
                "choice",
                needed=True,
                choices=(("good", "good"), ("bad", "bad")),
            ),
            Field("note", "What was seen", "long", hint="starch blank clear; milky with breath"),
            ON,
        ),
        _look,
        _SUBJECT,
    ),
    Form(
        "tested",
        "Tested for peroxide",
        "A peroxide-former was tested: only this moves its safety date.",
        (
            BOTTLE,
            Field("peroxide", "Peroxide, as H₂O₂", hint="12 mg/kg; the number says if it passed"),
            Field("seen", "Seen", hint="crystals, cloudy, a stuck cap: it overrules the number"),
            Field(
                "passed",
                "Without a number, the test said",
                "choice",
                choices=(("", "the number says"), ("passed", "passed"), ("failed", "failed")),
            ),
            Field("note", "How it was tested, and what was read", "long"),
            ON,
        ),
        _tested,
        _SUBJECT,
        caution=form_caution("tested"),
    ),
    Form(
        "printed",
        "Printed date settled",
        "Which reading of a printed date is right, where it has two.",
        (
            BOTTLE,
            Field("reading", "The day that is meant", "date", needed=True),
            ON,
        ),
        _printed,
        _SUBJECT,
    ),
)
"""The forms of this file."""
