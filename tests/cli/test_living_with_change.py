"""`plan --keep`, `changed` and `what-if` on the invented college."""

from __future__ import annotations

import shutil
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

if TYPE_CHECKING:
    from collections.abc import Callable

    from conftest import Result, Stockroom

Told = dict[str, Any]


@pytest.fixture
def at(stockroom: Stockroom, own: Path) -> Callable[..., Result]:
    """Runs one command as T1 on a day of January or later, as "01-11"."""

    def call(day: str, *words: str) -> Result:
        return stockroom(*words, "--by", "T1", "--as-at", f"2027-{day}", store=own)

    return call


@pytest.fixture
def kept(at: Callable[..., Result]) -> Callable[..., Result]:
    """The same, with the first day's plan kept as 0001."""
    assert at("01-04", "plan", "--keep").code == 0
    return at


def told(result: Result) -> Told:
    assert result.code == 0, result.err
    data: Told = result.json
    return data


def by_ref(data: Told, about: str) -> dict[str, Told]:
    return {c["ref"] or f"new {c['now']}": c for c in data["changes"] if c["about"] == about}


def bare(data: Told) -> list[tuple[Any, ...]]:
    """The changes without their causes and what is done."""
    keys = ("about", "ref", "now", "item", "text")
    return [tuple(change[key] for key in keys) for change in data["changes"]]


def test_a_kept_plan_is_numbered_from_one(at: Callable[..., Result]) -> None:
    assert "Plan 0001, kept" in at("01-04", "plan", "--keep").out
    assert told(at("01-04", "plan", "--keep", "--json"))["kept_as"] == "0002"
    assert told(at("01-04", "plan", "--json"))["kept_as"] is None


@pytest.mark.file
def test_keeping_wants_initials(stockroom: Stockroom, own: Path) -> None:
    before = own.read_bytes()
    asked = stockroom("plan", "--keep", store=own)
    assert (asked.code, "Whose initials?" in asked.err) == (2, True)
    assert own.read_bytes() == before


def test_nothing_changed_at_first(kept: Callable[..., Result]) -> None:
    assert kept("01-04", "changed").out.startswith("nothing changed since plan 0001")
    assert told(kept("01-04", "plan", "--json"))["changed_since"] is None


def test_the_term_is_kept_though_a_week_is_shown(at: Callable[..., Result]) -> None:
    shown = at("01-04", "plan", "--keep", "--from", "2027-01-25", "--to", "2027-01-29")
    assert "Plan 0001, kept" in shown.out
    assert told(at("01-04", "changed", "--json"))["count"] == 0


def test_a_good_look_is_the_cause_of_what_it_saves(kept: Callable[..., Result]) -> None:
    """T08. S03 is looked at on 11 January: the iodide order is gone, and says by whose hand."""
    kept("01-11", "look", "S03", "--good")
    data = told(kept("01-11", "changed", "--json"))
    orders = {c["item"]: c for c in data["changes"] if c["about"] == "order"}
    assert orders["potassium iodide"]["what"] == ["gone"]
    cause = "S03 looked at 2027-01-11 by T1, good"
    assert orders["potassium iodide"]["cause"] == cause
    assert [(c["about"], c["ref"], c["what"]) for c in data["done"]] == [("check", "S03", ["done"])]
    # a batch that is cut in two because of it is further off, and said to be
    iodide = [c["cause"] for c in data["changes"] if c["item"].startswith("potassium iodide")]
    assert cause in iodide
    assert {each.removeprefix("most likely: ") for each in iodide} == {cause}


def test_a_bigger_class_shows_only_the_extra(kept: Callable[..., Result]) -> None:
    kept("01-04", "shift", "K08", "--groups", "11")
    data = told(kept("01-04", "changed", "--json"))
    hypo = next(c for c in data["changes"] if "thiosulfate 0.0500" in c["item"])
    assert hypo["text"].startswith("528 cm³ → 627 cm³")
    assert hypo["cause"] == "K08 8 → 11 groups (2027-01-04 by T1)"
    assert {c["cause"] for c in data["changes"] if c["about"] == "make"} == {hypo["cause"]}
    assert by_ref(data, "booking")["K08"]["cause"] == "entered 2027-01-04 by T1"


