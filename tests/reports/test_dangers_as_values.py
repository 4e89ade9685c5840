"""What a sheet decides about a danger or a guess hangs on its values, never on its words."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from datetime import timedelta
from pathlib import Path

import houses
import pytest

from stockroom.findings import Danger, DangerKind, Finding, Lasting, Moves
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.leaned_on import leaned_on
from stockroom.planning.standing import where_things_stand
from stockroom.reports.files import morning_shelf
from stockroom.reports.files.handover_danger import dangerous, dangers
from stockroom.reports.files.handover_parts import Job
from stockroom.reports.paper import week_also
from stockroom.service.sheets import known_and_planned

OTHER_WORDS = "see to this one: 1, 2 and 3 in B99: move it"
OF_DANGERS = "stands beside B01 in A1: acid: move it"


@pytest.fixture(scope="module")
def college(college_file: Path) -> tuple[Facts, Plan]:
    return known_and_planned(college_file, as_at=houses.MONDAY)


def reworded(findings: Iterable[Finding]) -> list[Finding]:
    """The same with other sentences: dangers all alike, the rest in the words of dangers."""
    return [
        replace(each, text=OTHER_WORDS if isinstance(each, Danger) else OF_DANGERS)
        for each in findings
    ]


def boxed(made: Plan) -> list[tuple[str, tuple[str, ...]]]:
    """Each thing of the danger box: the bottle, and what to type."""
    point = dangerous(made)
    return [(job.text.split()[0], job.commands) for job in point.jobs] if point else []


def test_other_words_move_nothing_out_of_the_danger_box(college: tuple[Facts, Plan]) -> None:
    _, made = college
    other = replace(made, notes=tuple(reworded(made.notes)))
    assert boxed(other) == boxed(made)
    numbers = [number for number, _ in boxed(made)]
    assert numbers == ["S19", "B04", "S12", "B29", "B05a", "B05b", "B36"]
    assert dict(boxed(made))["B29"][0].startswith("stockroom tested B29 --peroxide")
    kept = [note for note in made.notes if note not in dangers(made)]
    assert len([note for note in other.notes if note not in dangers(other)]) == len(kept)


def test_nor_off_the_morning_note_or_the_week_sheet(
    college: tuple[Facts, Plan], monkeypatch: pytest.MonkeyPatch
) -> None:
    known, made = college
    known = replace(known, as_at=houses.day("03-03"))
    monday, sunday = houses.day("03-01"), houses.day("03-07")

    def told() -> tuple[list[str], list[str]]:
        """What the note says of which bottles, and the sheet."""
        shelf = [due.what for due in morning_shelf.at_the_shelf(known)]
        row = week_also.also_of(known, made, monday, sunday)
        return shelf, [each.about for each in row if each.key.startswith("standing ")]

    before = told()
    for module in (morning_shelf, week_also):
        monkeypatch.setattr(
            module, "where_things_stand", lambda *facts: reworded(where_things_stand(*facts))
        )
    assert told() == before
    assert [words.split()[0] for words in before[0]] == ["B29", "S19", "B04", "S12"]
    assert before[1] == ["B04", "S12", "S19"]


def test_a_group_without_a_rule_is_no_danger_at_the_shelf() -> None:
    strange = houses.solution(1.0, "thing", storage_group="radioactive")
    bottle = replace(houses.bought_bottle("B1", strange, houses.cm3(100)), place="P1")
    known = houses.house([strange], bottles=[bottle])
    (found,) = where_things_stand(known.bottles, known.lines, known.places)
    assert "not checked" in found.text
    assert morning_shelf.at_the_shelf(known) == []


def test_a_bottle_in_the_place_of_another_kind_is_in_the_box_with_nobody_beside() -> None:
    plain = houses.planned([])
    text = "stands in A1, kept for acid: bleach beside acid, chlorine if they meet: move it"
    wrong = Danger("B04", text, DangerKind.BESIDE)
    assert boxed(replace(plain, notes=(wrong,))) == [("B04", ("stockroom move B04 PLACE --by XX",))]


def test_the_one_that_has_to_go_is_the_one_to_type() -> None:
    wrong = Danger("B13", "x", DangerKind.BESIDE, ("B04",), "chlorine", Moves.OTHER)
    assert boxed(replace(houses.planned([]), notes=(wrong,))) == [
        ("B13", ("stockroom move B04 PLACE --by XX",))
    ]


@pytest.mark.parametrize(("days", "command"), [(0, "tested"), (-1, "shelf"), (1, "tested")])
def test_the_safety_date_itself_is_the_last_day_to_test(days: int, command: str) -> None:
    made = houses.planned([])
    over = Danger("B29", "x", DangerKind.SAFETY_DATE, day=made.as_at + timedelta(days=days))
    point = dangerous(replace(made, notes=(over,)))
    assert point is not None
    (job,) = point.jobs
    assert isinstance(job, Job)
    assert job.commands[0].startswith(f"stockroom {command} B29")


def test_a_guess_that_lasts_is_told_in_any_words(college: tuple[Facts, Plan]) -> None:
    known, made = college
    line = made.needs[0].line
    guesses = (Lasting(line, "in quite other words"), Finding(line, "overdue, so assumed"))
    told = leaned_on(known, replace(made, guesses=guesses), made.needs[:1])
    assert guesses[0] in told
    assert guesses[1] not in told
