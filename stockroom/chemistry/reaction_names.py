"""The names a titration is asked for by: "KMnO4 on Fe2+", "NaOH / KHP", "hypo on bleach".

A formula finds its reaction by what it is made of (`reaction_forms.py`), so that none has
to be listed here. Names of substances beyond these are for whoever has the tables.
"""

from __future__ import annotations

import re
from difflib import get_close_matches

from stockroom.chemistry.reaction_forms import moles_in
from stockroom.chemistry.reactions import TITRATIONS, Side, Titration
from stockroom.errors import BadInput, UnknownName
from stockroom.measure.reading import tidy

# what the bench calls what the equations name; ions stand for the salt of theirs
_ALSO = {
    "sodium hydroxide": "hydroxide; oh-; caustic soda; alkali",
    "potassium hydroxide": "caustic potash",
    "hydrochloric acid": "hydrochloric; muriatic acid",
    "sulfuric acid": "sulfuric; sulphuric acid; sulphuric",
    "nitric acid": "nitric",
    "phosphoric acid": "orthophosphoric acid",
    "perchloric acid": "chloric(vii) acid",
    "sulfamic acid": "sulphamic acid; amidosulfuric acid; aminosulfonic acid",
    "formic acid": "methanoic acid; hcooh",
    "acetic acid": "ethanoic acid; vinegar; ch3cooh; ch3co2h; hac",
    "lactic acid": "2-hydroxypropanoic acid",
    "benzoic acid": "c6h5cooh",
    "acetylsalicylic acid": "aspirin",
    "salicylic acid": "2-hydroxybenzoic acid",
    "oxalic acid": "ethanedioic acid; oxalic",
    "succinic acid": "butanedioic acid",
    "tartaric acid": "2,3-dihydroxybutanedioic acid",
    "potassium hydrogen phthalate": "khp; phthalate; hydrogen phthalate; "
    "potassium hydrogenphthalate; potassium biphthalate; potassium acid phthalate",
    "potassium hydrogentartrate": "potassium hydrogen tartrate; cream of tartar",
    "potassium hydrogen iodate": "potassium biiodate; potassium hydrogen diiodate",
    "sodium carbonate": "carbonate; co32-; soda; soda ash; washing soda",
    "sodium hydrogencarbonate": "hydrogencarbonate; hco3-; bicarbonate; sodium bicarbonate; "
    "sodium hydrogen carbonate; baking soda; bicarb",
    "calcium carbonate": "chalk; limestone; marble",
    "calcium hydroxide": "limewater; lime water; slaked lime",
    "barium hydroxide": "baryta; baryta water",
    "ammonia": "ammonia solution; aqueous ammonia; ammonium hydroxide",
    "borax": "sodium tetraborate; disodium tetraborate; tetraborate",
    "Tris": "tham; trometamol; tris(hydroxymethyl)aminomethane; tris base",
    "permanganate": "potassium permanganate; potassium manganate(vii); manganate(vii); mno4-",
    "oxalate": "sodium oxalate; ethanedioate; sodium ethanedioate; c2o42-",
    "iron(II)": "iron; iron wire; fe2+; fe(ii); ferrous; ferrous iron; iron(ii) sulfate; "
    "ferrous sulfate; ammonium iron(ii) sulfate; ferrous ammonium sulfate; fas; mohr's salt; "
    "mohr salt; mohrs salt",
    "hydrogen peroxide": "peroxide",
    "nitrite": "sodium nitrite; no2-",
    "dichromate": "potassium dichromate; cr2o72-; potassium dichromate(vi)",
    "cerium(IV)": "cerium(iv) sulfate; ceric sulfate; ceric; cerium; ce4+; ce(iv)",
    "DCPIP": "2,6-dichlorophenolindophenol; dichlorophenolindophenol; dpip",
    "thiosulfate": "sodium thiosulfate; sodium thiosulphate; thiosulphate; thio; hypo; s2o32-",
    "iodine": "iodine in iodide; iodine solution; i3-; triiodide",
    "iodate": "potassium iodate; potassium iodate(v); io3-",
    "bromate": "potassium bromate; potassium bromate(v); bro3-",
    "persulfate": "potassium persulfate; peroxodisulfate; potassium peroxodisulfate; s2o82-; "
    "persulphate",
    "hypochlorite": "bleach; sodium hypochlorite; chlorate(i); sodium chlorate(i); ocl-; clo-; "
    "available chlorine",
    "calcium hypochlorite": "bleaching powder",
    "bromine": "bromine water",
    "chlorine": "chlorine water",
    "dissolved oxygen": "oxygen",
    "copper(II)": "copper; cu2+; cu(ii); copper(ii) sulfate; copper sulfate; cupric",
    "iron(III)": "fe3+; fe(iii); ferric; iron(iii) chloride; ferric chloride",
    "ascorbic acid": "vitamin c",
    "sulfite": "sodium sulfite; so32-; sulphite; sodium sulphite",
    "hydrogensulfite": "sodium hydrogensulfite; sodium bisulfite; bisulfite; hso3-",
    "metabisulfite": "sodium metabisulfite; disulfite; sodium disulfite; metabisulphite; "
    "sodium metabisulphite; potassium metabisulfite; s2o52-",
    "tin(II)": "tin; sn2+; sn(ii); tin(ii) chloride; stannous chloride; stannous",
    "arsenic(III) oxide": "arsenic trioxide; arsenious oxide; arsenic(iii); white arsenic",
    "silver nitrate": "silver; ag+",
    "chloride": "sodium chloride; common salt; salt; potassium chloride; cl-",
    "bromide": "potassium bromide; sodium bromide; br-",
    "iodide": "potassium iodide; sodium iodide; i-",
    "thiocyanate": "potassium thiocyanate; ammonium thiocyanate; scn-",
    "EDTA": "disodium edta; na2edta; edta disodium salt; disodium edetate; na2h2y; h2y2-",
    "calcium": "ca2+; ca(ii); calcium chloride",
    "magnesium": "mg2+; mg(ii); magnesium sulfate; epsom salts",
    "zinc": "zn2+; zn(ii); zinc sulfate",
}
_NAMED = {
    also.strip(): name
    for name, others in _ALSO.items()
    for also in (name.lower(), *others.split(";"))
}
_BETWEEN = (" on ", " against ", " versus ", " vs ", " vs. ", " with ", "/", "–", " - ")
_ENDING = re.compile(
    r"(?P<flask>.+?),? \(?(?:to (?:the )?)?(?P<place>first|second|1st|2nd)"
    r" (?:end[ -]?|equivalence )point\)?",
    re.IGNORECASE,
)
_PLACES = {"1st": "first", "2nd": "second"}