def test_a_made_batch_is_done_and_not_gone(kept: Callable[..., Result]) -> None:
    line = "potassium permanganate 0.0200 mol/dm3"
    kept("01-29", "make", line, "4620 cm3", "--from", "B10", "--place", "D1")
    data = told(kept("01-29", "changed", "--json"))
    made = [c for c in data["done"] if c["about"] == "make" and c["item"] == line]
    assert any("4 620 cm³ made 2027-01-29 by T1" in c["text"] for c in made)
    assert not any(c["item"] == line for c in data["changes"] if c["about"] == "make")


def test_no_change_is_without_its_cause(kept: Callable[..., Result]) -> None:
    """A busy fortnight: every kind of event, and a reason for each thing that differs."""
    for words in (
        ("look", "S12", "--bad"),
        ("spoil", "S05", "--why", "yellow tinge"),
        ("shift", "K06", "--groups", "13"),
        ("shift", "K13", "--on", "2027-02-09"),
        ("cancel", "K17"),
        ("lost", "B11"),
        ("arrive", "lithium chloride", "100 g", "--printed", "none", "--place", "A2"),
        ("rule", "starch 0.5 % w/v", "life", "lasts=2 d", "--why", "smells"),
        ("book", "R01", "--on", "2027-02-11", "--at", "09:15", "--groups", "12", "--dept", "CH"),
    ):
        done = kept("01-18", *words)
        assert done.code == 0, done.err
    data = told(kept("01-18", "changed", "--json"))
    assert data["count"] > 10
    assert all(c["cause"] and c["text"] for c in (*data["changes"], *data["done"]))
    text = kept("01-18", "changed").out
    assert text.startswith(f"{data['count']} changes since plan 0001 was kept")
    assert max(map(len, text.splitlines())) <= 100


def test_the_head_of_a_sheet_says_that_it_is_out_of_date(kept: Callable[..., Result]) -> None:
    kept("01-04", "shift", "K08", "--groups", "11")
    count = told(kept("01-04", "changed", "--json"))["count"]
    said = f"{count} changes since plan 0001 was kept: stockroom changed"
    for command in (("plan",), ("fresh",), ("buying",), ("plan", "--to", "2027-01-15")):
        assert said in kept("01-04", *command).said
    assert told(kept("01-04", "plan", "--json"))["changed_since"] == {
        "plan": "0001", "changes": count,
    }  # fmt: skip


def test_an_older_copy_may_be_asked_about(kept: Callable[..., Result]) -> None:
    kept("01-04", "shift", "K08", "--groups", "11")
    kept("01-04", "plan", "--keep")
    assert told(kept("01-04", "changed", "--json"))["count"] == 0
    assert told(kept("01-04", "changed", "1", "--json"))["count"] > 0


def test_a_copy_of_a_later_day_is_not_looked_back_from(at: Callable[..., Result]) -> None:
    at("01-11", "plan", "--keep")
    assert at("01-04", "changed").code == 1
    refused = at("01-04", "changed", "0001")
    assert (refused.code, "2027-01-11" in refused.err) == (1, True)


def test_a_number_nobody_gave(kept: Callable[..., Result], stockroom: Stockroom) -> None:
    asked = kept("01-04", "changed", "0007")
    assert (asked.code, "Nearest: 0001" in asked.err) == (2, True)


def test_without_a_kept_plan_there_is_nothing_to_say(at: Callable[..., Result]) -> None:
    asked = at("01-04", "changed")
    assert (asked.code, "stockroom plan --keep" in asked.err) == (1, True)


def test_a_cautious_copy_is_held_against_a_cautious_plan(at: Callable[..., Result]) -> None:
    at("01-04", "plan", "--keep", "--cautious")
    data = told(at("01-04", "changed", "--json"))
    assert (data["kept"]["cautious"], data["count"]) == (True, 0)
    assert told(at("01-04", "plan", "--json"))["changed_since"] is None


def test_an_unrelated_event_moves_no_make(kept: Callable[..., Result]) -> None:
    """Salt arrives that no class is short of, an unknown is thrown out, the last show is off."""
    for words in (
        ("arrive", "sodium chloride", "500 g", "--printed", "none", "--place", "A2"),
        ("discard", "B36", "--how", "waste", "--why", "unknown"),
        ("cancel", "K29"),
    ):
        done = kept("01-04", *words)
        assert done.code == 0, done.err
    data = told(kept("01-04", "changed", "--json"))
    assert not any("day" in c["what"] for c in data["changes"] if c["about"] == "make")


