"""Counting the shelves at the command line: one sitting, stopped sittings, and what is told."""

from __future__ import annotations

import io
import os
import signal
import subprocess
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from shlex import quote
from typing import TYPE_CHECKING, Any

import pytest

from stockroom.errors import StoreTrouble
from stockroom.service import walk_entering

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

WHO = ("--by", "T2")
# a shell that puts a test in the background leaves SIGINT ignored, which a child would inherit
RUN = (
    "import signal; signal.signal(signal.SIGINT, signal.default_int_handler)\n"
    "from stockroom.cli.main import run; run()"
)


def walk_of(stockroom: Stockroom, store: Path, name: str = "Jan") -> Any:
    return stockroom("walk", name, "--json", store=store).json


def as_listed(row: dict[str, Any], less: float = 0) -> str:
    return f"{row['bottle']} {row['left'] - less:g} {row['unit']}"


def test_sixty_bottles_in_one_sitting_from_a_file(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    used = stockroom("usage", "--json", store=own).json["usage"]
    rows = stockroom("walk", "Jan", *WHO, "--json", store=own).json["to_count"]
    lines = [as_listed(row, less=10 if n % 12 == 0 else 0) for n, row in enumerate(rows[:60])]
    (tmp_path / "counts.txt").write_text("\n".join(lines), encoding="utf-8")
    result = stockroom("walk", "Jan", "--file", "counts.txt", *WHO, store=own)
    assert (result.code, result.err) == (
        0,
        f'next: stockroom --store {quote(str(own))} walk "Jan"\n',
    )
    assert result.out.startswith("PRACTICE\nCounted ")
    assert result.said.endswith(
        "This sitting: 5 differing, 55 counted."
        ' Walk "Jan": 60 counted, 5 of them differing, 14 still to count.'
    )
    found = walk_of(stockroom, own)
    assert [each["bottle"] for each in found["met"]] == [row["bottle"] for row in rows[:60]]
    assert [each["difference"] for each in found["met"]].count(-10) == 5
    # what a count finds missing was not used by any class
    assert stockroom("usage", "--json", store=own).json["usage"] == used
    assert sum(total["less"] for total in found["totals"]) == 50


def test_a_bad_line_is_told_with_its_number_and_costs_nothing_else(
    stockroom: Stockroom, own: Path
) -> None:
    stockroom("walk", "Jan", *WHO, store=own)
    typed = "B06 590 g\n\n# upper shelf\nB19 nonsense\nB99 3 g\nB07 same\nB08 ....\n"
    result = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed=typed)
    assert result.code == 1
    assert 'line 4 "B19 nonsense": B19 "nonsense" is no amount.\n' in result.err
    assert 'line 5 "B99 3 g": No bottle "B99".\n  Nearest: B09; B19; B29.\n' in result.err
    assert "1 differing, 1 counted, 2 lines skipped." in result.said
    assert [each["bottle"] for each in walk_of(stockroom, own)["met"]] == ["B06", "B07"]


def test_the_sheet_lists_what_is_still_to_be_counted_at_the_places_asked_for(
    stockroom: Stockroom, own: Path
) -> None:
    result = stockroom("walk", "Jan-A2", "--places", "A2, A1", *WHO, store=own)
    assert (result.code, result.err) == (0, "")
    # at its foot, where it is read on paper too
    assert result.said.endswith('Next: stockroom walk "Jan-A2" --enter')
    heading = 'Walk "Jan-A2" along A2, A1, started Mon 2027-01-04 by T2: 0 counted, 22 still'
    assert heading in result.said
    assert result.out.index("A2 solids cupboard") < result.out.index("A1 acids cupboard")
    assert "B06 640 g ............ sodium thiosulfate pentahydrate" in result.said
    assert "LOOK OUT FOR B28 lithium chloride, not found; last at A2" in result.said
    assert "B01" not in result.out
    assert max(map(len, result.out.splitlines())) <= 100
    stockroom("walk", "Jan-A2", "--enter", *WHO, store=own, typed="B06 640 g\n")
    assert "B06" not in stockroom("walk", "Jan-A2", store=own).out


