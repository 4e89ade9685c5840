"""Everything out again, and in again: the same rows, the same plan, the same files."""

from __future__ import annotations

import csv
import json
import shutil
import sqlite3
from contextlib import closing
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.service.verify import verify
from stockroom.store.content import PAGE, contents, handed_on, pages
from stockroom.store.described import KINDS, kinds_of, meaning, tables_in_order
from stockroom.store.described_columns import ANYWHERE, IN_TABLE
from stockroom.store.manifest import _digest
from stockroom.store.reading import reading

if TYPE_CHECKING:
    from conftest import Stockroom

pytestmark = pytest.mark.file

NASTY = (
    'a "quoted", cell',
    "two\nlines",
    "a lone \r return",
    "=1+1",
    "-2+3",
    "@SUM(A1)",
    "naïve ½ µg — 試薬 🧪",
    " space before, and after ",
    "tab\there;semicolon",
    "'",
    "NULL",
    "\ufeffmark",
    "nul\x00inside",
)


@pytest.fixture(scope="module")
def out(practice: Path, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The practice store handed out, only to be read."""
    from datetime import date

    from stockroom.cli.safe import _words
    from stockroom.service.hand_out import hand_out

    folder = tmp_path_factory.mktemp("hand-out") / "out"
    hand_out(practice, folder, as_at=date(2027, 1, 4), words=_words)
    return folder


@pytest.fixture
def mine(out: Path, tmp_path: Path) -> Path:
    """A copy of it for one test to spoil."""
    return Path(shutil.copytree(out, tmp_path / "mine"))


def files_of(folder: Path) -> dict[str, bytes]:
    found = (path for path in folder.rglob("*") if path.is_file())
    return {str(path.relative_to(folder)): path.read_bytes() for path in found}


def rows(path: Path, question: str) -> list[tuple[object, ...]]:
    with closing(sqlite3.connect(path)) as held:
        return held.execute(question).fetchall()


def busy_house(stockroom: Stockroom, own: Path) -> None:
    """Some of everything in the store: a slip put right, an order, a kept plan, odd texts."""
    for line in (
        ["draw", "S05", "200 cm3"],
        ["put-right", "179", "--why", "meant 20"],
        ["found", "B01", "90.5 vol"],
        ["order", "silver nitrate", "1", "25 g", "--price", "46.00", "--expected", "2027-01-18"],
        ["shift", "K06", "--groups", "13"],
        ["change", "departments", "CH", "left_gbp=50", "--why", "order of May"],
        ["plan", "--keep"],
        *(["look", "S03", "--good", "--note", note] for note in NASTY[:3]),
    ):
        result = stockroom(*line, "--by", "T1", store=own)
        assert result.code == 0, result
    with closing(sqlite3.connect(own)) as held, held:
        for number, text in enumerate(NASTY):
            held.execute(
                "INSERT INTO substance (id, substance, molar_mass, note, formula, cas,"
                " storage_group, peroxide_former, source) VALUES (?, ?, ?, ?, '', '', '', '', '')",
                (9000 + number, f"{number} {text}", 0.1 + number / 3, text),
            )


@pytest.mark.file
def test_what_was_handed_out_builds_the_same_store(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    busy_house(stockroom, own)
    again = tmp_path / "again.sqlite"
    assert stockroom("hand-out", "out", store=own).code == 0
    made = stockroom("new", "--from", "out", store=again)
    assert (made.code, made.out[:8]) == (0, "PRACTICE")
    assert stockroom("hand-out", "out2", store=again).code == 0
    assert files_of(tmp_path / "out") == files_of(tmp_path / "out2")
    # also what is not handed out but follows: guards, layout, kept balances
    for question in ("SELECT * FROM sqlite_master ORDER BY name", "SELECT * FROM kept_balance"):
        assert rows(own, question) == rows(again, question)
    for table in handed_on():
        assert rows(own, f"SELECT * FROM {table} ORDER BY 1") == rows(
            again, f"SELECT * FROM {table} ORDER BY 1"
        )
    assert verify(again).faults == ()
    for words in ("plan --json", "past", "why K11", "diary S05"):
        assert stockroom(*words.split(), store=own) == stockroom(*words.split(), store=again)


@pytest.mark.file
def test_the_store_made_again_is_guarded_and_goes_on_counting(
    stockroom: Stockroom, out: Path, tmp_path: Path
) -> None:
    again = tmp_path / "again.sqlite"
    stockroom("new", "--from", str(out), store=again)
    with closing(sqlite3.connect(again)) as held:
        with pytest.raises(sqlite3.IntegrityError, match="never altered"):
            held.execute("UPDATE entry SET change = 0")
        with pytest.raises(sqlite3.IntegrityError, match="NOTENOUGH"):
            held.execute(
                "INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by,"
                " change, strength_text, reason, note, booking) SELECT id, 'drawn', '2027-01-04',"
                " '2027-01-04', '', 'T1', -999999999999, '', '', '', '' FROM bottle LIMIT 1"
            )
    assert "Entry 179" in stockroom("draw", "S05", "1 cm3", "--by", "T1", store=again).out


def test_a_long_ledger_is_read_a_page_at_a_time(own: Path, tmp_path: Path) -> None:
    with closing(sqlite3.connect(own)) as held, held:
        held.executemany(
            "INSERT INTO reading (place_id, at, centi) VALUES (1, ?, 2000)",
            ((f"{number:08}",) for number in range(2 * PAGE + 1)),
        )
    with reading(own) as reader:
        found = list(pages(reader, "reading", handed_on()["reading"]))
        assert [page.rows for page in found] == [0, PAGE, PAGE, 1]
        text = b"".join(page.text for page in found).decode()
        assert [row["at"] for row in csv.DictReader(text.splitlines())] == [
            f"{number:08}" for number in range(2 * PAGE + 1)
        ]
        assert contents(reader, handed_on())["reading"].rows == 2 * PAGE + 1


def test_no_column_is_both_blank_and_unknown() -> None:
    """Which is what lets an empty cell mean one thing in each column."""
    both = [
        f"{table.name}.{column.name}"
        for table in tables_in_order()
        for column in table.columns
        if kinds_of(table)[column.name] == "text" and column.nullable
    ]
    assert both == []


def test_the_folder_says_what_each_file_column_and_unit_is(out: Path) -> None:
    told = (out / "README.txt").read_text(encoding="utf-8")
    for table in tables_in_order():
        assert f"tables/{table.name}.csv, " in told
        part = told.split(f"tables/{table.name}.csv, ")[1].split("tables/")[0]
        words = " ".join(part.split())
        for name, kind in kinds_of(table).items():
            assert f" {name} {kind} {' '.join(meaning(table, name).split())}" in words
    assert set(KINDS.values()) == {"text", "whole", "number", "day", "flag"}
    assert max(map(len, told.splitlines())) <= 100


# figures that are in no unit: they count or multiply
_BARE = "entries version number groups alternative lasts_count decay_order packs factor m_factor"
_UNITS: tuple[str, ...] = (
    "µg",
    "pence",
    "minutes",
    "hours",
    "days",
    "thousandths",
    "g/mol",
    "g/cm3",
    "per cent",
)
_UNITS += ("degree", "fraction", "own unit", "in unit", "kJ/mol", "mg/kg", "what it holds, in µL")
_UNITS += ("in µL", "times faster")


def test_every_column_has_its_meaning_and_every_figure_its_unit() -> None:
    there = {(table.name, name) for table in tables_in_order() for name in kinds_of(table)}
    told = {(table, name) for table, names in IN_TABLE.items() for name in names}
    assert told <= there, told - there
    assert set(ANYWHERE) <= {name for _, name in there}
    for table in tables_in_order():
        for name, kind in kinds_of(table).items():
            text = meaning(table, name)
            pointer = name == "id" or table.columns[name].foreign_keys
            assert not table.columns[name].foreign_keys or " of a row of " in text, (table, name)
            if kind in ("whole", "number") and not pointer and name not in _BARE.split():
                assert any(unit in text for unit in _UNITS), (table.name, name, text)


def test_the_readable_copy_tells_the_house(out: Path) -> None:
    told = (out / "house.txt").read_text(encoding="utf-8")
    lines = told.splitlines()
    assert lines[:2] == ["PRACTICE", "Quillmere College"]
    for part in (
        "A2: B06 sodium thiosulfate pentahydrate; 640 g left of 1 000 g; received 2025-09-01",
        "R01 version 1: Iodine clock",
        "K11  2 February 2027 09:15, R03 version 1 Permanganate titration",
        "drawn (put right by ",
        "B28 lithium chloride",
        "not found",
        "life: 28 days from made",
    ):
        assert part in told


def test_a_note_of_two_lines_stays_inside_its_own(stockroom: Stockroom, own: Path) -> None:
    note = "first\nBOOKINGS\n  K99 a booking that is none"
    stockroom("look", "S03", "--good", "--note", note, "--by", "T1", store=own)
    stockroom("hand-out", "out", store=own)
    told = Path("out/house.txt").read_text(encoding="utf-8").splitlines()
    assert told.count("BOOKINGS") == 1
    assert any("first / BOOKINGS / K99 a booking" in line for line in told)


def test_a_folder_with_something_in_it_is_left_alone(
    stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    (tmp_path / "full").mkdir()
    (tmp_path / "full" / "letter.txt").write_text("mine", encoding="utf-8")
    refused = stockroom("hand-out", "full", store=practice)
    assert (refused.code, refused.out) == (1, "")
    assert "There is something in full already" in refused.err
    (tmp_path / "file").write_text("mine", encoding="utf-8")
    assert "file is a file" in stockroom("hand-out", "file", store=practice).err
    (tmp_path / "empty").mkdir()
    assert stockroom("hand-out", "empty", store=practice).code == 0
    assert sorted(path.name for path in tmp_path.iterdir()) == ["empty", "file", "full"]


def test_a_hand_out_that_fails_leaves_nothing(
    stockroom: Stockroom, practice: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def full(*_: object) -> str:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("stockroom.store.handing_out.folder_readme", full)
    refused = stockroom("hand-out", "out", store=practice)
    assert refused.code == 1
    assert refused.err.startswith("Not handed out: ")
    assert "out cannot be written (No space left on device)" in refused.err
    assert list(tmp_path.iterdir()) == []


def test_half_a_folder_is_never_taken_for_one(
    stockroom: Stockroom, practice: Path, tmp_path: Path
) -> None:
    """What one who was cut off left behind is in nobody's way, and no folder to read back."""
    (tmp_path / "out.part-1" / "tables").mkdir(parents=True)
    (tmp_path / "out.part-1" / "tables" / "entry.csv").write_text("id\r\n", encoding="utf-8")
    assert stockroom("hand-out", "out", store=practice).code == 0
    refused = stockroom("new", "--from", "out.part-1", store=tmp_path / "x.sqlite")
    assert (refused.code, "manifest.json is missing" in refused.err) == (1, True)


@pytest.mark.file
def test_a_store_that_may_only_be_read_is_handed_out(
    stockroom: Stockroom, own: Path, out: Path, tmp_path: Path
) -> None:
    own.chmod(0o444)
    assert stockroom("hand-out", "out", store=own).code == 0
    assert files_of(tmp_path / "out") == files_of(out)


def _altered(folder: Path) -> None:
    entries = folder / "tables" / "entry.csv"
    entries.write_bytes(entries.read_bytes().replace(b"T1", b"T2", 1))


def _cut(folder: Path) -> None:
    entries = folder / "tables" / "entry.csv"
    entries.write_bytes(entries.read_bytes()[:-200])


def _renamed_column(folder: Path) -> None:
    path = folder / "manifest.json"
    path.write_text(path.read_text(encoding="utf-8").replace('"puts_right"', '"puts_left"'))


SPOILED = {
    "altered": (_altered, "tables/entry.csv is not as it was handed out (178 rows)"),
    "cut short": (_cut, "tables/entry.csv is not as it was handed out"),
    "missing": (lambda folder: (folder / "tables/bottle.csv").unlink(), "bottle.csv is missing"),
    "added": (
        lambda folder: (folder / "tables/extra.csv").write_text("id\n"),
        "tables/extra.csv was not handed out",
    ),
    "no manifest": (lambda folder: (folder / "manifest.json").unlink(), "manifest.json is missing"),
    "half a manifest": (
        lambda folder: (folder / "manifest.json").write_text("{"),
        "manifest.json is damaged",
    ),
    "altered manifest": (_renamed_column, "its digest does not agree"),
}


@pytest.mark.parametrize("what", SPOILED)
def test_a_damaged_folder_is_refused_and_leaves_no_store(
    what: str, stockroom: Stockroom, mine: Path, tmp_path: Path
) -> None:
    spoil, said = SPOILED[what]
    spoil(mine)
    refused = stockroom("new", "--from", str(mine), store=tmp_path / "again.sqlite")
    assert (refused.code, refused.out) == (1, "")
    assert said in refused.err
    assert [path.name for path in tmp_path.iterdir()] == ["mine"]


def _rewritten(folder: Path, **changed: object) -> None:
    """A manifest that says something else, with a digest that agrees."""
    path = folder / "manifest.json"
    told = json.loads(path.read_text(encoding="utf-8")) | changed
    bare = {key: told[key] for key in told if key not in ("what", "form", "digest")}
    path.write_text(json.dumps(told | {"digest": _digest(bare)}), encoding="utf-8")


@pytest.mark.file
def test_an_older_folder_comes_up_by_the_migrations(
    stockroom: Stockroom, mine: Path, practice: Path, tmp_path: Path
) -> None:
    """Layout 0007 had no kept balances, which are not handed out, and no printed copies."""
    told = json.loads((mine / "manifest.json").read_text(encoding="utf-8"))["tables"]
    (mine / "tables" / "printed_copy.csv").unlink()
    kept = [each for each in told if each["table"] != "printed_copy"]
    _rewritten(mine, layout="0007", tables=kept)
    again = tmp_path / "again.sqlite"
    assert stockroom("new", "--from", str(mine), store=again).code == 0
    question = "SELECT * FROM kept_balance ORDER BY bottle_id"
    assert rows(again, question) == rows(practice, question)
    assert stockroom("plan", "--json", store=again) == stockroom("plan", "--json", store=practice)


@pytest.mark.parametrize(
    ("changed", "said"),
    [({"layout": "9999"}, "newer stockroom (revision 9999"), ({"form": 2}, "of form 2")],
)
def test_a_newer_folder_is_refused(
    changed: dict[str, object], said: str, stockroom: Stockroom, mine: Path, tmp_path: Path
) -> None:
    _rewritten(mine, **changed)
    refused = stockroom("new", "--from", str(mine), store=tmp_path / "again.sqlite")
    assert (refused.code, said in refused.err) == (1, True)
    assert not (tmp_path / "again.sqlite").exists()


def test_rows_that_break_a_guard_are_refused(
    stockroom: Stockroom, mine: Path, tmp_path: Path
) -> None:
    """The digests agree, and still a ledger that draws more than there is makes no store."""
    import hashlib

    entries = mine / "tables" / "entry.csv"
    lines = entries.read_bytes().split(b"\r\n")
    lines[1:3] = [lines[2], lines[1]]
    first = lines[1].split(b",")
    first[7] = b"-999999999999"
    lines[1] = b",".join(first)
    entries.write_bytes(b"\r\n".join(lines))
    told = json.loads((mine / "manifest.json").read_text(encoding="utf-8"))
    for table in told["tables"]:
        if table["table"] == "entry":
            table["content"]["digest"] = hashlib.sha256(entries.read_bytes()).hexdigest()
    _rewritten(mine, tables=told["tables"])
    refused = stockroom("new", "--from", str(mine), store=tmp_path / "again.sqlite")
    assert (
        refused.code,
        "tables/entry.csv, row with id 2, cannot be read back: NOTENOUGH" in refused.err,
    ) == (1, True)
    assert [path.name for path in tmp_path.iterdir()] == ["mine"]


@pytest.mark.file
def test_a_store_is_never_made_over_another(stockroom: Stockroom, out: Path, own: Path) -> None:
    before = own.read_bytes()
    refused = stockroom("new", "--from", str(out), store=own)
    assert (refused.code, "already something" in refused.err) == (1, True)
    assert own.read_bytes() == before
