"""What stands beside the unit of a strength, or in its place, in words.

"0.1 N (KMnO4 to Mn2+)", "100 vol at 24 dm3/mol", "5 % w/v available chlorine",
"saturated at 20 °C", "1 in 10 of 2 mol/dm3", "1:10" and "1+9". What the words come
to in sums is for `chemistry` to say.
"""

from __future__ import annotations

import re
from decimal import Decimal

from stockroom.errors import BadAmount
from stockroom.measure.reading import quote, read_number
from stockroom.measure.strengths import Strength, StrengthUnit, unit_of, which_of

_SHARE = re.compile(
    r"(?P<one>[0-9.]+) (?:parts? )?in (?P<total>[0-9][0-9 .,]*)(?: parts?)?(?P<rest>(?: .*)?)",
    re.IGNORECASE,
)
_RATIO = re.compile(r"(?P<one>[0-9.]+) ?: ?(?P<total>[0-9][0-9 .,]*)(?P<rest>(?: .*)?)")
_PLUS = re.compile(r"\(?(?P<one>[0-9.]+) ?\+ ?(?P<total>[0-9.]+)\)?(?P<rest>(?: .*)?)")
_TO = re.compile(r"(?P<one>[0-9.]+) (?:parts? )?to (?P<total>[0-9.]+)(?: parts?)?", re.IGNORECASE)
_OF = re.compile(r"of (?P<stock>.+)", re.IGNORECASE)
# a pharmacy's ratio says itself what is in what: "1 in 1000 w/v" is 0.1 g in 100 cm³
_KINDS = {
    "w/v": StrengthUnit.WV,
    "m/v": StrengthUnit.WV,
    "w/w": StrengthUnit.WW,
    "m/m": StrengthUnit.WW,
    "v/v": StrengthUnit.VV,
}

_SATURATED = re.compile(
    r"(?:saturated|satd\.?|sat\.?)(?: solution)?"
    r"(?:[ ,]*(?:at|@|\()? ?(?P<degrees>-?[0-9]+(?:[.,][0-9]+)?)"
    r" ?(?:°|o|deg(?:rees)? ?)? ?C(?:elsius)?\)?)?",
    re.IGNORECASE,
)

_FRACTION = re.compile(
    r"(?P<unit>[MN]) ?/ ?(?P<parts>[0-9][0-9.]*(?:[ ,][0-9]{3})*(?![0-9]))"
    r"(?:(?:[ ,;:]+|(?=\())(?P<reaction>.+))?"
)
_NORMAL = re.compile(
    r"(?P<unit>mN|N|normal|[mμu]?eq(?:uiv(?:alent)?s?)?\.? ?(?:/|per) ?(?:dm3|litre|liter|l|cm3|ml)"
    r"|[mμu]?eq(?:uiv(?:alent)?s?)? ?(?:dm-3|l-1))(?:(?:[ ,;:]+|(?=\())(?P<reaction>.*))?",
    re.IGNORECASE,
)
# the pattern forgets capitals for the sake of "Eq/L"; a small n is no unit
_SMALL = frozenset({"n", "mn", "Mn", "MN"})
_VOL_AT = re.compile(
    r"(?P<unit>vols?\.?|volumes?)[ ,(]+(?:(?:at|@|by|with|using) )?"
    r"(?:(?P<gas>[0-9]+(?:[.,][0-9]+)?) ?(?:dm3|l|litres?)(?: ?/ ?| per )mol(?:e)?"
    r"|(?P<room>rtp|room temperature))\)?",
    re.IGNORECASE,
)
_CHLORINE = re.compile(
    r"(?P<unit>.*?) ?\(?(?:(?:of|as) )?(?:"
    r"(?:available|avail\.?|av\.?|active) ?(?:chlorine|cl2?)|(?<=as )(?:chlorine|cl2))\)?"
    r"(?P<kind>(?: \(?[wm]/[wmv]\)?)?)",
    re.IGNORECASE,
)
# what one of a unit is as a per cent of available chlorine
_AS_PER_CENT = {
    StrengthUnit.WV: (StrengthUnit.CHLORINE, Decimal(1)),
    StrengthUnit.GRAMS: (StrengthUnit.CHLORINE, Decimal("0.1")),
    StrengthUnit.PPM_MV: (StrengthUnit.CHLORINE, Decimal("0.0001")),
    StrengthUnit.WW: (StrengthUnit.CHLORINE_WW, Decimal(1)),
    StrengthUnit.PPM_MM: (StrengthUnit.CHLORINE_WW, Decimal("0.0001")),
}
ROOM = 24.0
"""dm³/mol of a gas at room temperature, as school guidance rounds it."""


