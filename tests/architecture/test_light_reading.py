"""Commands that only read start light: the heavy libraries stay on the shelf.

They run one after another in an interpreter of their own, and what is loaded is looked
at after each. pydantic is not on the list: whether the command line needs it is typer's
affair, not ours.
"""

from __future__ import annotations

import json
import os
import subprocess
import sys
from datetime import date
from pathlib import Path

import pytest

HEAVY = (
    "sqlmodel sqlalchemy alembic pint scipy uncertainties rapidfuzz fastapi matplotlib numpy"
).split()
TELL = "loaded on leaving: "

# {act} is what is being tried; the rest reports, however it ends
HARNESS = """
import atexit, sys

def tell():
    heavy = [name for name in {heavy!r} if name in sys.modules]
    print({tell!r} + " ".join(heavy), file=sys.stderr)

atexit.register(tell)
{act}
"""
RUN = "from stockroom.cli.main import run\nraise SystemExit(run())"
EACH = """
import contextlib, io, json
from stockroom.cli.main import run

store, told = sys.argv[1], {}
heavy, rows = json.loads(sys.argv[2])
for words in rows:
    code, out = 0, io.StringIO()
    with contextlib.redirect_stdout(out):
        try:
            run(["--store", store, *words])
        except SystemExit as leaving:
            code = leaving.code or 0
    loaded = [name for name in heavy if name in sys.modules]
    told[" ".join(words)] = [code, bool(out.getvalue().strip()), loaded]
print(json.dumps(told))
"""

READING = [
    ["plan"],
    ["plan", "--json"],
    ["fresh"],
    ["past"],
    ["past", "--on", "2027-02-10"],
    ["usage"],
    ["buying"],
    ["on-order"],
    ["ready", "K01"],
    ["why", "K01"],
    ["diary", "B01"],
    ["shelf"],
    ["shelf", "hypo"],
    ["walk"],
    ["fades", "B01"],
    ["hazards", "S06"],
    ["logger", "A1"],
    ["verify", "--quick"],
    ["plan", "--cautious"],
    ["rule", "starch 0.5 % w/v"],
    ["what-if", "--groups", "K08=11", "--shift", "K13=2027-02-09", "--without", "S01"],
    ["what-if", "--cancel", "K05", "--book", "R01,2027-02-11,12"],
    ["strength", "100 vol", "--of", "hydrogen peroxide", "--to", "mol/dm3"],
    ["weigh", "2 L", "0.200 mol/dm3", "--of", "sodium thiosulfate pentahydrate"],
    ["dilute", "500 cm3", "0.100 mol/dm3", "--from", "B01"],
    ["titrate", "thiosulfate on iodate", "25.30", "--standard", "25 cm3 of 0.0167 mol/dm3"],
    ["week", "2027-01-25"],
    ["day", "2027-03-23"],
    ["slip", "K11"],
    ["phone", "K01"],
    ["card", "M14"],
    ["calendar"],
    ["morning"],
    ["report"],
    ["handover"],
    ["label", "S02", "S07"],
    ["picture", "fade", "B01"],
    ["picture", "load"],
    ["picture", "level", "potassium iodide"],
    ["--help"],
    ["plan", "--help"],
    ["--version"],
]


def left_loaded(act: str, *argv: str, folder: Path) -> tuple[list[str], str]:
    """The heavy libraries loaded after `act`, and what it printed.

    Raises AssertionError where the run broke down or never told: that proves nothing.
    """
    code = HARNESS.format(heavy=HEAVY, tell=TELL, act=act)
    ran = subprocess.run(
        [sys.executable, "-c", code, *argv],
        capture_output=True,
        text=True,
        encoding="utf-8",
        cwd=folder,
        env={**os.environ, "NO_COLOR": "1", "COLUMNS": "100", "PYTHONIOENCODING": "utf-8"},
    )
    assert "Traceback" not in ran.stderr, ran.stderr
    # `ready` and `morning` end with 1 when there is something to do
    assert ran.returncode in ((0, 1) if {"ready", "morning"} & {*argv} else (0,)), ran.stderr
    *_, told = [line for line in ran.stderr.splitlines() if line.startswith(TELL)]
    return told.removeprefix(TELL).split(), ran.stdout


def after_each(rows: list[list[str]], store: Path, folder: Path) -> dict[str, list[object]]:
    """Of each command, run one after another: its exit code, whether it answered, what is loaded.

    One interpreter for all of them: the first that loads something is the one that is told.
    """
    _, out = left_loaded(EACH, str(store), json.dumps([HEAVY, rows]), folder=folder)
    told: dict[str, list[object]] = json.loads(out)
    return told


def test_no_reading_command_loads_anything_heavy(practice: Path, tmp_path: Path) -> None:
    told = after_each(READING, practice, tmp_path)
    codes = {name: code for name, (code, _, _) in told.items() if code}
    # these two end with 1 when there is something to do
    assert {name.partition(" ")[0] for name in codes} <= {"ready", "morning"}
    assert set(codes.values()) <= {1}
    assert [name for name, (_, answered, _) in told.items() if not answered] == []
    assert {name: loaded for name, (_, _, loaded) in told.items() if loaded} == {}
    assert len(told) == len(READING)


def test_the_command_that_loads_something_is_the_one_told(own: Path, tmp_path: Path) -> None:
    rows = [["past"], ["week", "--print", "w.pdf"]]
    told = after_each(rows, own, tmp_path)
    assert told["past"] == [0, True, []]
    assert "sqlalchemy" in str(told["week --print w.pdf"])


def test_what_changed_is_told_with_nothing_heavy(own: Path, tmp_path: Path) -> None:
    from stockroom.service.printed_plans import keep

    keep(own, as_at=date(2027, 1, 4), by="T1")
    loaded, out = left_loaded(RUN, "--store", str(own), "changed", folder=tmp_path)
    assert (loaded, out[:7]) == ([], "nothing")


@pytest.mark.parametrize("library", ["pint", "sqlalchemy", "numpy", "uncertainties"])
def test_a_planted_heavy_import_is_told(library: str, tmp_path: Path) -> None:
    loaded, _ = left_loaded(f"import {library}", folder=tmp_path)
    assert library in loaded


def test_the_planner_leaves_the_search_through_dilutions_on_the_shelf() -> None:
    act = (
        "import sys, stockroom.planning.plan\nsys.exit('stockroom.chemistry.steps' in sys.modules)"
    )
    assert subprocess.run([sys.executable, "-c", act], check=False).returncode == 0


def test_a_heavy_import_just_before_leaving_is_told(tmp_path: Path) -> None:
    loaded, _ = left_loaded("import sqlmodel\nraise SystemExit(0)", folder=tmp_path)
    assert {"sqlmodel", "sqlalchemy"} <= set(loaded)


def test_a_run_that_breaks_down_is_no_proof(tmp_path: Path) -> None:
    with pytest.raises(AssertionError, match="ZeroDivisionError"):
        left_loaded("1 / 0", folder=tmp_path)


def test_a_command_that_fails_is_no_proof(tmp_path: Path) -> None:
    with pytest.raises(AssertionError, match="no such bottle"):
        left_loaded("raise SystemExit('no such bottle')", folder=tmp_path)
