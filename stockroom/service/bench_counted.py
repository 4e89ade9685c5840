"""A strength as typed, read with the substance in mind: "as N", and peroxide's bare number."""

from __future__ import annotations

import re
from dataclasses import replace

from stockroom.chemistry.counted_as import Part, formula_named, part_of, split
from stockroom.errors import BadAmount, MissingFigure
from stockroom.measure.formats import format_number
from stockroom.measure.parsing import parse_strength
from stockroom.measure.reading import quote
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service import bench_tables as shipped
from stockroom.service.bench_names import Stuff

_NEAR = 0.01  # per cent
# the trade names it by its density: "880 ammonia" has 0.880 g/cm³
_A_DENSITY = re.compile(
    r"(?:0?[.](?P<point>(?:8[5-9]|9\d)\d?)|(?P<whole>8[5-9]\d|9\d\d))\s*(?:g/cm3|g/cm³|s\.?g\.?)?"
)
_BY_WEIGHT = frozenset(
    {StrengthUnit.GRAMS, StrengthUnit.WV, StrengthUnit.WW, StrengthUnit.PPM_MV, StrengthUnit.PPM_MM}
)


def read_strength(text: str, stuff: Stuff, *, where: str = "strength") -> Strength:
    """A strength of `stuff`; one counted as a part of it comes as so much of the whole.

    "1000 ppm m/v as N" of potassium nitrate has the value 7218, and keeps its text.
    Raises: BadAmount for what cannot be read, and for a part that is not in it.
    """
    try:
        return parse_strength(text, where=where)
    except BadAmount as trouble:
        found = split(text)
        plain = _plain(found[0], where) if found else None
        if found is None or plain is None:
            raise trouble from None
    factor, part = _whole_for_part(found[1], stuff, f"{where} {quote(text)}")
    return replace(plain, value=plain.value * factor, text=text.strip(), counted_as=part.formula)


def refuse_a_density(text: str, stuff: Stuff) -> None:
    """Pass for anything but ammonia named by its density, "0.880" or "880".

    Raises: BadAmount with the per cent that such an ammonia has.
    """
    number = _A_DENSITY.fullmatch(text.strip().lower())
    if number is None or stuff.substance != "ammonia":
        return
    density = int((number["point"] or number["whole"]).ljust(3, "0")) / 1000
    percent = _percent_of_density("ammonia", density)
    about = f" Ammonia of {density:.3f} g/cm³ is about {percent:.0f} % w/w." if percent else ""
    raise BadAmount(
        f"strength {quote(text)}: is that its density?{about}",
        f'Write "{percent:.0f} % w/w".' if percent else "Write the % w/w off the label.",
    )


def _percent_of_density(table: str, density: float) -> float | None:
    from stockroom.chemistry.densities import density_at

    # ammonia grows lighter as it grows stronger
    most = density_at(table, 0.0).high
    weak, strong = 0.0, most
    if density < density_at(table, most).value:
        return None
    while strong - weak > _NEAR:
        middle = (weak + strong) / 2
        lighter = density_at(table, middle).value < density
        weak, strong = (weak, middle) if lighter else (middle, strong)
    return strong


def counted_in_words(strength: Strength, stuff: Stuff) -> tuple[str, ...]:
    """What a strength was counted as; nothing where it was counted as the substance itself."""
    if not strength.counted_as:
        return ()
    factor, part = _whole_for_part(strength.counted_as, stuff, strength.text)
    whole = format_number(factor * part.grams_per_mole)
    held = f"{format_number(part.grams_per_mole)} g of it in {whole} g"
    return (f"counted as {part.formula}: {held} of {stuff.name}",)


def as_written(value: float, strength: Strength, stuff: Stuff) -> tuple[float, str]:
    """A value in the unit of `strength` as the number that was written counts it, and the unit."""
    if not strength.counted_as:
        return value, str(strength.unit)
    factor, part = _whole_for_part(strength.counted_as, stuff, strength.text)
    return value / factor, f"{strength.unit} as {part.formula}"


def _plain(text: str, where: str) -> Strength | None:
    try:
        found = parse_strength(text, where=where)
    except BadAmount:
        return None
    # moles are counted as they are, and so are volumes
    return found if found.unit in _BY_WEIGHT else None


def _whole_for_part(words: str, stuff: Stuff, shown: str) -> tuple[float, Part]:
    """The g of the substance for one g of the part."""
    formula = stuff.formula or (shipped.row_of(stuff.substance) or {}).get("formula", "")
    mass = stuff.molar_mass
    if not formula or mass is None:
        raise MissingFigure(
            f"{shown}: counted as {words}, and no formula is held for {stuff.name or 'it'}.",
            "Add --of with the formula, or count the whole substance.",
        )
    part = part_of(re.sub(r"\s", "", formula), formula_named(words), name=stuff.name)
    return mass / part.grams_per_mole, part