def share_of(plain: str, written: str, where: str, shown: str) -> tuple[Strength, str] | None:
    """ "1 in 10", "1:10" and "1+9": one part in ten of the whole, and the words after "of".

    "w/v", "w/w" or "v/v" after it makes it a per cent. None for any other text.
    Raises: BadAmount when the parts are more than the whole, for "1:1" and for "2:5".
    Source: "1:5" is one part in five in all, US Army course MD0837; "1+9", ISO practice.
    """
    _refuse_to(plain, shown)
    found = _SHARE.fullmatch(plain) or _RATIO.fullmatch(plain) or _PLUS.fullmatch(plain)
    if found is None:
        return None
    one = above_nothing(found["one"], where, written)
    total = above_nothing(found["total"], where, written)
    if found.re is _PLUS:
        total += one
    elif found.re is _RATIO and (one != 1 or total == 1):
        raise _which_parts(found, shown)
    if total < one:
        raise BadAmount(
            f"{shown}: more parts than the whole.",
            f'Write "{found["total"].strip()} in {found["one"]}".',
        )
    kind = _KINDS.get(found["rest"].strip().lower())
    if kind is not None:
        return Strength(float(100 * one / total), kind, written), ""
    stock = _OF.fullmatch(found["rest"].strip())
    if found["rest"].strip() and stock is None:
        raise BadAmount(
            f'{shown}: I cannot read "{found["rest"].strip()}".',
            'Write "1 in 10 of 2 mol/dm3", or "1 in 1000 w/v".',
        )
    return Strength(float(total / one), StrengthUnit.PARTS, written), stock[
        "stock"
    ] if stock else ""


def _refuse_to(plain: str, shown: str) -> None:
    # "1 to 10" is said of one in ten and of one and ten
    found = _TO.fullmatch(plain)
    if found:
        raise _which_parts(found, shown)


def _which_parts(found: re.Match[str], shown: str) -> BadAmount:
    one, total = found["one"], found["total"].strip()
    return BadAmount(
        f"{shown}: parts of the whole, or parts to parts?",
        f'Write "{one} in {total}" or "{one}+{total}".',
    )


def saturated_of(plain: str, written: str) -> Strength | None:
    """ "saturated", "saturated at 20 °C", "sat. (25 C)"; None for any other text."""
    found = _SATURATED.fullmatch(plain)
    if found is None:
        return None
    degrees = found["degrees"]
    celsius = None if degrees is None else float(degrees.replace(",", "."))
    return Strength(0.0, StrengthUnit.SATURATED, written, celsius=celsius)


def fraction_of(plain: str, written: str, where: str) -> Strength | None:
    """ "M/50" is 0.02 mol/dm³, "N/10 for acid-base" 0.1 N; None for any other text.

    Raises: BadAmount when it is divided by nothing.
    """
    found = _FRACTION.fullmatch(plain)
    if found is None or (found["unit"] == "M" and found["reaction"]):
        return None
    value = float(1 / above_nothing(found["parts"], where, written, like=f"{found['unit']}/50"))
    unit = StrengthUnit.MOLAR if found["unit"] == "M" else StrengthUnit.NORMAL
    return Strength(value, unit, written, reaction=_bare(found["reaction"] or ""))


def beside_unit(number: Decimal, unit: str, written: str, shown: str) -> Strength:
    """A number and its unit, with the reaction, gas volume or chlorine that stands there too.

    Raises: BadAmount where the unit is not enough, as `unit_of` does.
    """
    normal, vol, chlorine = (form.fullmatch(unit) for form in (_NORMAL, _VOL_AT, _CHLORINE))
    if normal and normal["unit"] not in _SMALL:
        kind, scale = unit_of(normal["unit"], number=written, shown=shown)
        reaction = _bare(normal["reaction"] or "")
        return Strength(float(number * scale), kind, written, reaction=reaction)
    if vol:
        gas = ROOM if vol["room"] else float(vol["gas"].replace(",", "."))
        return Strength(float(number), StrengthUnit.VOL, written, gas_volume=gas)
    if chlorine and chlorine["unit"]:
        # a bleach label's bare ppm is mg in 1 dm³; whoever shows the answer says so
        named = chlorine["unit"] + chlorine["kind"]
        named = "ppm m/v" if named.lower() == "ppm" else named
        _refuse_bare_per_cent(named, written, shown)
        found, scale = unit_of(named, number=written, shown=shown)
        kind, share = _chlorine_as(found, shown)
        return Strength(float(number * scale * share), kind, written)
    kind, scale = unit_of(unit, number=written, shown=shown)
    return Strength(float(number * scale), kind, written)


def above_nothing(number: str, where: str, written: str, *, like: str = "1 in 10") -> Decimal:
    """Typed digits above 0. Raises: BadAmount, with `like` as what may be written."""
    value = read_number(number, where=where, whole=written)
    if not value:
        raise BadAmount(f"{where} {quote(written)}: nothing divides by 0.", f'Write "{like}".')
    return value


def _refuse_bare_per_cent(unit: str, written: str, shown: str) -> None:
    if unit.strip() == "%":
        raise BadAmount(
            f"{shown}: Which: g in 100 cm³ (% w/v) or g in 100 g (% w/w)?",
            which_of(written, "%", ("w/v", "w/w")),
        )


def _chlorine_as(unit: StrengthUnit, shown: str) -> tuple[StrengthUnit, Decimal]:
    if unit not in _AS_PER_CENT:
        raise BadAmount(
            f"{shown}: available chlorine is not counted in {unit}.",
            "Write % w/v, % w/w, g/dm3, mg/dm3 or ppm before it.",
        )
    return _AS_PER_CENT[unit]


def _bare(reaction: str) -> str:
    # "(KMnO4 to Mn2+)", "for acid-base" and ", 5 eq per mol" all lose what introduces them
    words = reaction.strip(" ,;:")
    if words.startswith("(") and words.endswith(")"):
        words = words[1:-1]
    return re.sub(r"^(?:for|in|as in) (?:the reaction |titration |use )?", "", words).strip()
