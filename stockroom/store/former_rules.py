"""Peroxide-formers: which substance is one, by any of its names, and the date each gets.

They get a safety date even where nobody wrote them a rule: the published interval of their
class, without a stabiliser unless the class is only sold with one. A rule of the line
itself, from the same origin, comes first.
"""

from __future__ import annotations

import csv
from collections.abc import Iterable, Mapping
from functools import lru_cache
from pathlib import Path

from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.measure.periods import Period
from stockroom.planning.facts import Form
from stockroom.safety.grounds import MARKS
from stockroom.safety.peroxide_formers import (
    CLASSES,
    TEST_OR_DISCARD,
    Interval,
    class_of,
    interval,
)
from stockroom.store.likeness import plain
from stockroom.store.reading import Reader
from stockroom.store.sources import seeds_folder

# what a line may say instead: a test of its own, or a date that no test moves
_SAFETY_KINDS = (RuleKind.TEST, RuleKind.LIFE, RuleKind.NEVER)
# sold with an inhibitor in it; without one it would be a matter of hours
_INHIBITED = "C"
_FOLDERS = ("college", "starter")


def former_class(names: Iterable[str], written: str = "", *, liquid: bool = False) -> str:
    """The class of a peroxide-former by any of its names; "" for what is none.

    What the house wrote of it comes first, then the published lists, under the names
    given and under what the tables that travel along call them: THF is tetrahydrofuran.
    `liquid` as in `class_of`.

    >>> former_class(["THF"]), former_class(["ether"]), former_class(["ethanol"])
    ('B', 'B', '')
    """
    if written.strip():
        return written.strip().upper()
    held = _shipped(seeds_folder())
    classes = (class_of(held.get(plain(name), name), liquid=liquid) for name in names if name)
    return next((cls for cls in classes if cls), "")


@lru_cache(maxsize=2)
def _shipped(folder: Path) -> Mapping[str, str]:
    """The substance behind each name of the tables that travel along, by plain name."""
    held: dict[str, str] = {}
    for each in _FOLDERS:
        path = folder / each / "substances.csv"
        if path.is_file():
            with path.open(encoding="utf-8", newline="") as file:
                for row in csv.DictReader(file):
                    for name in (row["substance"], *row["other_names"].split(";")):
                        held.setdefault(plain(name), row["substance"])
    return held


def formers_of(reader: Reader, *only: str) -> dict[str, str]:
    """The class of every line of a store whose substance is a peroxide-former, by its key.

    `only` are the keys of the lines asked about; the others are then not read.
    """
    of_line, of_substance = lines_named(only)
    names: dict[int, list[str]] = {}
    for row in reader.rows("other_name", of_substance.format("substance_id"), *only):
        names.setdefault(row["substance_id"], []).append(row["name"])
    held = {row["id"]: row for row in reader.rows("substance", of_substance.format("id"), *only)}
    found: dict[str, str] = {}
    for line in reader.rows("line", of_line.format("key"), *only):
        substance = held.get(line["substance_id"])
        if substance is not None:
            called = (substance["substance"], *names.get(substance["id"], ()))
            liquid = line["form"] == Form.LIQUID
            found[line["key"]] = former_class(called, substance["peroxide_former"], liquid=liquid)
    return {key: cls for key, cls in found.items() if cls}


def lines_named(only: tuple[str, ...]) -> tuple[str, str]:
    """What narrows a question to lines by their keys: of lines, and of their substances.

    Each is SQL with a gap for the column; nothing is narrowed where no key is given.
    """
    if not only:
        return "ORDER BY id", "ORDER BY id"
    marks = ", ".join("?" * len(only))
    return (
        f"WHERE {{}} IN ({marks}) ORDER BY id",
        f"WHERE {{}} IN (SELECT substance_id FROM line WHERE key IN ({marks})) ORDER BY id",
    )


def with_former_rules(rules: Iterable[Rule], former: str, form: Form) -> tuple[Rule, ...]:
    """The rules of a line, and the published ones for its class where it has none of its own.

    `former` is the class of its substance, "" for none. A solution of a former is left
    out: what is diluted with water cannot be boiled dry unnoticed.
    """
    own = tuple(rules)
    if former not in CLASSES or form is Form.SOLUTION:
        return own
    said = {rule.origin for rule in own if rule.safety and rule.kind in _SAFETY_KINDS}
    return (*own, *(rule for rule in _published(former) if rule.origin not in said))


def _published(former: str) -> Iterable[Rule]:
    for origin in (Origin.OPENED, Origin.RECEIVED):
        opened = origin is Origin.OPENED
        found = interval(former, opened=opened, stabilised=former == _INHIBITED)
        # class C counts from receipt, opened or not; where that day is not known, from opening
        yield _rule(found, origin)


def _rule(found: Interval, origin: Origin) -> Rule:
    # what is to be discarded has no test that would give it longer
    kind = RuleKind.TEST if found.due == TEST_OR_DISCARD else RuleKind.LIFE
    return Rule(
        kind,
        Period(found.months, "months"),
        origin,
        safety=True,
        source=f"{found.source} ({MARKS[found.how]})",
    )
