"""The house rules as pages: read by everybody, changed with a reason by whoever keeps the house."""

from __future__ import annotations

import re
from datetime import date
from typing import TYPE_CHECKING

import pytest

from stockroom.service.handover import kept_of

if TYPE_CHECKING:
    from windows import Answer, Window

STARCH = "starch 0.5 % w/v"
_DAY = date(2027, 1, 4)
_COLUMNS = {
    "places": ("name", "temperature_c", "meant_for"),
    "departments": ("name", "left_gbp"),
    "packs": ("price_gbp", "lead_open_days"),
    "lines": ("level_g", "level_cm3", "level_items", "keep_note", "ask_first", "ask_days"),
}


def last_change(window: Window) -> tuple[str, ...]:
    """The newest change on record: table, row, column, before, after, why, by."""
    each = kept_of(window.house.path, window.house.given or _DAY).changes[-1]
    return (each.table, each.row, each.column, each.before, each.after, each.why, each.by)


def changed(window: Window, table: str, key: str, **cells: str) -> Answer:
    """A row changed as the form sends it: every cell as it stands, but for those given."""
    form = window.get(f"/rules/change/{table}", key=key)
    now = {name: form.field(name) for name in _COLUMNS[table] if f'name="{name}"' in form.html}
    sent = now | cells
    return window.post(f"/rules/change/{table}", key=key, by="H1", **sent)


# -- reading --------------------------------------------------------------------------


def test_every_part_of_the_house_is_shown(onlooker: Window) -> None:
    page = onlooker.get("/rules").text
    assert "starch 0.5 % w/v life: 3 days from made starter value" in page
    assert "A1 acids cupboard 19 °C acid" in page
    assert "BAL2 0.001 g 1 Feb 2027 to 12 Feb 2027" in page
    assert "Mon 15 Feb 2027 Fri 19 Feb 2027 mid-term week" in page
    assert "CH chemistry £120.00" in page
    assert "lithium chloride, 100 g £14.50 10 open days" in page
    assert "Staffed from 08:00" in page


def test_words_leave_only_the_lines_that_hold_them(onlooker: Window) -> None:
    page = onlooker.get("/rules", what="THIO 0.200").text
    assert "sodium thiosulfate 0.200 mol/dm³" in page
    assert "starch" not in page
    assert "acids cupboard" not in page


def test_a_line_shows_whose_each_rule_is_and_its_source(onlooker: Window) -> None:
    page = onlooker.get("/rules", line=STARCH).text
    assert "life: 3 days from made starter value; Bench experience" in page
    assert "common practice, no source" in page


def test_a_bottles_number_opens_its_line(onlooker: Window) -> None:
    assert "How hydrogen peroxide 100 vol keeps" in onlooker.get("/rules", line="B01").text


def test_a_line_nobody_knows_is_a_404_with_the_nearest(onlooker: Window) -> None:
    page = onlooker.get("/rules", line="starsh 0.5")
    assert (page.status, "starch 0.5" in page.text) == (404, True)


# -- changing a rule ------------------------------------------------------------------


def test_a_rule_changed_says_who_when_why_and_what_it_was(window: Window) -> None:
    page = window.enter(
        "rule",
        line=STARCH,
        rule="life",
        lasts="2 d",
        why="warm room",
        by="H1",
        back="/rules?line=B01",
    )
    assert "starch 0.5 % w/v: life: 3 days from made → life: 2 days from made." in page.text
    page = window.get("/rules", line=STARCH)
    assert "life: 2 days from made house rule" in page.text
    assert "Mon 4 Jan 2027 H1 life: 3 days from made life: 2 days from made warm room" in page.text


def test_a_rule_withdrawn_is_no_longer_there_and_stays_on_record(window: Window) -> None:
    window.enter("rule", line=STARCH, rule="life", withdraw="yes", why="we look", by="H1")
    page = window.get("/rules", line=STARCH).text
    assert "No ageing rule" in page
    assert "withdrawn we look" in page


