"""Every sheet and file of the invented college, word for word as it was last agreed.

Each file in `sheets/` begins with the command that makes it. After a change that is meant:

    python tests/golden/test_sheets_as_told.py

writes them anew; read what `git diff` shows before it is committed.
"""

from __future__ import annotations

import shlex
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

SHEETS = Path(__file__).parent / "sheets"
FILES = sorted(SHEETS.glob("*.txt"))
PROMPT = "$ stockroom "


@pytest.mark.parametrize("file", FILES, ids=lambda file: file.stem)
def test_a_sheet_reads_as_it_was_agreed(
    file: Path, practice: Path, stockroom: Stockroom, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("COLUMNS", "100")
    command, _, agreed = file.read_text(encoding="utf-8").partition("\n")
    told = stockroom(*shlex.split(command.removeprefix(PROMPT)), store=practice)
    assert told.code in (0, 1), told.err
    assert told.out.rstrip("\n") == agreed.rstrip("\n")


def test_no_line_of_them_is_wider_than_the_page() -> None:
    wide = [
        f"{file.name}: {line}"
        for file in FILES
        for line in file.read_text(encoding="utf-8").splitlines()[1:]
        if len(line) > 100
    ]
    assert wide == []


def _write_anew() -> None:
    import os
    import subprocess
    import sys
    import tempfile

    with tempfile.TemporaryDirectory() as folder:
        store = str(Path(folder) / "practice.sqlite")
        env = {**os.environ, "COLUMNS": "100", "NO_COLOR": "1"}
        run = [sys.executable, "-c", "from stockroom.cli.main import run; run()", "--store", store]
        subprocess.run([*run, "demo"], check=True, capture_output=True, env=env)
        for file in FILES:
            command = file.read_text(encoding="utf-8").partition("\n")[0]
            words = shlex.split(command.removeprefix(PROMPT))
            ran = subprocess.run([*run, *words], capture_output=True, text=True, env=env)
            file.write_text(f"{command}\n{ran.stdout.rstrip()}\n", encoding="utf-8")


if __name__ == "__main__":
    _write_anew()
