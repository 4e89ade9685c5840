"""Rows into facts: lines with their rules and packs, methods, and recipes."""

from __future__ import annotations

from collections.abc import Callable
from typing import TypeVar

from stockroom.keeping.rules import Law, Origin, Purpose, Rule, RuleKind
from stockroom.measure.amounts import Kind
from stockroom.measure.periods import Period
from stockroom.planning.facts import (
    Bar,
    Closeness,
    Form,
    Ingredient,
    Line,
    Method,
    Pack,
    Per,
    Recipe,
    Requirement,
    Swap,
)
from stockroom.store.former_rules import formers_of, lines_named, with_former_rules
from stockroom.store.reading import Reader, Row

Value = TypeVar("Value")


def lines_of(reader: Reader, *only: str) -> dict[str, Line]:
    """Every stock line by key, in the order they were entered; `only` those of these keys."""
    of_line, of_substance = lines_named(only)
    marks = ", ".join("?" * len(only))
    owned = f"line_id IN (SELECT id FROM line WHERE key IN ({marks}))" if only else "1 = 1"
    # a starter rule that the house replaced stays in the table, out of use
    in_use = f"WHERE in_use AND {owned} ORDER BY id"
    rules = _by_owner(reader, "keeping_rule", "line_id", rule_of, in_use, *only)
    packs = _by_owner(reader, "pack", "line_id", _pack, f"WHERE {owned} ORDER BY id", *only)
    held = reader.rows("substance", of_substance.format("id"), *only)
    substances = {row["id"]: row for row in held}
    formers = formers_of(reader, *only)
    return {
        row["key"]: _line(
            row,
            substances.get(row["substance_id"]),
            with_former_rules(
                rules.get(row["id"], ()), formers.get(row["key"], ""), Form(row["form"])
            ),
            tuple(packs.get(row["id"], ())),
        )
        for row in reader.rows("line", of_line.format("key"), *only)
    }


def _by_owner(
    reader: Reader,
    table: str,
    owner: str,
    build: Callable[[Row], Value],
    tail: str = "ORDER BY id",
    *asked: str,
) -> dict[int, list[Value]]:
    found: dict[int, list[Value]] = {}
    for row in reader.rows(table, tail, *asked):
        found.setdefault(row[owner], []).append(build(row))
    return found


def _line(
    row: Row, substance: Row | None, rules: tuple[Rule, ...], packs: tuple[Pack, ...]
) -> Line:
    return Line(
        key=row["key"],
        item=row["item"],
        substance=substance["substance"] if substance else "",
        form=Form(row["form"]),
        kind=Kind(row["kind"]),
        strength=row["strength"],
        unit=row["unit"],
        strength_text=row["strength_text"],
        molar_mass=row["molar_mass"],
        assay=row["assay"],
        density=row["density"],
        rules=rules,
        never_kept=row["never_kept"],
        level=row["level"],
        largest_batch=row["largest_batch"],
        vented_cap=bool(row["vented_cap"]),
        storage_group=substance["storage_group"] if substance else "",
        keep_note=row["keep_note"],
        packs=packs,
        ask_first=row["ask_first"],
        ask_days=row["ask_days"],
    )


def rule_of(row: Row) -> Rule:
    """One ageing rule from its row."""
    kind = RuleKind(row["rule"])
    # one pair of columns serves both: a law's temperature, or that of a period
    fades = kind is RuleKind.FADES
    count, unit = row["lasts_count"], row["lasts_unit"]
    return Rule(
        kind=kind,
        lasts=None if count is None else Period(count, unit),
        origin=Origin(row["counted_from"] or Origin.MADE),
        purpose=Purpose(row["purpose"] or Purpose.ANY),
        safety=bool(row["safety"]),
        law=_law(row) if fades else None,
        at_c=None if fades else row["at_c"],
        factor_per_10c=None if fades else row["factor_per_10c"],
        above=row["above"],
        upto=row["upto"],
        colder_than=row["colder_than"],
        warmer_than=row["warmer_than"],
        source=row["source"],
        house=bool(row["house"]),
    )


def _law(row: Row) -> Law:
    # a named law brings its own rate, and the second order is only where it is looked up
    return Law(
        2 if row["decay_order"] is None else row["decay_order"],
        row["rate"] or 0.0,
        row["at_c"],
        row["factor_per_10c"],
        row["ea_kj_mol"],
        row["named_law"],
    )


