"""Whatever a message, a hint or a next step tells somebody to type is a command there is."""

from __future__ import annotations

import ast
import re
from collections.abc import Iterator
from pathlib import Path

import pytest

from stockroom.cli.commands import COMMANDS

HOUSE = Path(__file__).parents[2] / "stockroom"
NAMES = {name for commands in COMMANDS.values() for name in commands}
# "not a stockroom store" and "a fault in stockroom itself" are plain words
PLAIN = {"store", "itself"}
NAMED = re.compile(r"(?<!\w)stockroom ([a-z][a-z-]*)")


def texts(source: str) -> Iterator[str]:
    """Every text in a module, docstrings included: help is made of them."""
    for node in ast.walk(ast.parse(source)):
        if isinstance(node, ast.Constant) and isinstance(node.value, str):
            yield node.value


def unknown(source: str) -> list[str]:
    named = {word for text in texts(source) for word in NAMED.findall(text)}
    return sorted(named - NAMES - PLAIN)


@pytest.mark.parametrize("path", sorted(HOUSE.rglob("*.py")), ids=lambda path: path.stem)
def test_every_command_named_is_there(path: Path) -> None:
    assert unknown(path.read_text(encoding="utf-8")) == []


@pytest.mark.parametrize(
    "source",
    ['hint = "Do it again with `stockroom redo`."', 'next = f"stockroom redo {path}"'],
)
def test_a_planted_command_that_is_not_there_is_caught(source: str) -> None:
    assert unknown(source) == ["redo"]
