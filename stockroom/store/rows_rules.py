"""Reader for how a line keeps: one ageing rule a row."""

from __future__ import annotations

from stockroom.errors import BadAmount, BadInput
from stockroom.keeping import hypochlorite
from stockroom.keeping.laws import FACTORS, NAMED
from stockroom.keeping.rules import Origin, Purpose, RuleKind
from stockroom.keeping.typed_law import DAYS_PER
from stockroom.measure.parsing import parse_strength
from stockroom.measure.periods import parse_period
from stockroom.planning.facts import Form
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.likeness import unknown
from stockroom.store.names import other_names, substance_of
from stockroom.store.rows_house import temperature_of
from stockroom.store.rows_lines import number_beside
from stockroom.store.tables import KeepingRule, Line

# what a named law settles by itself
_OF_A_LAW = ("order", "rate", "rate_of", "rate_per", "factor_per_10c", "ea_kj_mol")


def read_rule(desk: Desk, fields: Fields) -> None:
    """One ageing rule of a line; rates are turned to the line's unit per day."""
    row = rule_from(desk, fields)
    check_room(fields, row)
    row.house = not desk.starter
    desk.save(row)


def rule_from(desk: Desk, fields: Fields) -> KeepingRule:
    """The row an ageing rule is kept in, not saved yet.

    Raises: BadInput, BadAmount, BadDate and UnknownName for cells that say no rule.
    """
    line = desk.line(fields.need("line"))
    kind = fields.choice("rule", RuleKind)
    dated = kind in (RuleKind.LIFE, RuleKind.RECHECK, RuleKind.LOOK, RuleKind.TEST)
    lasts = fields.need("lasts") if dated else fields.text("lasts")
    period = parse_period(lasts, where="lasts") if lasts else None
    fades = kind is RuleKind.FADES
    named = _named_law(desk, fields, line) if fades else ""
    order, rate = (None, None) if named or not fades else _decay(desk, fields, line)
    at_c = temperature_of(fields, "at_c")
    factor, energy = _warmth(fields, at_c, fades=fades)
    assert line.id is not None
    return KeepingRule(
        line_id=line.id,
        rule=kind,
        lasts_count=period.count if period else None,
        lasts_unit=period.unit if period else "",
        counted_from=fields.choice("counted_from", Origin, _usual_origin(kind, line)),
        purpose=fields.choice("purpose", Purpose, Purpose.ANY),
        safety=fields.flag("safety", usual=kind is RuleKind.TEST),
        decay_order=order,
        rate=rate,
        at_c=at_c,
        factor_per_10c=factor,
        ea_kj_mol=energy,
        named_law=named,
        above=_bound(desk, fields, line, "stronger_than"),
        upto=_bound(desk, fields, line, "up_to_strength"),
        colder_than=temperature_of(fields, "colder_than_c"),
        warmer_than=temperature_of(fields, "warmer_than_c"),
        source=fields.text("source"),
    )


def _usual_origin(kind: RuleKind, line: Line) -> Origin:
    # what makes peroxides is dated from its opening; a solid was made by nobody here, so
    # counted from that day it would keep for ever
    if kind is RuleKind.TEST:
        return Origin.OPENED
    return Origin.MADE if line.form == Form.SOLUTION else Origin.RECEIVED


def check_room(fields: Fields, row: KeepingRule) -> None:
    """Refuse a band or a range of places that holds nothing, and so would never count.

    Raises: BadAmount.
    """
    for lower, low, upper, high in (
        ("stronger_than", row.above, "up_to_strength", row.upto),
        ("warmer_than_c", row.warmer_than, "colder_than_c", row.colder_than),
    ):
        if low is not None and high is not None and low >= high:
            told = f"{lower} {fields.text(lower)} and {upper} {fields.text(upper)}"
            raise BadAmount(f"{told} leave nothing between.", "Swap them, or leave one out.")


def cells_of(rule: KeepingRule, line: Line) -> dict[str, str]:
    """A rule as it would be typed, so that a new one may say only what differs."""
    lasts = "same day" if rule.lasts_count == 0 else f"{rule.lasts_count} {rule.lasts_unit}"
    per_day = rule.rate is not None and not rule.named_law
    numbers = {
        "at_c": rule.at_c,
        "factor_per_10c": rule.factor_per_10c,
        "ea_kj_mol": rule.ea_kj_mol,
        "colder_than_c": rule.colder_than,
        "warmer_than_c": rule.warmer_than,
        "order": rule.decay_order,
        "rate": rule.rate,
    }
    cells = {
        "lasts": "" if rule.lasts_count is None else lasts,
        "counted_from": rule.counted_from,
        "purpose": rule.purpose,
        "safety": "yes" if rule.safety else "no",
        "named_law": rule.named_law,
        "rate_of": line.unit if per_day else "",
        "rate_per": "day" if per_day else "",
        "stronger_than": _bound_cell(rule.above, line),
        "up_to_strength": _bound_cell(rule.upto, line),
    }
    return cells | {column: _cell(number) for column, number in numbers.items()}


