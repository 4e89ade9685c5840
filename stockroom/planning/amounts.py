"""How much of an ingredient a volume takes, in the form really in the bottle."""

from __future__ import annotations

import re
from functools import lru_cache

from stockroom.errors import MissingFigure, NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import (
    figures_like,
    format_about,
    format_amount,
    format_number,
    format_strength,
)
from stockroom.planning.facts import Bottle, Facts, Form, Ingredient, Line

UL_PER_DM3 = 1_000_000

# a sum may change a strength's last digits, and that must not change how it is printed
_SAME = 1e-5
_WRITTEN = re.compile(r"([0-9.]+) ?([^0-9 ].*)")


@lru_cache(maxsize=65536)
def say(micro: int, kind: Kind) -> str:
    """An amount in words: 264000 µL is "264 cm³"."""
    return format_amount(Amount(kind, micro))


def say_left(bottle: Bottle, line: Line) -> str:
    """What is left in a bottle in words, with "about" while it was judged by eye."""
    # an empty bottle is seen to be empty
    if bottle.about and bottle.left:
        return format_about(Amount(line.kind, bottle.left))
    return say(bottle.left, line.kind)


def solute_in(line: Line, volume_ul: int) -> float:
    """Solute in a volume of a made line at its nominal strength: mmol, or mg without a formula.

    Raises MissingFigure for a line without a strength.
    """
    if line.strength is None:
        raise MissingFigure(
            f"{line.key} has no strength to work an amount out from.",
            "Give its method amounts per dm³ of product.",
        )
    return line.strength * volume_ul / 1000.0


def take_for(line: Line, strength: float | None, solute: float) -> int:
    """Micro-units of `line` that hold `solute` (mmol or mg), at `strength` in its unit.

    A solid uses its own formula and assay (`strength` is then `per_gram` of one bottle); a
    liquid or solution its strength on the day (nominal when None). Raises MissingFigure when
    neither is known.
    """
    # to the nearest and not up: a class that wants spare has it in its need already
    if line.form is Form.SOLID and line.solute_per_gram:
        return round(solute / (strength or line.solute_per_gram) * 1_000_000)
    held = line.strength if strength is None else strength
    if not held:
        raise MissingFigure(
            f"The strength of {line.key} is not known.",
            "Read it off the label, or titrate it and enter what you find.",
        )
    return round(solute / held * 1000.0)


def per_gram(line: Line, bottle: Bottle) -> float | None:
    """Solute in a gram of one bottle of a solid, mmol or mg, by its own assay; None without one."""
    if bottle.assay is None or not line.solute_per_gram:
        return None
    return line.solute_per_gram * bottle.assay / line.assay


def draw_for(
    ingredient: Line,
    bottle_strength: float | None,
    product: Line,
    volume_ul: int,
    per_dm3: int | None,
) -> int:
    """Micro-units of an ingredient for `volume_ul` of a product.

    `per_dm3` (micro-units per dm³) is used as it stands; None works the amount
    out from the strengths. Raises NotAllowed when the bottle is weaker than the
    product has to be, MissingFigure when a strength is not known.
    """
    # a written amount holds whatever the bottle found: it is a recipe, not a sum
    if per_dm3 is not None:
        return round(volume_ul * per_dm3 / UL_PER_DM3)
    if not strong_enough(ingredient, bottle_strength, product):
        weak, wanted = bottle_strength or ingredient.strength or 0.0, product.strength or 0.0
        raise NotAllowed(
            f"Cannot reach {format_strength(wanted, product.unit)} "
            f"from {format_strength(weak, ingredient.unit)}.",
            "Use a stronger bottle, or ask for less.",
        )
    return take_for(ingredient, bottle_strength, solute_in(product, volume_ul))


def strong_enough(ingredient: Line, strength: float | None, product: Line) -> bool:
    """True unless a liquid or solution is weaker than the product made from it."""
    if ingredient.form is Form.SOLID or product.strength is None:
        return True
    held = ingredient.strength if strength is None else strength
    # a bottle of exactly the strength asked for is used neat, whatever its last digit
    return held is not None and held >= product.strength * (1 - 1e-9)


def price(facts: Facts, line: Line) -> float:
    """What a micro-unit of a line costs in pence by the cheapest packs; 0 where nobody knows."""
    method = facts.methods.get(line.key)
    if method is None:
        return min((pack.pence / pack.size for pack in line.packs), default=0.0)
    return sum(_share_of_price(facts, line, ingredient) for ingredient in method.ingredients)


def _share_of_price(facts: Facts, line: Line, ingredient: Ingredient) -> float:
    source = facts.lines[ingredient.lines[0]]
    if ingredient.per_dm3 is not None:
        return ingredient.per_dm3 / UL_PER_DM3 * price(facts, source)
    weighed = source.form is Form.SOLID and source.solute_per_gram
    if line.strength is None or not (weighed or source.strength):
        return 0.0
    amount = take_for(source, None, solute_in(line, UL_PER_DM3))
    return amount / UL_PER_DM3 * price(facts, source)


def say_strength(line: Line, value: float | None) -> str:
    """A strength in the words of the line's own label: 7.95 mol/dm³ of peroxide as "89.1 vol".

    `value` is in the line's unit; "unknown" when None. Per cents by mass do not
    go with the strength in a straight line, so those are given in `line.unit`.
    """
    if value is None:
        return "unknown"
    if line.strength and abs(value / line.strength - 1) < _SAME:
        return line.strength_text.replace("dm3", "dm³")
    scale, unit = label_scale(line)
    if unit == line.unit:
        # as many figures as its label: 0.0460 beside 0.0500
        said, number = format_strength(value, line.unit), format_number(value)
        return said.replace(number, figures_like(number, line.strength_text), 1)
    return f"{figures_like(format_number(value * scale, 3), line.strength_text)} {unit}"


def label_scale(line: Line) -> tuple[float, str]:
    """What turns a strength in the line's unit into the label's own, and that unit as printed.

    Per cents by mass do not go with the strength in a straight line: 1 and the line's unit.

    >>> from stockroom.planning.facts import Form
    >>> line = Line("a", "a", "a", Form.SOLUTION, Kind.VOLUME, 8.0, "mol/dm3", "90 vol")
    >>> label_scale(line)
    (11.25, 'vol')
    """
    written = _WRITTEN.fullmatch(line.strength_text)
    if not written or not line.strength or "w/w" in line.strength_text:
        return 1.0, line.unit
    return float(written[1]) / line.strength, written[2].replace("dm3", "dm³")


def per_cent_by_mass(line: Line) -> float | None:
    """The % w/w of a liquid or solution by its label; None where it cannot be told.

    Without a density it counts as light as water, which puts what is denser too high.
    """
    if line.form is Form.SOLID or not line.strength:
        return None
    written = _WRITTEN.fullmatch(line.strength_text)
    if written and "w/w" in line.strength_text:
        return float(written[1])
    grams = line.molar_mass if line.unit == "mol/dm3" else 1.0
    return line.strength * grams / (10.0 * (line.density or 1.0)) if grams else None
