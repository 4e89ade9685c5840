"""The pages under docs/ are run as they stand: each command shown, and every line shown under it.

A `console` block holds commands after `$ ` with the lines they print below them. Lines
must all be there, in order; a line of `…` alone stands for any lines left out. The
commands of a page share one copy of the practice store, in the order of the page.
"""

from __future__ import annotations

import doctest
import re
import shlex
import shutil
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

DOCS = Path(__file__).parents[2] / "docs"
PAGES = sorted(page.name for page in DOCS.glob("*.md"))
RUN = (
    "how-things-age.md",
    "strength-and-uncertainty.md",
    "data-and-sources.md",
    "how-the-plan-is-made.md",
    "nothing-lost.md",
    "on-paper.md",
)


@dataclass(frozen=True)
class Shown:
    """A command as a page shows it, with the lines it says come back."""

    words: list[str]
    lines: list[str]


def shown_in(text: str) -> Iterator[Shown]:
    for block in re.findall(r"^```console\n(.*?)^```", text, flags=re.MULTILINE | re.DOTALL):
        for part in re.split(r"^\$ stockroom ", block, flags=re.MULTILINE)[1:]:
            # a command may run on over a backslash, as in a shell
            command, *lines = part.replace("\\\n", " ").splitlines()
            yield Shown(shlex.split(command), [line.strip() for line in lines if line.strip()])


def missing(lines: list[str], printed: str) -> list[str]:
    """The lines that are not printed, or not in that order."""
    left = [line.strip() for line in printed.splitlines()]
    lost = []
    for line in lines:
        if line == "…":
            continue
        if line in left:
            left = left[left.index(line) + 1 :]
        else:
            lost.append(line)
    return lost


def files_used(text: str) -> dict[str, str]:
    """Files a page writes out in full, by name: a fenced `csv NAME` block."""
    found = re.findall(r"^```csv (\S+)\n(.*?)^```", text, flags=re.MULTILINE | re.DOTALL)
    return dict(found)


@pytest.mark.parametrize("page", RUN)
def test_a_page_prints_what_it_shows(
    page: str, stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    text = (DOCS / page).read_text(encoding="utf-8")
    store = Path(shutil.copy(practice, tmp_path / "practice.sqlite"))
    for name, content in files_used(text).items():
        (tmp_path / name).write_text(content, encoding="utf-8")
    commands = list(shown_in(text))
    assert len(commands) >= 5
    for shown in commands:
        result = stockroom(*shown.words, store=store)
        assert missing(shown.lines, result.out + result.err) == [], shown.words


def test_the_examples_of_a_page_come_out_as_written() -> None:
    tried = doctest.testfile(str(DOCS / "how-the-plan-is-made.md"), module_relative=False)
    assert tried.attempted >= 5
    assert tried.failed == 0


def test_every_page_that_shows_commands_is_run() -> None:
    with_commands = [page for page in PAGES if "```console" in (DOCS / page).read_text("utf-8")]
    assert sorted(with_commands) == sorted(RUN)


def test_a_line_that_is_not_printed_would_be_noticed() -> None:
    assert missing(["a", "…", "c"], "a\nb\nc") == []
    assert missing(["c", "a"], "a\nb\nc") == ["a"]
    assert missing(["d"], "a\nb\nc") == ["d"]