def test_an_order_of_a_day_since_is_the_cause_and_a_later_one_is_not(
    at: Callable[..., Result],
) -> None:
    """The order is entered first, for a day after the one the plan is then kept for."""
    order = ("order", "lithium chloride", "2", "100 g", "--price", "14.50")
    at("01-20", *order, "--expected", "2027-02-01")
    at("01-11", "plan", "--keep")
    early = told(at("01-19", "changed", "--json"))
    assert not any("P01" in c["cause"] + c["text"] for c in (*early["changes"], *early["done"]))
    data = told(at("01-20", "changed", "--json"))
    lithium = [c for c in data["done"] if c["item"] == "lithium chloride"]
    assert ["P01 2 × 100 g ordered 2027-01-20 by T1" in c["text"] for c in lithium] == [True]


# -- what if ----------------------------------------------------------------------------------

SAME = [
    (("--groups", "K08=11"), ("shift", "K08", "--groups", "11")),
    (("--shift", "K13=2027-02-09"), ("shift", "K13", "--on", "2027-02-09")),
    (
        ("--shift", "K08=2027-01-27,14:00"),
        ("shift", "K08", "--on", "2027-01-27", "--at", "14:00"),
    ),
    (("--without", "S01"), ("lost", "S01")),
    (("--cancel", "K05"), ("cancel", "K05")),
    (
        ("--book", "R01,2027-02-11,12,09:15,CH"),
        ("book", "R01", "--on", "2027-02-11", "--at", "09:15", "--groups", "12", "--dept", "CH"),
    ),
]


@pytest.mark.file
@pytest.mark.parametrize(("supposed", "real"), SAME, ids=lambda words: words[0])
def test_what_if_is_what_follows_when_it_is_done(
    kept: Callable[..., Result],
    stockroom: Stockroom,
    own: Path,
    tmp_path: Path,
    supposed: tuple[str, ...],
    real: tuple[str, ...],
) -> None:
    before = own.read_bytes()
    asked = told(kept("01-04", "what-if", *supposed, "--json"))
    assert own.read_bytes() == before
    assert asked["count"] > 0
    assert all(change["cause"] for change in asked["changes"])
    copy = Path(shutil.copy(own, tmp_path / "done.sqlite"))
    hand = ("--by", "T1", "--as-at", "2027-01-04")
    assert stockroom(*real, *hand, store=copy).code == 0
    done = told(stockroom("changed", "--json", "--as-at", "2027-01-04", store=copy))
    assert bare(asked) == bare(done)
    assert (asked["minutes"], asked["cost"]) == (done["minutes"], done["cost"])


def test_what_if_cautious_is_the_cautious_plan(at: Callable[..., Result]) -> None:
    def decided(*words: str) -> Told:
        plan = told(at("01-04", "plan", "--json", *words))
        minutes = sum(make["minutes"] for make in plan["makes"])
        return {"minutes": minutes, "cost": round(sum(o["cost"] for o in plan["orders"]), 2)}

    asked = told(at("01-04", "what-if", "--cautious", "--json"))
    usual, cautious = decided(), decided("--cautious")
    for key in ("minutes", "cost"):
        assert asked[key]["before"] == usual[key]
        assert asked[key]["after"] == cautious[key]


def test_several_things_may_be_supposed_at_once(at: Callable[..., Result]) -> None:
    words = ("--groups", "K08=11", "--groups", "K09=9", "--cancel", "K05", "--without", "S01")
    asked = told(at("01-04", "what-if", *words, "--json"))
    assert asked["if"] == [
        "K08 8 → 11 groups", "K09 8 → 9 groups", "K05 dropped", "without S01",
    ]  # fmt: skip
    text = at("01-04", "what-if", *words).out
    assert text.startswith(f"{asked['count']} changes if so")
    assert "Nothing was written." in text


def test_a_class_more_takes_after_the_last_of_its_kind(at: Callable[..., Result]) -> None:
    words = told(at("01-04", "what-if", "--book", "R01 2027-02-11 12 groups", "--json"))["if"]
    assert words == ["K30 R01 2027-02-11 13:30, 12 groups, OU"]