@pytest.mark.parametrize(
    ("typed", "field"),
    [
        ({"lasts": "soon", "why": "x"}, "lasts"),
        ({"lasts": "2 d", "why": ""}, "why"),
        ({"lasts": "2 d", "stronger_than": "much", "why": "x"}, "stronger_than"),
        ({"lasts": "2 d", "colder_than_c": "cold", "why": "x"}, "colder_than_c"),
        ({"counted_from": "moon", "why": "x"}, "counted_from"),
        ({"factor_per_10c": "400", "why": "x"}, "factor_per_10c"),
        ({"rule": "nonsense", "lasts": "2 d", "why": "x"}, "rule"),
        ({"line": "unobtainium", "lasts": "2 d", "why": "x"}, "line"),
    ],
)
def test_a_rule_refused_says_so_beside_its_cell(
    window: Window, typed: dict[str, str], field: str
) -> None:
    page = window.enter("rule", **({"line": STARCH, "rule": "life", "by": "H1"} | typed))
    assert page.status in (404, 422)
    assert f'id="f-{field}-wrong"' in page.html
    # the words of the field, and not the name its column has in the tables
    wrong = page.html.split(f'id="f-{field}-wrong"')[1].split("</p>")[0]
    assert not re.search("keeping:|[a-z]_[a-z]", wrong)
    assert kept_of(window.house.path, _DAY).changes == ()


def test_what_is_never_kept_cannot_be_made_to_keep(window: Window) -> None:
    line = "ammoniacal silver reagent"
    page = window.enter("rule", line=line, rule="never kept", withdraw="yes", why="x", by="H1")
    assert page.status in (404, 409)


# -- correcting and adding ------------------------------------------------------------


def test_a_figure_no_table_holds_is_refused(window: Window) -> None:
    asked = {"table": "departments", "cells": "department=ZZ\nleft_gbp=1e400", "why": "x"}
    page = window.enter("add", by="H1", **asked)
    assert (page.status, "too large to be meant" in page.text) == (422, True)


def test_a_place_is_changed_and_what_it_was_is_told(window: Window) -> None:
    page = changed(window, "places", "A2", temperature_c="24", why="summer")
    assert "A2: temperature_c 20 → 24" in page.text
    assert "24 °C" in window.get("/rules").text
    assert last_change(window) == ("places", "A2", "temperature_c", "20", "24", "summer", "H1")


@pytest.mark.parametrize(
    ("table", "key", "cells", "told"),
    [
        ("departments", "CH", {"left_gbp": "50"}, "£120.00 → £50.00"),
        ("packs", "lithium chloride, 100 g", {"lead_open_days": "4"}, "10 → 4"),
        ("lines", "potassium iodide", {"level_g": "75"}, "50 g → 75 g"),
        ("lines", STARCH, {"level_cm3": "200"}, "blank → 200 cm³"),
    ],
)
def test_levels_budgets_and_lead_times_are_changed(
    window: Window, table: str, key: str, cells: dict[str, str], told: str
) -> None:
    assert told in changed(window, table, key, why="new", **cells).text


@pytest.mark.parametrize(
    ("cells", "field"),
    [
        ({"temperature_c": "900", "why": "x"}, "temperature_c"),
        ({"temperature_c": "warm", "why": "x"}, "temperature_c"),
        ({"temperature_c": "24", "why": " "}, "why"),
    ],
)
def test_a_cell_refused_is_told_beside_it_and_kept_as_typed(
    window: Window, cells: dict[str, str], field: str
) -> None:
    page = changed(window, "places", "A2", **cells)
    assert page.status == 422
    assert f'id="f-{field}-wrong"' in page.html
    assert page.field("temperature_c") == cells["temperature_c"]


def test_a_place_is_added_with_who_and_why(window: Window) -> None:
    page = window.post(
        "/rules/add/places", place="A9", name="new <b>cupboard</b>", why="delivered", by="H1"
    )
    assert "Added to places: A9." in page.text
    assert "<b>cupboard" not in window.get("/rules").html
    assert last_change(window)[0:2] == ("places", "A9")
    assert last_change(window)[5:] == ("delivered", "H1")


