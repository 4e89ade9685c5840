"""Readers for recipes, their lines, bars and swaps, and for bookings."""

from __future__ import annotations

from sqlmodel import select

from stockroom.errors import BadInput
from stockroom.measure.amounts import Kind
from stockroom.measure.parsing import parse_strength_range
from stockroom.planning.facts import Closeness, Firmness, Per
from stockroom.store.booking_limits import checked_groups, checked_spare
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.names import find_department, find_recipe, find_substance, substance_of
from stockroom.store.rows_house import new_name
from stockroom.store.rows_lines import beside, number_beside
from stockroom.store.tables import Bar, Booking, Line, Recipe, Requirement, Swap


def read_recipe(desk: Desk, fields: Fields) -> None:
    """One version of a recipe."""
    code, version = fields.need("recipe"), fields.whole("version") or 1
    same = select(Recipe).where(Recipe.recipe == code, Recipe.version == version)
    if desk.session.exec(same).first():
        raise BadInput(f"{code} version {version} is there already.", "Give the next version.")
    row = Recipe(
        recipe=code,
        version=version,
        title=fields.need("title"),
        never_kept=fields.text("never_kept"),
        waste=fields.text("waste"),
        handling=fields.text("handling"),
        assessment=fields.text("assessment_ref"),
        source=fields.text("source"),
    )
    desk.save(row)


def _recipe(desk: Desk, fields: Fields) -> Recipe:
    version = fields.whole("version")
    return find_recipe(desk.session, fields.need("recipe"), version)


def read_requirement(desk: Desk, fields: Fields) -> None:
    """One line of a recipe. No closeness given means close, marked as a guess."""
    recipe = _recipe(desk, fields)
    line = desk.line(fields.need("line"))
    assert recipe.id is not None and line.id is not None
    lowest, highest, written = _strengths(desk, fields, line)
    amount = fields.amount("amount", Kind(line.kind))
    if not amount:
        raise BadInput(f"How much {line.key}?", f"Fill the amount column for {line.kind}.")
    row = Requirement(
        recipe_id=recipe.id,
        number=_number(desk, fields, recipe),
        line_id=line.id,
        lowest=lowest,
        highest=highest,
        strength_text=written,
        amount=amount,
        per=fields.choice("per", Per),
        closeness=fields.choice("closeness", Closeness, Closeness.CLOSE),
        # a plan owns up to what it leans on and nobody said
        closeness_guessed=not fields.text("closeness"),
        tolerance=fields.part("tolerance_percent", most=100),
        fresh=fields.flag("fresh"),
        freshest_days=fields.whole("freshest_days"),
        spare=fields.flag("spare", usual=True),
        may_differ=fields.part("may_differ_percent", most=100),
        found_within_days=fields.whole("found_within_days"),
        note=fields.text("note"),
        source=fields.text("source"),
    )
    desk.save(row)


def _number(desk: Desk, fields: Fields, recipe: Recipe) -> int:
    rows = desk.session.exec(select(Requirement).where(Requirement.recipe_id == recipe.id))
    used = {row.number for row in rows}
    number = fields.whole("number")
    if number in used:
        raise BadInput(f"{recipe.recipe} has a line {number} already.", "Give another number.")
    return max(used, default=0) + 1 if number is None else number


def _strengths(desk: Desk, fields: Fields, line: Line) -> tuple[float | None, float | None, str]:
    written = fields.text("strength")
    if not written:
        # the line's own strength, with the closeness to say how near
        return line.strength, line.strength, line.strength_text
    substance = substance_of(desk.session, line)
    low, high = parse_strength_range(written, where="strength")
    # where the line's strength is words, so is the requirement's: "saturated", "1 in 10"
    read = beside if line.strength is None else number_beside
    return read(low, substance, line), read(high, substance, line), written


def read_bar(desk: Desk, fields: Fields) -> None:
    """A substance a recipe must never meet; the reason is wanted."""
    recipe = _recipe(desk, fields)
    substance = find_substance(desk.session, fields.need("substance"))
    assert recipe.id is not None and substance.id is not None
    # without its reason a bar is taken for a slip and worked round
    reason, source = fields.need("reason"), fields.text("source")
    desk.save(Bar(recipe_id=recipe.id, substance_id=substance.id, reason=reason, source=source))


def read_swap(desk: Desk, fields: Fields) -> None:
    """An allowed swap."""
    recipe = _recipe(desk, fields)
    line, instead = desk.line(fields.need("line")), desk.line(fields.need("instead"))
    assert recipe.id is not None and line.id is not None and instead.id is not None
    row = Swap(
        recipe_id=recipe.id,
        line_id=line.id,
        instead_id=instead.id,
        factor=fields.number("factor"),
        note=fields.text("note"),
        source=fields.text("source"),
    )
    desk.save(row)


def read_booking(desk: Desk, fields: Fields) -> None:
    """A booking as it stands in a table; `service/bookings.py` asks more questions."""
    number = new_name(desk, Booking, "number", fields.need("booking"))
    recipe = _recipe(desk, fields)
    payer = find_department(desk.session, fields.need("department"))
    assert recipe.id is not None and payer.id is not None
    row = Booking(
        number=number,
        recipe_id=recipe.id,
        on_day=fields.need_day("on"),
        minute=fields.minute("time"),
        groups=checked_groups(fields.whole("groups") or 0),
        spare=checked_spare(fields.number("spare_percent")),
        department_id=payer.id,
        firmness=fields.choice("firmness", Firmness, Firmness.FIRM),
        room=fields.text("room"),
        source=fields.text("source"),
    )
    desk.save(row)
