"""The house keeps to its plan: who may import whom, what pure rooms may touch, what lies on top.

Every rule is tried twice: on the house as it stands, and on a planted offender,
since a checker that cannot fail proves nothing.
"""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest
from room_rules import (
    HOUSE,
    MAY_IMPORT,
    clock_readers,
    impure,
    load_cycles,
    strangers,
    unsigned_doors,
    wrong_libraries,
    wrong_rooms,
)
from source_tree import Module, read_tree

REPOSITORY = Path(__file__).parents[2]
Check = Callable[[dict[str, Module]], list[str]]
CHECKS: list[Check] = [
    wrong_rooms,
    wrong_libraries,
    impure,
    clock_readers,
    load_cycles,
    unsigned_doors,
]


@pytest.fixture(scope="module")
def house() -> dict[str, Module]:
    return read_tree(REPOSITORY / HOUSE)


@pytest.fixture
def planted(tmp_path: Path) -> Callable[..., dict[str, Module]]:
    """Builds a small house of the files given, each with its text."""

    def build(files: dict[str, str]) -> dict[str, Module]:
        for name, text in files.items():
            path = tmp_path / HOUSE / name
            path.parent.mkdir(parents=True, exist_ok=True)
            path.write_text(text, encoding="utf-8")
        return read_tree(tmp_path / HOUSE)

    return build


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: check.__name__)
def test_the_house_keeps_its_rules(check: Check, house: dict[str, Module]) -> None:
    assert check(house) == []


def test_the_reader_finds_the_house(house: dict[str, Module]) -> None:
    # an empty tree would pass every check above
    assert {"stockroom", "stockroom.errors", "stockroom.clock"} <= set(house)
    assert any(each.name == "datetime.date" for each in house["stockroom.clock"].imports)


def test_no_two_rooms_may_import_each_other() -> None:
    pairs = [(room, other) for room, others in MAY_IMPORT.items() for other in others]
    assert [pair for pair in pairs if pair[::-1] in pairs] == []


@pytest.mark.parametrize(
    ("file", "text"),
    [
        ("measure/bad.py", "from stockroom.chemistry import formula"),
        ("chemistry/bad.py", "import stockroom.keeping.rules"),
        ("keeping/bad.py", "from ..planning import plan"),
        ("safety/bad.py", "from .. import keeping"),
        ("planning/bad.py", "def later():\n    from stockroom.store.tables import Bottle"),
        ("planning/bad.py", "if TYPE_CHECKING:\n    from stockroom.store import ledger"),
        ("planning/bad.py", "from stockroom.clock import today"),
        ("reports/bad.py", "from stockroom import settings"),
        ("reports/bad.py", "from stockroom import __version__"),
        ("store/bad.py", "from stockroom.service.plan import plan_term"),
        ("store/bad.py", "from stockroom.planning.plan import explode"),
        ("service/bad.py", "from stockroom.reports import tables"),
        ("web/bad.py", "from stockroom.store.tables import Bottle"),
        ("cli/bad.py", "from stockroom.planning.facts import Facts"),
        ("cli/plan.py", "from stockroom.web.app import app"),
        ("cli/bad.py", "import importlib\nimportlib.import_module('stockroom.store.tables')"),
        ("errors.py", "from stockroom.measure import amounts"),
        ("attic/bad.py", "x = 1"),
    ],
)
def test_a_planted_import_across_rooms_is_caught(
    planted: Callable[..., dict[str, Module]], file: str, text: str
) -> None:
    found = wrong_rooms(planted({file: text}))
    assert len(found) == 1
    assert found[0].startswith("stockroom." + file.removesuffix(".py").replace("/", "."))


@pytest.mark.parametrize(
    ("file", "text"),
    [
        ("measure/good.py", "from stockroom.errors import BadAmount"),
        ("planning/good.py", "from ..keeping.rules import Rule\nfrom . import facts"),
        ("store/good.py", "from stockroom.planning.facts import Facts"),
        ("service/good.py", "from stockroom import clock\nfrom stockroom.store import ledger"),
        ("cli/serve.py", "from stockroom.web.app import app"),
        ("cli/good.py", "from stockroom import __version__\nfrom stockroom.reports import plan"),
    ],
)
def test_an_import_the_table_allows_passes(
    planted: Callable[..., dict[str, Module]], file: str, text: str
) -> None:
    assert wrong_rooms(planted({file: text})) == []


