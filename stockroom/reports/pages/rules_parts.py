"""What the page of the house rules is made of: sections of rows, and columns in words."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Row:
    """One row: its cells, the first of which names it.

    `key` finds it again where it may be changed, `line` is the stock line it is about.
    """

    cells: tuple[str, ...]
    key: str = ""
    line: str = ""


@dataclass(frozen=True, slots=True)
class Section:
    """One table of the house.

    `change` is the table its rows are changed in, "" where they never are; `add` the table
    rows are added to with the words that say so; `empty` is said where there is no row.
    `rest` are lines that have nothing to say but their names, and `rest_is` what they share.
    """

    id: str
    title: str
    about: str
    head: tuple[str, ...]
    rows: tuple[Row, ...]
    change: str = ""
    empty: str = ""
    add: tuple[str, str] = ("", "")
    rest: tuple[Row, ...] = ()
    rest_is: str = ""


_ENDS = {
    "_cm3": ", cm³",
    "_items": ", items", "_per_dm3": " per dm³", "_g": ", g", "_c": ", °C", "_gbp": ", £",
    "_percent": ", %", "_h": ", hours", "_kj_mol": ", kJ/mol", "_mg_kg": ", mg/kg",
}  # fmt: skip
_WORDS = {
    "ask_days": "Open days that takes",
    "ask_first": "Ask first",
    "assessment_ref": "Local risk assessment",
    "at_c": "At, °C",
    "away_from": "Away from",
    "away_to": "Away to",
    "cas": "Registry number",
    "colder_than_c": "In a place of, °C or colder",
    "counted_from": "Counted from",
    "density_g_cm3": "Density, g/cm³",
    "ea_kj_mol": "Activation energy, kJ/mol",
    "factor_per_10c": "Times faster per 10 °C",
    "finish_day_before": "Finished the open day before, unless marked fresh",
    "finish_minutes": "Minutes to finish, after standing",
    "fresh": "Made the same morning",
    "freshest_days": "Oldest it may be, days",
    "from": "First day",
    "h_code": "H statement",
    "keep_note": "How it is kept",
    "largest_batch_cm3": "Largest batch, cm³",
    "lasts": "Lasts",
    "lead_open_days": "Lead time, open days",
    "left_gbp": "Left for the term, £",
    "level_cm3": "Level, cm³",
    "level_g": "Level, g",
    "level_items": "Level, items",
    "m_factor": "M factor",
    "meant_for": "Meant for",
    "named_law": "By a law that has a name",
    "never_kept": "Never kept, because",
    "only_if_held": "Only where it stands here",
    "per": "For each",
    "per_dm3_cm3": "cm³ per dm³ made",
    "per_dm3_g": "g per dm³ made",
    "per_dm3_items": "Items per dm³ made",
    "safety": "A safety date",
    "stands_h": "Stands, hours",
    "stronger_than": "Only stronger than",
    "supplier_ref": "Supplier",
    "to": "Last day",
    "up_to_strength": "Only up to the strength",
    "warmer_than_c": "In a place warmer than, °C",
}


def column_label(column: str) -> str:
    """A column as people read it: "temperature_c" is "Temperature, °C"."""
    if column in _WORDS:
        return _WORDS[column]
    end = next((end for end in _ENDS if column.endswith(end)), "")
    plain = column.removesuffix(end).replace("_", " ")
    return f"{plain[:1].upper()}{plain[1:]}{_ENDS.get(end, '')}"