def test_a_missing_bottle_names_the_bookings_once_at_the_end(
    stockroom: Stockroom, own: Path
) -> None:
    stockroom("walk", "Jan", *WHO, store=own)
    result = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed="B11 missing\nB06 same\n")
    assert result.out.count("drawn on for") == 1
    assert "B11 was to be drawn on for K11, K13, K25: stockroom plan" in result.said
    assert "stands" not in result.out
    told = stockroom("walk", "Jan", store=own)
    assert "1 counted, 1 not found" in told.said


def test_an_ended_walk_shows_what_came_of_it_and_is_not_taken_up_again(
    stockroom: Stockroom, own: Path
) -> None:
    stockroom("walk", "Jan", "--places", "A2", *WHO, store=own)
    typed = "B06 590 g\nB12 320 g\nB11 missing\nB28 here\n+ brown powder, A2, 100 g\n"
    stockroom("walk", "Jan", "--enter", *WHO, store=own, typed=typed)
    result = stockroom("walk", "Jan", "--end", "--by", "T1", store=own)
    assert result.code == 0
    parts = result.out.split("\n\n")
    assert [part.partition("\n")[0] for part in parts[1:]] == [
        "DIFFERENCES",
        "BY WHAT IT IS, NOT COUNTED AS USED",
        "NOT FOUND",
        "TURNED UP",
        "NOBODY COUNTED",
    ]
    assert "B06  640 g → 590 g  −50 g  sodium thiosulfate pentahydrate; T2" in parts[1]
    assert "+10 g  iron(II) sulfate heptahydrate" in parts[2]
    assert "B11  130 g" in parts[3]
    assert ["B28  38 g" in parts[4], "B46  100 g" in parts[4]] == [True, True]
    assert parts[5].strip().count("\n") == 15
    assert stockroom("walk", "Jan", store=own).out == result.out
    refused = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed="B07 same\n")
    assert (refused.code, refused.out) == (1, "")
    assert refused.err.startswith('The walk "Jan" was ended on 4 January 2027 by T1;')