def _cell(number: float | None) -> str:
    # every digit: a rate typed again must be the rate it was
    return "" if number is None else f"{number:.17g}"


def _bound_cell(bound: float | None, line: Line) -> str:
    return "" if bound is None else f"{_cell(bound)} {line.unit}"


def _bound(desk: Desk, fields: Fields, line: Line, column: str) -> float | None:
    written = fields.text(column)
    if not written:
        return None
    # a bound without a number would bound nothing, and the rule hold for every strength
    strength = parse_strength(written, where=column)
    return number_beside(strength, substance_of(desk.session, line), line)


def _named_law(desk: Desk, fields: Fields, line: Line) -> str:
    named = fields.text("named_law").lower()
    if not named:
        return ""
    if named not in NAMED:
        raise unknown("named law", named, NAMED)
    # its rate is of mol/dm³, and no other unit would be told apart from that
    if line.unit != hypochlorite.UNIT:
        raise BadInput(
            f"The {named} law counts in {hypochlorite.UNIT}, and {line.key} in {line.unit}.",
            "Give the substance its formula, or an order and a rate.",
        )
    if not _is_bleach(desk, line):
        raise BadInput(
            f"The {named} law is of bleach, and {line.key} is none.", "Give an order and a rate."
        )
    extra = [column for column in _OF_A_LAW if fields.text(column)]
    fields.at("named_law")
    if extra:
        raise BadInput(
            f"The {named} law brings its own figures: leave {', '.join(extra)} out.",
            "It wants only at_c, the temperature where the place has none.",
        )
    return named


def _is_bleach(desk: Desk, line: Line) -> bool:
    """By its storage group, or by one of the names of what it holds."""
    held = substance_of(desk.session, line)
    names = (held.substance, held.storage_group, *other_names(desk.session, held)) if held else ()
    return any(hypochlorite.NAME in name.lower() for name in names)


def _warmth(
    fields: Fields, at_c: float | None, *, fades: bool
) -> tuple[float | None, float | None]:
    """The factor per 10 °C or the activation energy in kJ/mol: one of them at most."""
    factor, energy = fields.number("factor_per_10c"), fields.number("ea_kj_mol")
    if factor is not None and energy is not None:
        raise BadInput(
            f"factor_per_10c {factor:g} and ea_kj_mol {energy:g} say the same thing twice.",
            "Give one of them.",
        )
    if energy is not None and not fades:
        raise BadInput(
            f"ea_kj_mol {energy:g} is of a law, and this rule gives a period.",
            "Give factor_per_10c for a life that is shorter in the warm.",
        )
    # above any reaction a bottle lasts through; a figure in J/mol would land here
    if energy is not None and not 0 < energy <= 400:
        raise BadAmount(f"ea_kj_mol {energy:g} is not between 0 and 400.", "In kJ/mol?")
    least, most = FACTORS
    if factor is not None and not least <= factor <= most:
        fields.at("factor_per_10c")
        raise BadAmount(
            f"factor_per_10c {factor:g} is not between {least:g} and {most:g}.",
            "How many times faster in a place 10 °C warmer, as 2.5?",
        )
    if at_c is None and (factor or energy):
        fields.at("at_c")
        given = f"factor_per_10c {factor:g}" if factor else f"ea_kj_mol {energy:g}"
        raise BadInput(
            f"{given}: from how many °C is it counted?",
            "Give at_c, the temperature of the rate or of the life, as 20.",
        )
    return factor, energy


def _decay(desk: Desk, fields: Fields, line: Line) -> tuple[int, float]:
    order = fields.whole("order")
    if order not in (0, 1, 2):
        raise BadInput(f"order {order} is not a law we know.", "Give 0, 1 or 2.")
    rate = fields.number("rate")
    if rate is None:
        raise BadInput(
            f"rate of order {order} is blank.", "Give the rate, in the unit rate_of per rate_per."
        )
    per = fields.need("rate_per")
    if per not in DAYS_PER:
        raise BadInput(f'rate_per "{per}" is not a time.', f"Give one of {', '.join(DAYS_PER)}.")
    # a first-order rate is a share per time and has no unit of strength
    own = 1.0 if order == 1 else _own_units(desk, fields, line)
    # a zero-order rate is strength per time, a second-order one the inverse of strength per time
    scale = own if order == 0 else 1 / own
    return order, rate * scale / DAYS_PER[per]


def _own_units(desk: Desk, fields: Fields, line: Line) -> float:
    unit = fields.need("rate_of")
    one = parse_strength(f"1 {unit}", where="rate_of")
    return number_beside(one, substance_of(desk.session, line), line)