@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (("--groups", "K08=0"), 2, "0 groups?"),
        (("--groups", "K08=400"), 2, "400 groups?"),
        (("--groups", "K08=8"), 2, "K08 is so already: 8 groups"),
        (("--groups", "K80=9"), 2, "Nearest: K08"),
        (("--groups", "K08"), 2, "K08=11"),
        (("--groups", "K08=many"), 2, "'many'"),
        (("--shift", "K08=2027-01-26"), 2, "K08 is so already"),
        (("--shift", "K08=2027-01-27,09:00,10:00"), 2, "more than a day and a time"),
        (("--shift", "K08=2027-01-03"), 2, "3 January 2027 is past"),
        (("--shift", "K08=2027-02-15"), 1, "is closed. Keep it?"),
        (("--shift", "K08=2027-05-11"), 1, "after the last day planned, 26 March 2027"),
        (("--shift", "K08=2027-05-11,14:00"), 1, "after the last day planned"),
        (("--groups", "K08=9", "--groups", "k08=10"), 2, "k08 is named twice, in --groups"),
        (("--shift", "K08=2027-01-27", "--shift", "K08=14:00"), 2, "named twice, in --shift"),
        (("--cancel", "K05", "--cancel", "K05"), 2, "K05 is named twice, in --cancel"),
        (("--cancel", "K05", "--groups", "K05=9"), 2, "twice, in --cancel and --groups"),
        (("--cancel", "K05", "--shift", "K05=14:00"), 2, "twice, in --cancel and --shift"),
        (("--without", "S03", "--without", "s03"), 2, "named twice, in --without"),
        (("--without", "S99"), 2, "Nearest:"),
        (("--without", "B28"), 2, "B28 was not found as it is"),
        (("--cancel", "K5"), 2, 'No booking "K5"'),
        (("--book", "R01,2027-02-11"), 2, "not a recipe, a day and groups"),
        (("--book", "R01,2027-02-11,400"), 2, "400 groups?"),
        (("--book", "R99,2027-02-11,4"), 2, 'No recipe "R99"'),
        (("--book", "R01,2027-02-11,4,09:15,XX"), 2, 'No department "XX"'),
        (("--book", "R01,2027-05-11,4"), 1, "after the last day planned"),
        ((), 2, "Nothing was asked"),
    ],
    ids=lambda value: " ".join(value) if isinstance(value, tuple) else None,
)
def test_what_may_not_be_entered_may_not_be_supposed(
    at: Callable[..., Result], words: tuple[str, ...], code: int, said: str
) -> None:
    asked = at("01-04", "what-if", *words)
    assert asked.code == code
    assert said in asked.err
    assert asked.out == ""


def test_a_dropped_class_is_not_dropped_twice(at: Callable[..., Result]) -> None:
    at("01-04", "cancel", "K05")
    assert at("01-04", "what-if", "--cancel", "K05").code == 1
    assert at("01-04", "what-if", "--groups", "K05=9").code == 1


def test_a_class_may_be_resized_and_moved_at_once(at: Callable[..., Result]) -> None:
    asked = at("01-04", "what-if", "--groups", "K08=11", "--shift", "K08=2027-01-27", "--json")
    assert told(asked)["if"] == ["K08 on 2027-01-27 09:15", "K08 8 → 11 groups"]


def test_an_empty_bottle_and_one_thrown_out_are_said_to_be_so(at: Callable[..., Result]) -> None:
    at("01-04", "spill", "S13", "130 cm3", "--why", "fell")
    asked = at("01-04", "what-if", "--without", "S13")
    assert (asked.code, "S13 is empty as it is" in asked.err) == (2, True)
    at("01-04", "discard", "B36", "--how", "waste", "--why", "unknown")
    asked = at("01-04", "what-if", "--without", "B36")
    assert (asked.code, "B36 is not there on 4 January 2027" in asked.err) == (2, True)


def test_a_closed_day_may_be_kept(at: Callable[..., Result]) -> None:
    asked = at("01-04", "what-if", "--shift", "K08=2027-02-15", "--keep-closed")
    assert asked.code == 0, asked.err
