"""Peroxide-formers have a safety date, opened or not, whoever forgot to write one."""

from __future__ import annotations

import csv
from datetime import date
from typing import TYPE_CHECKING

import pytest

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.keeping.verdict import Condition, limits_of, verdict
from stockroom.measure.periods import Period
from stockroom.planning.facts import Form
from stockroom.safety.peroxide_formers import class_of
from stockroom.service.database import new_store, seeds_folder, starter_folder
from stockroom.store.former_rules import former_class, formers_of, with_former_rules
from stockroom.store.reading import reading
from stockroom.store.snapshot_lines import lines_of

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

OWN = Rule(RuleKind.TEST, Period(9, "months"), Origin.OPENED, safety=True)


def lasts(rules: tuple[Rule, ...]) -> dict[str, tuple[str, int]]:
    found = {str(rule.origin): rule for rule in rules if rule.lasts}
    return {origin: (str(r.kind), r.lasts.count) for origin, r in found.items() if r.lasts}


# Univ. of Southern California plan, and six months for class D as three universities have (seen)
@pytest.mark.parametrize(
    ("former", "expected"),
    [
        ("A", {"opened": ("life", 3), "received": ("life", 6)}),
        ("B", {"opened": ("test or discard", 6), "received": ("test or discard", 12)}),
        # counted from receipt, opened or not; from opening where no day of receipt is known
        ("C", {"opened": ("test or discard", 12), "received": ("test or discard", 12)}),
        ("D", {"opened": ("test or discard", 6), "received": ("test or discard", 6)}),
        ("", {}),
        ("Z", {}),
    ],
)
def test_each_class_gets_its_published_dates(
    former: str, expected: dict[str, tuple[str, int]]
) -> None:
    rules = with_former_rules((), former, Form.LIQUID)
    assert lasts(rules) == expected
    assert all(rule.safety and "(seen)" in rule.source for rule in rules)


def test_a_rule_of_the_line_itself_comes_first() -> None:
    rules = with_former_rules((OWN,), "B", Form.LIQUID)
    assert lasts(rules) == {"opened": ("test or discard", 9), "received": ("test or discard", 12)}


def test_a_quality_date_is_no_safety_date() -> None:
    quality = Rule(RuleKind.LIFE, Period(3, "years"), Origin.OPENED)
    assert len(with_former_rules((quality,), "B", Form.LIQUID)) == 3


def test_a_solution_of_a_former_is_left_out() -> None:
    assert with_former_rules((), "B", Form.SOLUTION) == ()


def test_class_c_opened_on_a_known_day_and_received_on_none_still_goes_past() -> None:
    opened = Record(opened=date(2026, 1, 5))
    rules = with_former_rules((), "C", Form.LIQUID)
    assert verdict(opened, rules, date(2027, 1, 5)).condition is not Condition.PAST
    assert any(x.until == date(2027, 1, 5) for x in limits_of(opened, rules, date(2027, 1, 6)))


# -- which substance is one ---------------------------------------------------------------


@pytest.mark.parametrize(
    ("names", "written", "cls"),
    [
        (["THF"], "", "B"),
        (["ether"], "", "B"),
        (["isopropanol"], "", "B"),
        (["MTBE"], "", "D"),
        (["no. 7", "vinylbenzene"], "", "C"),
        # the house's own word comes first
        (["isopropanol"], "d", "D"),
        (["house mixture"], "A", "A"),
        (["petroleum ether"], "", ""),
        (["water", ""], "", ""),
    ],
)
def test_any_name_of_the_tables_finds_the_class(names: list[str], written: str, cls: str) -> None:
    assert former_class(names, written) == cls


def test_the_shipped_tables_and_the_lists_say_the_same() -> None:
    with (seeds_folder() / "starter" / "substances.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    assert [r["substance"] for r in rows if class_of(r["substance"]) != r["peroxide_former"]] == []


def test_a_store_finds_them_by_its_own_other_names(stockroom: Stockroom, own: Path) -> None:
    by = ("--by", "T1")
    stockroom("add", "substances", "substance=solvent 4", "other_names=oxolane", *by, store=own)
    stockroom("add", "lines", "item=S4", "substance=solvent 4", "form=liquid", *by, store=own)
    with reading(own) as reader:
        assert formers_of(reader) == {"S4": "B", "cyclohexene, unstabilised": "B"}


def test_every_former_of_the_starter_house_has_its_dates_opened_and_closed(
    tmp_path: Path,
) -> None:
    new_store(tmp_path / "starter.sqlite", tables=starter_folder())
    with reading(tmp_path / "starter.sqlite") as reader:
        lines, formers = lines_of(reader), formers_of(reader)
    kept = [lines[key] for key in formers if lines[key].form is not Form.SOLUTION]
    assert "cyclohexene" in {line.key for line in kept}
    assert all({"opened", "received"} <= set(lasts(line.rules)) for line in kept)


@pytest.mark.parametrize(
    ("record", "on", "condition"),
    [
        (Record(received=date(2026, 1, 5)), date(2027, 1, 5), Condition.SOUND),
        (Record(received=date(2026, 1, 5)), date(2027, 1, 6), Condition.PAST),
        (
            Record(received=date(2026, 1, 5), opened=date(2026, 2, 1)),
            date(2026, 8, 2),
            Condition.PAST,
        ),
    ],
)
def test_it_goes_past_and_says_not_to_touch_it(
    record: Record, on: date, condition: Condition
) -> None:
    judged = verdict(record, with_former_rules((), "B", Form.LIQUID), on)
    assert judged.condition is condition
    assert ("do not open or move" in judged.warning) is (condition is Condition.PAST)


def test_a_former_without_a_rule_is_refused_past_its_date_and_reset_by_its_test(
    stockroom: Stockroom, own: Path
) -> None:
    by = ("--by", "T1")
    stockroom("add", "substances", "substance=diethyl ether", "peroxide_former=B", *by, store=own)
    stockroom(
        "add", "lines", "item=diethyl ether", "substance=diethyl ether", "form=liquid", *by,
        store=own,
    )  # fmt: skip
    arrived = stockroom(
        "arrive", "diethyl ether", "500 cm3", "--printed", "none", "--place", "F2", *by, store=own
    )
    number = arrived.said.split("PRACTICE ")[1].split(":")[0]
    stockroom("open", number, *by, store=own)
    later = ("--as-at", "2027-09-01")
    refused = stockroom("draw", number, "10 cm3", *by, *later, store=own)
    assert refused.code == 1
    assert "past its safety date" in refused.err
    passed = stockroom("tested", number, "--peroxide", "5 mg/kg", *by, *later, store=own)
    assert "Now sound, until" in passed.out