def titration_of(text: str) -> Titration:
    """The titration called so: "thiosulfate on iodate", "KMnO4 on Fe2+", "NaOH / KHP".

    What is in the burette comes first; ", first end point" may end it. Raises:
    UnknownName with the nearest three; BadInput where it has two end points and none is said.
    """
    burette, flask = sides_of(text)
    flask, ending = _without_end_point(flask)
    found = _between(burette, flask)
    if not found:
        raise _unknown(text, _between(flask, burette))
    # one's own equation before another salt's: oxalic acid stands in both
    exact = [row for row in found if _plainly(burette, row.burette) and _plainly(flask, row.flask)]
    return _at_end_point(exact or found, ending, text)


def sides_of(text: str) -> tuple[str, str]:
    """What is said of the burette and of the flask, as typed; the second may be empty."""
    plain = tidy(text)
    for between in _BETWEEN:
        burette, found, flask = plain.partition(between)
        if found:
            return burette.strip(), flask.strip()
    return plain, ""


def names_it(word: str, side: Side) -> bool:
    """Is that a name or a formula of what stands there? One mole of it must be one mole of that.

    >>> iron = Side("iron(II)", "FeSO4", 1)
    >>> names_it("FAS", iron), names_it("(NH4)2Fe(SO4)2.6H2O", iron), names_it("salt", iron)
    (True, True, False)
    """
    return _is_name(word, side) or moles_in(word, side.name, side.formula) == 1


def _between(burette: str, flask: str) -> list[Titration]:
    return [
        row for row in TITRATIONS if names_it(burette, row.burette) and names_it(flask, row.flask)
    ]


def _is_name(word: str, side: Side) -> bool:
    plain = tidy(word).lower().replace("sulph", "sulf")
    return _NAMED.get(plain, plain).lower() == side.name.lower() or plain == side.formula.lower()


def _plainly(word: str, side: Side) -> bool:
    # the same atoms in another order are the same formula
    return _is_name(word, side) or moles_in(word, "", side.formula) is not None


def _without_end_point(flask: str) -> tuple[str, str]:
    found = _ENDING.fullmatch(flask)
    if found is None:
        return flask, ""
    place = found["place"].lower()
    return found["flask"].strip(), f"{_PLACES.get(place, place)} end point"


def _at_end_point(found: list[Titration], ending: str, text: str) -> Titration:
    """The one that ends there; the whole way where nothing is said and that is held."""
    for row in found:
        if row.end_point == ending:
            return row
    listed = ", or ".join(f'"{row.name}"' for row in found)
    raise BadInput(f'"{text}": to which end point?', f"Write {listed}.")


def _unknown(text: str, turned: list[Titration]) -> UnknownName:
    if turned:
        return UnknownName(
            f'No titration "{text}" is held; the other way round is: {turned[0].name}.',
            "What is in the burette comes first.",
        )
    burette, _ = sides_of(text)
    held = [row for row in TITRATIONS if names_it(burette, row.burette)]
    if held:
        flasks = ", ".join(dict.fromkeys(row.titrand for row in held))
        return UnknownName(
            f'No titration "{text}" is held.', f"With {held[0].titrant} in the burette: {flasks}."
        )
    names = {row.name.lower(): row.name for row in TITRATIONS}
    close = get_close_matches(tidy(text).lower(), names, n=3, cutoff=0.6)
    near = ", ".join(names[one] for one in close)
    return UnknownName(
        f'No titration "{text}" is held.',
        f"Nearest: {near}. The burette's comes first." if near else "See: stockroom titrate",
    )