@pytest.mark.parametrize(
    ("file", "text"),
    [
        ("chemistry/bad.py", "import pint"),
        ("planning/bad.py", "from dateutil.relativedelta import relativedelta"),
        ("service/bad.py", "def save():\n    from sqlmodel import Session"),
        ("reports/bad.py", "import sqlalchemy.orm as orm"),
        ("cli/bad.py", "import sqlite3"),
        ("web/bad.py", "from alembic import command"),
        ("service/bad.py", "import typer"),
        ("cli/bad.py", "from fastapi import FastAPI"),
        ("keeping/bad.py", "from molmass import Formula"),
        ("planning/bad.py", "from rapidfuzz import process"),
        ("cli/bad.py", "__import__('pint')"),
        ("service/bad.py", "from importlib import import_module as load\nload('pi' + 'nt')"),
    ],
)
def test_a_planted_library_is_caught(
    planted: Callable[..., dict[str, Module]], file: str, text: str
) -> None:
    assert len(wrong_libraries(planted({file: text}))) == 1


def test_a_library_in_its_own_room_passes(planted: Callable[..., dict[str, Module]]) -> None:
    files = {"measure/units.py": "import pint", "store/tables.py": "import sqlmodel, sqlite3"}
    assert wrong_libraries(planted(files)) == []


def test_only_the_shipped_files_may_be_opened(planted: Callable[..., dict[str, Module]]) -> None:
    opens = "from pathlib import Path\nfrom importlib.util import find_spec"
    assert impure(planted({"reports/shipped.py": opens})) == []
    assert len(impure(planted({"reports/unshipped.py": opens}))) == 2
    more = opens + "\nimport subprocess"
    assert len(impure(planted({"reports/shipped.py": more, "reports/unshipped.py": "x = 1"}))) == 1


@pytest.mark.parametrize(
    "text",
    [
        "import os",
        "from pathlib import Path",
        "from random import random",
        "import time",
        "def f():\n    import sqlite3",
        "import socket as s",
        "import subprocess",
        "print('made')",
        "rows = [line for line in open('bottles.csv')]",
        "import io\ntable = io.open('bottles.csv')",
        "answer = input()",
    ],
)
def test_a_planted_impurity_is_caught(planted: Callable[..., dict[str, Module]], text: str) -> None:
    assert len(impure(planted({"planning/bad.py": text}))) == 1
    assert impure(planted({"planning/bad.py": "x = 1", "service/fine.py": text})) == []


@pytest.mark.parametrize(
    "text",
    [
        "from datetime import date\nstart = date.today()",
        "import datetime\nstart = datetime.date.today()",
        "import datetime as dt\nstart = dt.datetime.now()",
        "from datetime import datetime as stamp\nstart = stamp.utcnow()",
        "from datetime import datetime\nmade = field(default_factory=datetime.now)",
        "from time import time as tick\nstart = tick()",
    ],
)
@pytest.mark.parametrize("room", ["planning", "service"])
def test_a_planted_look_at_the_clock_is_caught(
    planted: Callable[..., dict[str, Module]], room: str, text: str
) -> None:
    assert len(clock_readers(planted({f"{room}/bad.py": text}))) == 1


def test_only_the_clock_may_read_the_clock(planted: Callable[..., dict[str, Module]]) -> None:
    text = "from datetime import date\ndef today():\n    return date.today()"
    assert clock_readers(planted({"clock.py": text})) == []


def test_a_planted_circle_is_caught(planted: Callable[..., dict[str, Module]]) -> None:
    files = {
        "planning/explode.py": "from stockroom.planning import make",
        "planning/make.py": "from .buy import order",
        "planning/buy.py": "import stockroom.planning.explode",
    }
    assert "stockroom.planning.buy" in load_cycles(planted(files))[0]


def test_an_import_made_later_closes_no_circle(planted: Callable[..., dict[str, Module]]) -> None:
    files = {
        "planning/make.py": "from stockroom.planning.buy import order",
        "planning/buy.py": "def why():\n    from stockroom.planning.make import card",
    }
    assert load_cycles(planted(files)) == []


@pytest.mark.parametrize(
    "files",
    [
        {"measure/amounts.py": "x = 1"},
        {"measure/__init__.py": "from __future__ import annotations", "measure/amounts.py": ""},
        {"measure/__init__.py": '"""  """'},
    ],
)
def test_a_planted_door_without_words_is_caught(
    planted: Callable[..., dict[str, Module]], files: dict[str, str]
) -> None:
    found = unsigned_doors(planted({"__init__.py": '"""The house."""', **files}))
    assert found == ["measure/__init__.py: no words on the door"]


def test_the_top_of_the_repository_holds_only_what_belongs() -> None:
    assert strangers(REPOSITORY) == []


def test_a_planted_stranger_at_the_top_is_caught(tmp_path: Path) -> None:
    for name in ("README.md", "stockroom", ".ci", "notes.txt", "scratch"):
        (tmp_path / name).mkdir()
    assert strangers(tmp_path) == ["notes.txt", "scratch"]
