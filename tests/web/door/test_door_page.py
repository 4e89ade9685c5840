"""docs/who-may-come-in.md says what is so: its tests are there, its options, its numbers."""

from __future__ import annotations

import ast
import re
from pathlib import Path

import pytest

from stockroom.cli.main import program
from stockroom.web.door import bounds, pace, passphrases
from stockroom.web.door import session as sessions

TESTS = Path(__file__).parents[2]
PAGE = (TESTS.parent / "docs" / "who-may-come-in.md").read_text(encoding="utf-8")
NAMED = re.findall(r"\| `(\S+\.py)::(\w+)` \|$", PAGE, flags=re.MULTILINE)


def missing(named: list[tuple[str, str]]) -> list[tuple[str, str]]:
    """The tests named which are not there."""
    return [(file, name) for file, name in named if name not in _tests(TESTS / file)]


def _tests(file: Path) -> set[str]:
    if not file.is_file():
        return set()
    tree = ast.parse(file.read_text(encoding="utf-8"))
    return {each.name for each in tree.body if isinstance(each, ast.FunctionDef)}


def test_every_test_the_page_names_is_there() -> None:
    assert len(NAMED) > 25
    assert missing(NAMED) == []


def test_every_row_of_the_list_names_a_test() -> None:
    rows = re.findall(r"^\| \d+\.\d+\.\d+\b.*$", PAGE, flags=re.MULTILINE)
    assert len(rows) == len(NAMED)


@pytest.mark.parametrize("named", [("web/door/none.py", "test_x"), ("windows.py", "test_none")])
def test_one_that_is_not_there_would_be_noticed(named: tuple[str, str]) -> None:
    assert missing([named]) == [named]


def test_the_page_says_that_the_list_was_not_checked() -> None:
    assert "from memory" in PAGE


def test_every_option_of_the_page_is_one_of_the_command_and_the_other_way_round() -> None:
    serve = program().commands["serve"]
    options = {option for each in serve.params for option in each.opts} - {"--help", "-h"}
    assert options == set(re.findall(r"(?<![\w-])--[a-z][a-z-]+", PAGE))


def test_the_numbers_of_the_page_are_those_of_the_program() -> None:
    hours, idle = sessions.LASTS // 3600, sessions.IDLE // 3600
    assert f"ends {hours} hours after coming in" in PAGE
    assert f"after {idle} hours in which nothing was" in PAGE
    assert f"has {passphrases.LEAST} to {passphrases.MOST} signs" in PAGE
    assert f"may try {pace.AT_ONCE} passphrases at once and then one a minute" in PAGE
    assert f"all addresses together {pace.ALL_AT_ONCE}" in PAGE
    assert f"{bounds.LARGEST_FILE >> 20} MiB, all else {bounds.LARGEST >> 10} KiB" in PAGE