def test_a_walk_with_lines_skipped_is_not_ended(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    stockroom("walk", "Jan", *WHO, store=own)
    counts = tmp_path / "counts.txt"
    counts.write_text("B06 640 g\nB07 64 zz\n", encoding="utf-8")
    asked = ("walk", "Jan", "--file", "counts.txt", "--end", *WHO)
    result = stockroom(*asked, store=own)
    assert result.code == 1
    assert 'The walk "Jan" is not ended, since lines were skipped.' in result.err
    assert walk_of(stockroom, own)["ended"] is None
    counts.write_text("B06 640 g\nB07 64 g\n", encoding="utf-8")
    # one answer as data, of the walk as it was left
    data = stockroom(*asked, "--json", store=own).json
    assert (data["ended"], len(data["lines"])) == ("2027-01-04", 2)
    assert "NOBODY COUNTED" in stockroom("walk", "Jan", store=own).out


def test_a_walk_ended_by_somebody_else_meanwhile_is_told_once(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    stockroom("walk", "Jan", *WHO, store=own)
    enter = walk_entering.enter_line

    def and_then_it_is_ended(path: Path, walk: str, line: str, **more: Any) -> Any:
        told = enter(path, walk, line, **more)
        walk_entering.end(path, walk, on=None, today=more["today"], by="T1")
        return told

    monkeypatch.setattr(walk_entering, "enter_line", and_then_it_is_ended)
    result = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed="B06 same\nB07 same\n")
    assert (result.code, result.err.count("was ended on")) == (1, 1)
    assert "This sitting: 1 counted, 1 line skipped." in result.said


def test_what_stopped_a_sitting_is_told_though_it_cannot_be_summed_up(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def no_more(*_: object, **__: object) -> None:
        raise StoreTrouble("Nor can it be read.")

    def full(*_: object, **__: object) -> None:
        monkeypatch.setattr("stockroom.service.walk.sheet", no_more)
        raise StoreTrouble("The disc is full.")

    stockroom("walk", "Jan", *WHO, store=own)
    monkeypatch.setattr(walk_entering, "enter_line", full)
    result = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed="B06 same\n")
    assert (result.code, "The disc is full." in result.err) == (1, True)
    assert "Nor can it" not in result.err


def test_every_walk_is_listed_finished_or_not(stockroom: Stockroom, own: Path) -> None:
    assert "No walk was started yet" in stockroom("walk", store=own).out
    for name in ("Jan-A1", "Jan-A2"):
        stockroom("walk", name, "--places", name[-2:], *WHO, store=own)
    stockroom("walk", "Jan-A1", "--enter", *WHO, store=own, typed="B13 same\n")
    stockroom("walk", "Jan-A1", "--end", *WHO, store=own)
    result = stockroom("walk", store=own)
    assert "Jan-A1 2027-01-04 T2 A1 ended 2027-01-04 by T2: 1 counted" in result.said
    assert "Jan-A2 2027-01-04 T2 A2 open: 0 counted, 18 still to count" in result.said
    listed = stockroom("walk", "--json", store=own).json["walks"]
    assert [(each["walk"], each["ended"], each["still"]) for each in listed] == [
        ("Jan-A1", "2027-01-04", None),
        ("Jan-A2", None, 18),
    ]


@pytest.mark.parametrize(
    ("words", "code", "message"),
    [
        (["walk", "--enter"], 2, "Which walk?"),
        (["walk", "--places", "A1"], 2, "Which walk?"),
        (["walk", "Jan"], 2, "Whose initials?"),
        (["walk", "Jan", "--places", "A9", "--by", "T1"], 2, 'No place "A9".'),
        (["walk", "Jan", "--enter", "--by", "T1"], 2, 'No walk "Jan".'),
        (["walk", "Jan", "--end", "--by", "T1"], 2, 'No walk "Jan".'),
        (["walk", "Jan", "--places", "A1", "--end", "--by", "T1"], 2, "--places A1 with a walk"),
    ],
)
def test_a_walk_that_cannot_be_is_refused_and_nothing_begun(
    stockroom: Stockroom, own: Path, words: list[str], code: int, message: str
) -> None:
    result = stockroom(*words, store=own)
    assert (result.code, result.out) == (code, "")
    assert result.err.startswith(message)
    assert stockroom("walk", "--json", store=own).json["walks"] == []


@pytest.mark.parametrize(
    ("words", "message"),
    [([], "Whose initials?"), (["--by", "T1", "--on", "2027-01-09"], "9 January 2027 is still")],
)
def test_what_is_wrong_with_every_line_is_said_once(
    stockroom: Stockroom, own: Path, words: list[str], message: str
) -> None:
    stockroom("walk", "Jan", *WHO, store=own)
    typed = "B06 590 g\nB07 same\n"
    result = stockroom("walk", "Jan", "--enter", *words, store=own, typed=typed)
    assert (result.code, result.out, result.err.count(message)) == (2, "", 1)


def test_a_file_that_is_not_there_is_no_sitting(stockroom: Stockroom, own: Path) -> None:
    stockroom("walk", "Jan", *WHO, store=own)
    result = stockroom("walk", "Jan", "--file", "none.txt", *WHO, store=own)
    assert (result.code, result.out) == (1, "")
    assert "none.txt" in result.err


def test_a_sitting_answers_a_program_too(stockroom: Stockroom, own: Path) -> None:
    stockroom("walk", "Jan", *WHO, store=own)
    typed = "B06 590 g\nB99 3 g\n"
    data = stockroom("walk", "Jan", "--enter", "--json", *WHO, store=own, typed=typed).json
    assert [(each["bottle"], each["came"]) for each in data["lines"]] == [("B06", "differing")]
    assert [(each["line"], each["text"]) for each in data["skipped"]] == [(2, 'No bottle "B99".')]
    assert (data["practice"], len(data["to_count"])) == (True, 73)


class Terminal(io.StringIO):
    """Standard input that says it is a terminal."""

    def isatty(self) -> bool:
        return True


def test_at_a_terminal_each_bottle_is_asked_for_in_turn(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    stockroom("walk", "Jan", "--places", "A1", *WHO, store=own)
    monkeypatch.setattr(io, "StringIO", Terminal)
    # B04 counted; B13 not yet; B14 slipped, then another met on the way, then counted; then enough
    typed = "same\n\nfoo\nB06 600 g\n1.8 L\nstop\n"
    result = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed=typed)
    assert result.code == 0
    asked = [part.split("  ")[0] for part in result.out.split("A1  ")[1:]]
    assert asked == ["B04", "B13", "B14", "B14", "B14", "B15"]
    assert 'line 3 "B14 foo"' in result.err
    assert "This sitting: 1 counted, 2 differing." in result.said


@pytest.mark.parametrize(
    ("typed", "code", "told"),
    [
        # the bottle asked for is entered after all; the other one met on the way is not
        ("B06 zz\nfoo\nsame\nstop\n", 1, "1 counted, 1 line skipped."),
        ("B06 zz\nB06 600 g\nsame\nstop\n", 0, "1 differing, 1 counted."),
        ("+ brown powder, 100 g\n+ brown powder, A1, 100 g\nstop\n", 0, "1 not on the list."),
        ("foo\nstop\n", 1, "1 line skipped."),
    ],
)
def test_what_was_skipped_at_a_terminal_stays_so_until_it_is_entered(
    stockroom: Stockroom,
    own: Path,
    monkeypatch: pytest.MonkeyPatch,
    typed: str,
    code: int,
    told: str,
) -> None:
    stockroom("walk", "Jan", "--places", "A1,A2", *WHO, store=own)
    monkeypatch.setattr(io, "StringIO", Terminal)
    result = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed=typed)
    assert (result.code, f"This sitting: {told}" in result.said) == (code, True)


