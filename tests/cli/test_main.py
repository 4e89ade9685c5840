from __future__ import annotations

import os
import subprocess
import sys
from typing import TYPE_CHECKING

import pytest

from stockroom.cli import main
from stockroom.cli.commands import COMMANDS

if TYPE_CHECKING:
    from conftest import Stockroom

NAMES = [name for commands in COMMANDS.values() for name in commands]


@pytest.mark.parametrize("name", NAMES)
def test_every_command_has_help_with_an_example_of_itself(stockroom: Stockroom, name: str) -> None:
    result = stockroom(name, "--help")
    assert result.code == 0
    assert f"Example: stockroom {name}" in " ".join(result.out.split())


@pytest.mark.parametrize("name", NAMES)
def test_every_help_tells_of_the_options_that_stand_anywhere(
    stockroom: Stockroom, name: str
) -> None:
    assert "--as-at" in stockroom(name, "-h").out


def test_help_lists_every_command(stockroom: Stockroom) -> None:
    words = stockroom("--help").out.split()
    assert set(NAMES) <= set(words)


def test_no_words_at_all_show_the_help(stockroom: Stockroom) -> None:
    result = stockroom()
    assert (result.code, result.out) == (0, stockroom("--help").out)


def test_the_version_is_printed(stockroom: Stockroom) -> None:
    assert stockroom("--version").out == "stockroom 0.1.0\n"


def test_a_mistyped_command_gets_the_nearest(stockroom: Stockroom) -> None:
    result = stockroom("strenght")
    assert result.code == 2
    assert "'strenght'" in result.err
    assert "strength" in result.err


def test_a_mistyped_option_gets_the_nearest(stockroom: Stockroom) -> None:
    result = stockroom("plan", "--frm", "2027-01-25")
    assert result.code == 2
    assert "--from" in result.err


def test_problems_go_to_standard_error_only(stockroom: Stockroom) -> None:
    assert stockroom("nonsense").out == ""


def test_a_fault_of_the_program_is_owned_up_to(
    stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("STOCKROOM_DEBUG", raising=False)
    monkeypatch.setattr(main, "pull", lambda words, options: 1 / 0)
    result = stockroom("plan")
    assert result.code == 1
    assert "fault in stockroom itself: ZeroDivisionError" in result.err


def test_a_fault_is_let_through_for_whoever_mends_it(
    stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("STOCKROOM_DEBUG", "1")
    monkeypatch.setattr(main, "pull", lambda words, options: 1 / 0)
    with pytest.raises(ZeroDivisionError):
        stockroom("plan")


def test_stopping_at_the_keyboard_leaves_with_130(
    stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch
) -> None:
    def stop(words: object, options: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(main, "pull", stop)
    assert stockroom("plan").code == 130


def in_a_process(
    *words: str, stdout: int | None = subprocess.PIPE
) -> subprocess.CompletedProcess[str]:
    program = "from stockroom.cli.main import run; run()"
    command = [sys.executable, "-c", program, *words]
    return subprocess.run(
        command, stdout=stdout, stderr=subprocess.PIPE, text=True, encoding="utf-8", check=False
    )


def test_a_reader_that_went_away_leaves_no_traceback() -> None:
    reading, writing = os.pipe()
    os.close(reading)
    result = in_a_process("weigh", "1 L", "1 M", "--of", "NaCl", stdout=writing)
    os.close(writing)
    assert result.stderr == ""


@pytest.mark.skipif(not os.path.exists("/dev/full"), reason="no full device here")
def test_a_full_disc_is_told_in_words() -> None:
    with open("/dev/full", "w", encoding="utf-8") as full:
        result = in_a_process("weigh", "1 L", "1 M", "--of", "NaCl", stdout=full.fileno())
    assert result.returncode == 1
    assert "Traceback" not in result.stderr
    assert "No space left" in result.stderr


def test_a_stream_that_lacks_the_signs_gets_question_marks() -> None:
    program = "from stockroom.cli.main import run; run()"
    result = subprocess.run(
        [sys.executable, "-c", program, "weigh", "1 L", "1 M", "--of", "NaCl"],
        env={**os.environ, "PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"},
        capture_output=True,
        text=True,
        check=True,
    )
    assert "58.44 g of sodium chloride, made up to 1 000 cm?" in result.stdout
