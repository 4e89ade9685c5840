"""The form of a titration: titres in, and the strength found of a bottle worked out from them."""

from __future__ import annotations

from stockroom.service import titrate, titrate_bottle
from stockroom.service.answers import Done
from stockroom.service.figures import assay_of, cm3_of, titres_of
from stockroom.web.forms.field import BOTTLE, ON, Field, Form, sure
from stockroom.web.forms.typed import Typed


def _titrate(typed: Typed) -> Done:
    when = typed.when()
    bottle, asked = typed.needed("bottle"), _asked(typed)
    found = titrate.titrate(asked, store=typed.path, as_at=typed.today)
    return titrate_bottle.record(typed.path, bottle, found, sure=typed.yes("sure"), **when).done


def _asked(typed: Typed) -> titrate.Asked:
    titres = typed.needed("titres")
    with typed.about("titres"):
        read = titres_of(titres.replace(";", " ").split())
    label = typed.read("assay", lambda text: assay_of(text, "Assay"))
    return titrate.Asked(
        typed.needed("reaction"),
        read,
        titrant=typed.text("titrant"),
        standard=typed.text("standard"),
        uncertainty=typed.text("uncertainty"),
        sample=typed.text("sample"),
        dilution=typed.text("dilution"),
        assay_percent=label.percent if label else None,
        assay_within=label.within if label else 0.0,
        blank_cm3=_cm3(typed, "blank", "0.00", zero=True),
        within_cm3=_cm3(typed, "within", "0.10"),
        burette_cm3=_cm3(typed, "burette", "50"),
        glass_class=typed.choice("glass") if typed.text("glass") else "B",
    )


def _cm3(typed: Typed, name: str, usual: str, *, zero: bool = False) -> float:
    field = typed.form.field(name)
    text, label = typed.text(name) or usual, field.label if field else name
    with typed.about(name):
        return cm3_of(text, label, like=usual, zero=zero)


FORMS = (
    Form(
        "titrate",
        "Titrated",
        "The strength is worked out from the titres and kept: the bottle's recheck starts again.",
        (
            BOTTLE,
            Field(
                "reaction",
                "What was titrated on what",
                "reaction",
                needed=True,
                hint="from the burette on what the flask held: thiosulfate on iodate",
            ),
            Field("titres", "Titres, in cm³", needed=True, hint="as read: 25.30 25.35"),
            Field(
                "standard",
                "Standard in the flask",
                hint="where its strength is the known one: 25.00 cm3 of 0.0167 M, 0.1675 g of KHP"
                " or 0.3562 g of sodium oxalate in 250 cm3",
            ),
            Field(
                "titrant",
                "Known strength in the burette",
                hint="where that is the known one: 0.0987 mol/dm3, or its bottle, as S01",
            ),
            Field("uncertainty", "Standard uncertainty of what is known", hint="0.0002 mol/dm3"),
            Field("sample", "Aliquot in the flask", hint="25.00 cm3"),
            Field(
                "dilution",
                "Sample diluted before",
                hint="10 cm3 to 250 cm3, then 25 cm3 to 100 cm3",
            ),
            Field("assay", "Assay of what was weighed", hint="99.9 ± 0.1 %"),
            Field("blank", "Blank, in cm³", hint="taken off every titre"),
            Field("within", "Titres may lie apart by, in cm³", hint="0.10, if left empty"),
            Field("burette", "Burette, in cm³", hint="50, if left empty"),
            Field(
                "glass",
                "Class of the glassware",
                "choice",
                choices=(("B", "B"), ("A", "A")),
                usual="B",
            ),
            sure("Keep it all the same"),
            ON,
        ),
        _titrate,
        "Looks and strengths",
    ),
)
"""The form of this file."""