@contextmanager
def sitting(store: Path) -> Iterator[subprocess.Popen[str]]:
    """A process of its own that counts what is written to it."""
    words = ["--store", str(store), "walk", "Jan", "--enter", *WHO]
    process = subprocess.Popen(
        [sys.executable, "-c", RUN, *words],
        stdin=subprocess.PIPE,
        stdout=subprocess.PIPE,
        stderr=subprocess.DEVNULL,
        text=True,
        encoding="utf-8",
        env={**os.environ, "PYTHONIOENCODING": "utf-8", "NO_COLOR": "1"},
    )
    try:
        yield process
    finally:
        process.kill()
        process.communicate()


def read_until(process: subprocess.Popen[str], count: int) -> None:
    """Read what it tells until so many bottles were counted."""
    assert process.stdout is not None
    while count:
        line = process.stdout.readline()
        assert line, "it left before it had counted what it was given"
        count -= line.startswith("Counted")


@pytest.mark.parametrize("how", [signal.SIGINT, signal.SIGKILL], ids=["stopped", "killed"])
def test_whoever_is_cut_off_loses_nothing_and_goes_on(
    stockroom: Stockroom, own: Path, how: signal.Signals
) -> None:
    stockroom("walk", "Jan", "--places", "A1", *WHO, store=own)
    rows = walk_of(stockroom, own)["to_count"]
    lines = [as_listed(row, less=1) for row in rows]
    with sitting(own) as process:
        assert process.stdin is not None
        process.stdin.write("\n".join(lines[:2]) + "\n")
        process.stdin.flush()
        read_until(process, 2)
        process.send_signal(how)
        told = process.communicate()[0]
        assert process.returncode == (130 if how is signal.SIGINT else -how)
        # whoever stops is told how far it came; whoever is killed cannot be
        assert ("2 counted, 2 of them differing" in " ".join(told.split())) is (
            how is signal.SIGINT
        )
    assert len(walk_of(stockroom, own)["met"]) == 2
    # the whole list once more: what was saved is not saved twice
    typed = "\n".join(lines)
    result = stockroom("walk", "Jan", "--enter", *WHO, store=own, typed=typed)
    assert f"This sitting: 2 entered already, {len(rows) - 2} differing." in result.said
    found = walk_of(stockroom, own)
    assert {each["difference"] for each in found["met"]} == {-1}
    assert (len(found["met"]), found["to_count"]) == (len(rows), [])
