"""The tables as they are typed: their columns in order, their fixed words, and who reads them."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

from stockroom.chemistry.glassware import GlassKind
from stockroom.keeping.laws import NAMED as NAMED_LAWS
from stockroom.keeping.rules import Origin, Purpose, RuleKind
from stockroom.keeping.typed_law import DAYS_PER
from stockroom.measure.amounts import Kind
from stockroom.planning.facts import Closeness, Firmness, Form, Per
from stockroom.store import (
    rows_bottles,
    rows_hazards,
    rows_house,
    rows_lines,
    rows_methods,
    rows_orders,
    rows_recipes,
    rows_rules,
)
from stockroom.store.desk import Desk
from stockroom.store.fields import Fields
from stockroom.store.likeness import unknown

Reader = Callable[[Desk, Fields], None]


@dataclass(frozen=True, slots=True)
class Table:
    """A table as typed: its columns, and what reads a row of it into the store."""

    # the order is that of a hand-written table: what a row is called comes first
    columns: tuple[str, ...]
    read: Reader | None = None


def _table(columns: str, read: Reader | None = None) -> Table:
    return Table((*columns.split(), "source"), read)


# in the order they are read: each refers only to those above it
TABLES: dict[str, Table] = {
    "house": _table("setting value", rows_house.read_setting),
    "terms": _table("term from to", rows_house.read_term),
    "closures": _table("from to reason", rows_house.read_closure),
    "places": _table("place name temperature_c meant_for", rows_house.read_place),
    "departments": _table("department name left_gbp", rows_house.read_department),
    "balances": _table("balance step_g away_from away_to", rows_house.read_balance),
    "vessels": _table("vessel size_cm3 away_from away_to", rows_house.read_vessel),
    "glassware": _table(
        "glass kind size_cm3 class step_cm3 away_from away_to", rows_house.read_glassware
    ),
    "substances": _table(
        "substance other_names formula cas storage_group peroxide_former density_g_cm3 note",
        rows_lines.read_substance,
    ),
    "hazards": _table(
        "substance hazard_class h_code from_percent below_percent basis route ate m_factor"
        " percent_of how",
        rows_hazards.read_hazard,
    ),
    "lines": _table(
        "item strength substance form formula assay_percent density_g_cm3 level_g level_cm3"
        " level_items largest_batch_cm3 never_kept vented_cap keep_note measured_in ask_first"
        " ask_days",
        rows_lines.read_line,
    ),
    "keeping": _table(
        "line rule lasts counted_from purpose safety order rate rate_of rate_per at_c"
        " factor_per_10c ea_kj_mol named_law stronger_than up_to_strength colder_than_c"
        " warmer_than_c",
        rows_rules.read_rule,
    ),
    "methods": _table(
        "line minutes finish_minutes stands_h titrated smallest_batch_cm3 steps cautions",
        rows_methods.read_method,
    ),
    "ingredients": _table(
        "line ingredient alternative role per_dm3_g per_dm3_cm3 per_dm3_items only_if_held",
        rows_methods.read_ingredient,
    ),
    "packs": _table(
        "line size_g size_cm3 size_items price_gbp lead_open_days supplier_ref",
        rows_methods.read_pack,
    ),
    "former_use": _table(
        "line from to amount_g amount_cm3 amount_items groups", rows_orders.read_former_use
    ),
    "recipes": _table(
        "recipe version title never_kept waste handling assessment_ref", rows_recipes.read_recipe
    ),
    "recipe_lines": _table(
        "recipe version number line strength amount_cm3 amount_g amount_items per closeness"
        " tolerance_percent fresh freshest_days spare may_differ_percent found_within_days note",
        rows_recipes.read_requirement,
    ),
    "recipe_bars": _table("recipe version substance reason", rows_recipes.read_bar),
    "recipe_swaps": _table("recipe version line instead factor note", rows_recipes.read_swap),
    "bookings": _table(
        "booking recipe version on time groups spare_percent department firmness room",
        rows_recipes.read_booking,
    ),
    # the last two become ledger entries, written together in order of day
    "bottles": _table(
        "bottle line size_g size_cm3 size_items received made opened printed place left_g"
        " left_cm3 left_items left_on cap remark parents set_aside"
    ),
    "history": _table(
        "number happened entered by event bottle amount_g amount_cm3 amount_items strength"
        " uncertainty peroxide_mg_kg passed place reason puts_right"
    ),
}


NAMED = {
    "substances": "substance",
    "lines": "stock line",
    "places": "place",
    "departments": "department",
    "recipes": "recipe",
    "bottles": "bottle",
}
"""Tables whose rows others name, and what such a row is called in messages."""

_YES_NO = ("yes", "no")

WORDS: dict[tuple[str, str], Iterable[str]] = {
    ("house", "setting"): rows_house.SETTINGS,
    ("glassware", "kind"): GlassKind,
    ("glassware", "class"): ("A", "B"),
    ("hazards", "basis"): rows_hazards.BASES,
    ("hazards", "route"): rows_hazards.ROUTES,
    ("lines", "form"): Form,
    ("lines", "measured_in"): Kind,
    ("lines", "vented_cap"): _YES_NO,
    ("keeping", "rule"): RuleKind,
    ("keeping", "counted_from"): Origin,
    ("keeping", "purpose"): Purpose,
    ("keeping", "safety"): _YES_NO,
    ("keeping", "order"): ("0", "1", "2"),
    ("keeping", "named_law"): NAMED_LAWS,
    ("keeping", "rate_per"): tuple(DAYS_PER),
    ("methods", "titrated"): _YES_NO,
    ("ingredients", "only_if_held"): _YES_NO,
    ("recipe_lines", "per"): Per,
    ("recipe_lines", "closeness"): Closeness,
    ("recipe_lines", "fresh"): _YES_NO,
    ("recipe_lines", "spare"): _YES_NO,
    ("bookings", "firmness"): Firmness,
    ("history", "event"): sorted(rows_bottles.HISTORY),
    ("history", "passed"): _YES_NO,
}
"""Columns that take one of a few fixed words, and the words."""


def table_columns(table: str) -> list[str]:
    """The columns a table has. Raises: UnknownName with the nearest three tables."""
    if table not in TABLES:
        raise unknown("table", table, TABLES)
    return list(TABLES[table].columns)


def column_words(table: str) -> dict[str, tuple[str, ...]]:
    """For each column of a table that takes one of a few fixed words, those words."""
    return {column: tuple(map(str, words)) for (of, column), words in WORDS.items() if of == table}


def check_columns(table: str, columns: Iterable[str]) -> None:
    """Pass when a table has all of these columns. Raises: UnknownName with the nearest three."""
    for column in columns:
        if column not in TABLES[table].columns:
            raise unknown(f"column of {table}", column, TABLES[table].columns)
