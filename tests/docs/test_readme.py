"""The README is run as it stands: a newcomer's first hour, and the output it shows."""

from __future__ import annotations

import re
import shlex
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.cli.commands import COMMANDS

if TYPE_CHECKING:
    from conftest import Result, Stockroom

README = Path(__file__).parents[2] / "README.md"


def blocks(language: str, after: str) -> list[str]:
    """The fenced blocks of a language below a line, up to the next heading of its level."""
    text = README.read_text(encoding="utf-8").split(after, 1)[1]
    text = re.split(r"^## ", text, maxsplit=1, flags=re.MULTILINE)[0]
    return re.findall(rf"^```{language}\n(.*?)^```", text, flags=re.MULTILINE | re.DOTALL)


def first_hour() -> list[list[str]]:
    lines = "".join(blocks("sh", "## Your first hour\n")).splitlines()
    return [shlex.split(line) for line in lines]


@pytest.fixture
def hour(
    stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> list[tuple[list[str], Result]]:
    """Every line of the first hour run in order: the words typed, and what came back."""
    said = []
    for words in first_hour():
        if words[0] == "export":
            name, _, value = words[1].partition("=")
            monkeypatch.setenv(name, value)
            continue
        assert words[0] == "stockroom"
        said.append((words[1:], stockroom(*words[1:])))
    return said


def test_every_command_of_the_first_hour_works(hour: list[tuple[list[str], Result]]) -> None:
    assert [(words, result.err) for words, result in hour if result.code] == []
    assert len(hour) > 25


def test_the_hour_ends_with_the_made_solution_serving_the_booking(
    hour: list[tuple[list[str], Result]],
) -> None:
    """2 112 cm³ are needed; the plan makes 2 150; made, they are had, and past by 16 February.

    The life is the house's own 28 days, in the place of the starter's 60.
    """
    answers = [result.out for words, result in hour if words[0] in ("plan", "why", "past")]
    plan, before, after, past = answers
    assert "2 150 cm³" in plan
    assert "make" in before.splitlines()[0]
    assert "2 112 cm³ from S02" in after
    assert "S02" in past
    assert "past" in past


def test_the_output_shown_is_what_the_demo_prints(stockroom: Stockroom, tmp_path: Path) -> None:
    [shown] = blocks("text", "# stockroom\n")
    printed = stockroom("demo", store=tmp_path / "practice.sqlite").out
    lines = [line.strip() for line in printed.splitlines()]
    missing = [line for line in shown.splitlines() if line.strip() not in lines]
    assert missing == []
    assert len(shown.splitlines()) == 10


def test_every_command_is_in_the_readme() -> None:
    text = README.read_text(encoding="utf-8")
    names = [name for commands in COMMANDS.values() for name in commands]
    assert [name for name in names if name not in text] == []