def _pack(row: Row) -> Pack:
    return Pack(row["size"], row["text"], row["pence"], row["lead"], row["supplier"])


def methods_of(reader: Reader) -> dict[str, Method]:
    """How each line is made, by key; a line with ingredients alone gets the usual minutes."""
    keys = reader.pairs("SELECT id, key FROM line")
    ingredients = _ingredients(reader, keys)
    written = {row["line_id"]: row for row in reader.rows("method")}
    return {
        keys[owner]: _method(keys[owner], written.get(owner), ingredients.get(owner, ()))
        for owner in sorted(written.keys() | ingredients.keys())
    }


def _method(key: str, row: Row | None, ingredients: tuple[Ingredient, ...]) -> Method:
    # no time written: counted as the usual and marked, never as none
    if row is None:
        return Method(key, ingredients, minutes_guessed=True)
    return Method(
        line=key,
        ingredients=ingredients,
        minutes=row["minutes"],
        finish_minutes=row["finish_minutes"],
        stands_hours=row["stands_hours"],
        titrated=bool(row["titrated"]),
        smallest_batch=row["smallest_batch"],
        minutes_guessed=bool(row["minutes_guessed"]),
        steps=row["steps"],
        cautions=_split(row["cautions"]),
    )


def _split(text: str) -> tuple[str, ...]:
    return tuple(part.strip() for part in text.split(";") if part.strip())


def _ingredients(reader: Reader, keys: dict[int, str]) -> dict[int, tuple[Ingredient, ...]]:
    roles: dict[int, dict[str, list[Row]]] = {}
    for row in reader.rows("ingredient"):
        roles.setdefault(row["line_id"], {}).setdefault(row["role"], []).append(row)
    return {
        owner: tuple(_ingredient(role, rows, keys) for role, rows in by_role.items())
        for owner, by_role in roles.items()
    }


def _ingredient(role: str, rows: list[Row], keys: dict[int, str]) -> Ingredient:
    ranked = sorted(rows, key=lambda row: (row["alternative"], row["id"]))
    # one ingredient for all alternatives: the planner chooses, and needs them side by side
    return Ingredient(
        lines=tuple(keys[row["ingredient_id"]] for row in ranked),
        # entry refuses alternatives whose amounts differ, so the first one's holds for all
        per_dm3=ranked[0]["per_dm3"],
        only_if_held=frozenset(keys[row["ingredient_id"]] for row in rows if row["only_if_held"]),
        role=role,
    )


def recipes_of(reader: Reader) -> dict[tuple[str, int], Recipe]:
    """Every recipe version, by code and version."""
    keys = reader.pairs("SELECT id, key FROM line")
    names = reader.pairs("SELECT id, substance FROM substance")
    needs = _by_owner(reader, "requirement", "recipe_id", lambda row: _requirement(row, keys))
    bars = _by_owner(
        reader, "bar", "recipe_id", lambda row: Bar(names[row["substance_id"]], row["reason"])
    )
    swaps = _by_owner(reader, "swap", "recipe_id", lambda row: _swap(row, keys))
    return {
        (row["recipe"], row["version"]): Recipe(
            code=row["recipe"],
            version=row["version"],
            title=row["title"],
            requirements=tuple(sorted(needs.get(row["id"], ()), key=lambda need: need.number)),
            bars=tuple(bars.get(row["id"], ())),
            swaps=tuple(swaps.get(row["id"], ())),
            never_kept=row["never_kept"],
            waste=row["waste"],
            handling=row["handling"],
            assessment=row["assessment"],
        )
        for row in reader.rows("recipe", "ORDER BY recipe, version")
    }


def _requirement(row: Row, keys: dict[int, str]) -> Requirement:
    return Requirement(
        number=row["number"],
        line=keys[row["line_id"]],
        amount=row["amount"],
        per=Per(row["per"]),
        closeness=Closeness(row["closeness"]),
        lowest=row["lowest"],
        highest=row["highest"],
        strength_text=row["strength_text"],
        tolerance=row["tolerance"],
        fresh=bool(row["fresh"]),
        freshest_days=row["freshest_days"],
        spare=bool(row["spare"]),
        may_differ=row["may_differ"],
        found_within_days=row["found_within_days"],
        closeness_guessed=bool(row["closeness_guessed"]),
        note=row["note"],
    )


def _swap(row: Row, keys: dict[int, str]) -> Swap:
    return Swap(keys[row["line_id"]], keys[row["instead_id"]], row["factor"], row["note"])
