"""The house rules as values: sections, columns in words, and cells as they would be typed."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.keeping.rules import Purpose, Rule, RuleKind
from stockroom.measure.periods import Period
from stockroom.measure.workdays import Calendar
from stockroom.planning.facts import Facts, Place
from stockroom.reports.pages.rules_cells import cells_of
from stockroom.reports.pages.rules_house import away
from stockroom.reports.pages.rules_line import _which
from stockroom.reports.pages.rules_parts import column_label
from stockroom.store.layout import TABLES
from stockroom.store.snapshot import facts


@pytest.fixture(scope="module")
def known(college_file: Path) -> Facts:
    return facts(college_file, date(2027, 1, 4))


@pytest.mark.parametrize(
    ("column", "label"),
    [
        ("temperature_c", "Temperature, °C"),
        ("left_gbp", "Left for the term, £"),
        ("size_cm3", "Size, cm³"),
        ("spare_percent", "Spare, %"),
        ("meant_for", "Meant for"),
        ("reason", "Reason"),
    ],
)
def test_a_column_is_read_in_words_with_its_unit(column: str, label: str) -> None:
    assert column_label(column) == label


@pytest.mark.parametrize("table", TABLES)
def test_no_two_columns_of_a_table_read_alike(table: str) -> None:
    labels = [column_label(column) for column in TABLES[table].columns]
    assert len(set(labels)) == len(labels)
    assert not any("_" in label for label in labels)


def test_a_row_is_given_as_it_would_be_typed_again(known: Facts) -> None:
    assert cells_of("departments", "CH", known) == {"name": "chemistry", "left_gbp": "120.00"}
    assert cells_of("places", "A1", known)["temperature_c"] == "19"
    assert cells_of("packs", "lithium chloride, 100 g", known)["lead_open_days"] == "10"


def test_a_level_is_asked_for_in_the_unit_its_line_is_measured_in(known: Facts) -> None:
    assert cells_of("lines", "potassium iodide", known)["level_g"] == "50"
    assert "level_cm3" in cells_of("lines", "hydrogen peroxide 100 vol", known)


@pytest.mark.parametrize(
    ("table", "key"), [("places", "ZZ"), ("bottles", "B01"), ("lines", ""), ("packs", "gold, 1 kg")]
)
def test_what_is_not_there_has_no_cells(known: Facts, table: str, key: str) -> None:
    assert cells_of(table, key, known) == {}


def test_days_away_that_are_over_are_left_out() -> None:
    spans = [(date(2027, 1, 1), date(2027, 1, 3)), (date(2027, 2, 1), date(2027, 2, 12))]
    assert away(spans, date(2027, 1, 4)) == "1 Feb 2027 to 12 Feb 2027"
    assert away(spans, date(2027, 2, 13)) == ""


def test_a_place_with_no_temperature_leaves_its_cell_empty() -> None:
    today = date(2027, 1, 4)
    known = Facts(today, today, today, Calendar(), places=(Place("X", "x"),))
    assert cells_of("places", "X", known)["temperature_c"] == ""


def test_a_rule_of_a_band_is_told_from_the_others_to_its_last_figure() -> None:
    rule = Rule(RuleKind.LIFE, Period(3, "days"), purpose=Purpose.EXACT, above=0.1, upto=1 / 3)
    which = _which(rule, "mol/dm3")
    assert which["purpose"] == "exact"
    assert float(which["up_to_strength"].removesuffix(" mol/dm3")) == 1 / 3