def test_a_setting_keeps_what_it_was(window: Window) -> None:
    window.post("/rules/add/house", setting="staffed_from", value="7:30", why="early", by="H1")
    assert last_change(window) == ("house", "staffed_from", "value", "08:00", "7:30", "early", "H1")
    assert "Staffed from 07:30" in window.get("/rules").text


@pytest.mark.parametrize(
    ("table", "cells", "field"),
    [
        ("balances", {"balance": "BAL9", "step_g": ""}, "step_g"),
        ("closures", {"from": "2027-02-01", "to": "2027-01-01"}, ""),
        ("terms", {"term": "odd", "from": "yesterday-ish", "to": "2027-01-01"}, "from"),
        ("house", {"setting": "day_minutes", "value": "99999"}, ""),
        ("packs", {"line": "unobtainium"}, "line"),
        ("places", {"place": "A2"}, ""),
        ("places", {"place": ""}, "place"),
    ],
)
def test_a_row_refused_adds_nothing(
    window: Window, table: str, cells: dict[str, str], field: str
) -> None:
    page = window.post(f"/rules/add/{table}", why="x", by="H1", **cells)
    assert page.status in (404, 409, 422)
    assert not field or f'id="f-{field}-wrong"' in page.html
    assert kept_of(window.house.path, _DAY).changes == ()


@pytest.mark.parametrize(
    ("path", "status"),
    [
        ("/rules/add/bottles", 409),
        ("/rules/add/nothing", 404),
        ("/rules/change/places?key=ZZ", 404),
        ("/rules/change/history?key=1", 404),
        ("/rules/change/places", 422),
    ],
)
def test_tables_with_other_forms_are_not_written_here(
    onlooker: Window, path: str, status: int
) -> None:
    assert onlooker.get(path).status == status


def test_every_table_that_may_be_added_to_has_a_form(onlooker: Window) -> None:
    from stockroom.web.forms.house import ADDED

    for table in ADDED:
        assert onlooker.get(f"/rules/add/{table}").status == 200, table


# -- the same in one form, as the API has it ------------------------------------------


def test_one_cell_is_corrected_by_the_short_form(window: Window) -> None:
    page = window.enter(
        "change", table="places", key="A2", column="meant_for", value="solids", why="x", by="H1"
    )
    assert "A2: meant_for solid → solids" in page.text


def test_one_row_is_added_by_the_short_form(window: Window) -> None:
    page = window.enter(
        "add", table="vessels", cells="vessel=3 L jar\nsize_cm3=3000", why="new", by="H1"
    )
    assert "Added to vessels: 3 L jar." in page.text
    assert last_change(window)[:5] == ("vessels", "3 L jar", "added", "", "size_cm3 3000")


@pytest.mark.parametrize(
    ("form", "sent", "field"),
    [
        ("change", {"table": "history", "key": "1", "column": "by", "value": "X"}, "table"),
        ("change", {"table": "places", "key": "A2", "column": "colour", "value": "X"}, "column"),
        ("change", {"table": "places", "key": "Q7", "column": "name", "value": "X"}, "key"),
        ("add", {"table": "bottles", "cells": "bottle=B99"}, "table"),
        ("add", {"table": "vessels", "cells": "3 L jar"}, "cells"),
        ("add", {"table": "vessels", "cells": "jar=3 L"}, "cells"),
    ],
)
def test_a_short_form_refused_says_which_field(
    window: Window, form: str, sent: dict[str, str], field: str
) -> None:
    page = window.enter(form, why="x", by="H1", **sent)
    assert page.status in (404, 409, 422)
    assert f'id="f-{field}-wrong"' in page.html
    assert kept_of(window.house.path, _DAY).changes == ()


def test_sent_twice_a_row_is_added_once(window: Window) -> None:
    for _ in range(2):
        page = window.post(
            "/rules/add/places", place="A9", why="new", by="H1", once="the same token"
        )
        assert "Added to places: A9." in page.text


def test_what_an_address_fills_in_is_cut_to_what_a_field_takes(onlooker: Window) -> None:
    page = onlooker.get("/rules/add/places", place="x" * 2000)
    assert (page.status, page.field("place")) == (200, "x" * 500)
