"""A backup is proved or there is none; a restore loses nothing; and the age is told."""

from __future__ import annotations

import gzip
import shutil
import sqlite3
import subprocess
import sys
from collections.abc import Callable
from contextlib import closing
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import hardship
import pytest

from stockroom.errors import StoreTrouble
from stockroom.service.verify import verify
from stockroom.store import backup, putting_back
from stockroom.store.content import columns_there, contents
from stockroom.store.reading import as_it_stands, reading
from stockroom.store.trouble import REPLACED, is_older

if TYPE_CHECKING:
    from conftest import Stockroom

pytestmark = pytest.mark.file

LAYOUTS = Path(__file__).parents[1] / "store" / "layouts"


@pytest.fixture
def house(own: Path) -> Path:
    """The college's rows as a house of one's own."""
    with closing(sqlite3.connect(own)) as held, held:
        held.execute("DELETE FROM house WHERE setting IN ('practice', 'practice_day')")
    return own


def rows(path: Path, question: str) -> list[tuple[object, ...]]:
    with closing(sqlite3.connect(path)) as held:
        return held.execute(question).fetchall()


def entries(path: Path) -> list[tuple[object, ...]]:
    return rows(path, "SELECT * FROM entry ORDER BY id")


def names(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


def draw(stockroom: Stockroom, store: Path, day: str = "2027-01-05", by: str = "T1") -> None:
    assert stockroom("draw", "S05", "1 cm3", "--by", by, "--as-at", day, store=store).code == 0


def backed_up(stockroom: Stockroom, store: Path, day: str = "2027-01-04") -> Path:
    made = stockroom("backup", "--by", "T1", "--as-at", day, store=store)
    assert made.code == 0, made
    return store.parent / "backups" / f"{store.stem}-{day}.sqlite"


def test_a_backup_is_a_proved_copy_and_is_noted(stockroom: Stockroom, own: Path) -> None:
    before = entries(own)
    made = stockroom("backup", "--by", "T1", store=own)
    copy = own.parent / "backups" / "own-2027-01-04.sqlite"
    assert f"Backed up to {copy}." in made.out
    assert "compared with the store, table by table: nothing differs." in made.out
    assert "178 entries; " in made.out
    assert entries(copy) == before
    [(place, count, digest, on, by)] = rows(
        own, "SELECT place, entries, digest, entered_on, by FROM backup_made"
    )
    assert (place, count, on, by) == (str(copy), 178, "2027-01-04", "T1")
    with as_it_stands(copy) as (reader, layout):
        found = contents(reader, columns_there(reader))
        assert backup.Proof(layout, found).digest == digest
    assert names(copy.parent) == [copy.name]
    assert stockroom("why", "K11", store=copy).out == stockroom("why", "K11", store=own).out


def test_a_copy_is_never_written_over(stockroom: Stockroom, own: Path) -> None:
    first = backed_up(stockroom, own).read_bytes()
    (own.parent / "backups" / "own-2027-01-04-2.sqlite").write_text("mine", encoding="utf-8")
    stockroom("backup", store=own)
    folder = own.parent / "backups"
    assert names(folder) == [f"own-2027-01-04{n}.sqlite" for n in ("-2", "-3", "")]
    assert (folder / "own-2027-01-04.sqlite").read_bytes() == first
    assert (folder / "own-2027-01-04-2.sqlite").read_text(encoding="utf-8") == "mine"
    assert rows(own, "SELECT by FROM backup_made") == [("T1",), ("backup",)]


WRITER = """
import sqlite3, sys
held = sqlite3.connect(sys.argv[1], timeout=30, isolation_level=None)
print("writing", flush=True)
for number in range(100_000):
    held.execute("INSERT INTO entry (bottle_id, kind, happened_on, entered_on, entered_at, by,"
                 " change, strength_text, reason, note, booking)"
                 " VALUES (1, 'looked', '2027-01-04', '2027-01-04', '', 'T2', 0, '', '', '', '')")
"""


def test_a_backup_is_of_one_moment_while_another_writes(stockroom: Stockroom, own: Path) -> None:
    with subprocess.Popen(
        [sys.executable, "-c", WRITER, str(own)], stdout=subprocess.PIPE, text=True
    ) as writer:
        assert writer.stdout is not None
        writer.stdout.readline()
        made = [stockroom("backup", store=own).code for _ in range(2)]
        writing_still = writer.poll() is None
        writer.kill()
    assert (made, writing_still) == ([0, 0], True)
    first, second = sorted((own.parent / "backups").iterdir(), key=lambda copy: len(entries(copy)))
    all_of_them = entries(own)
    assert 178 <= len(entries(first)) < len(entries(second)) < len(all_of_them)
    for copy in (first, second):
        assert entries(copy) == all_of_them[: len(entries(copy))]


SPOILED = {
    "a row less": ("DELETE FROM term", "differs in term"),
    "another cell": ("UPDATE line SET density = 1.0000001 WHERE id = 1", "differs in line"),
    "another layout": ("UPDATE alembic_version SET version_num = '0001'", "another layout"),
    "a column more": ("ALTER TABLE term ADD COLUMN more TEXT", "another layout"),
    "a row that points nowhere": ("INSERT INTO parent VALUES (999, 1, 999999)", "not there"),
}


@pytest.mark.parametrize("what", SPOILED)
def test_a_copy_that_differs_is_found_out(what: str, own: Path, tmp_path: Path) -> None:
    statement, said = SPOILED[what]
    copy = tmp_path / "copy.sqlite"
    proof = backup.copy_proved(own, copy)
    with as_it_stands(own) as (reader, _):
        columns = columns_there(reader)
    backup._prove(copy, proof, columns)
    with closing(sqlite3.connect(copy)) as held, held:
        held.execute(statement)
    with pytest.raises(StoreTrouble, match=said):
        backup._prove(copy, proof, columns)


def spoil_page(path: Path) -> None:
    """Write over the middle of a page of the ledger's index, as a bad disc would."""
    [(page,)] = rows(path, "SELECT rootpage FROM sqlite_master WHERE name = 'ix_entry_bottle_id'")
    [(size,)] = rows(path, "PRAGMA page_size")
    assert isinstance(page, int)
    assert isinstance(size, int)
    with path.open("r+b") as file:
        file.seek((page - 1) * size + 100)
        file.write(b"\xff" * (size - 200))


def test_a_damaged_store_is_not_backed_up(stockroom: Stockroom, own: Path) -> None:
    good = backed_up(stockroom, own)
    spoil_page(own)
    refused = stockroom("backup", store=own)
    assert (refused.code, refused.out) == (1, "")
    assert refused.err.startswith("Not backed up: ")
    assert "damaged" in refused.err
    assert names(good.parent) == [good.name]


def test_a_full_disc_leaves_the_earlier_copies(stockroom: Stockroom, own: Path) -> None:
    """Really: no file may grow over 40 kB; where the machine allows, a disc of 300 kB too."""
    good = backed_up(stockroom, own)
    before = good.read_bytes()
    small = own.parent / "small"
    small.mkdir()
    tried = [(hardship.program("limited", good.parent), good.parent, "")]
    disc = hardship.on_a_small_disc(small, 300)
    if disc:
        tried.append(([*disc, *hardship.program("plain", small)], small, "is full"))
    for words, folder, said in tried:
        [told] = hardship.ran(words, [["--store", str(own), "backup", str(folder)]])
        assert told["code"] == 1
        assert told["said"].startswith("Not backed up: ")
        assert str(folder) in told["said"].splitlines()[0]
        assert str(own) not in told["said"]
        assert said in told["said"]
    assert names(good.parent) == [good.name]
    assert (good.read_bytes(), names(small)) == (before, [])
    assert len(rows(own, "SELECT * FROM backup_made")) == 1


def test_a_store_that_may_only_be_read_is_backed_up(own: Path, tmp_path: Path) -> None:
    (tmp_path / "to").mkdir()
    words = [["chmod", "444", str(own)], ["--store", str(own), "backup", str(tmp_path / "to")]]
    *_, told = hardship.ran(hardship.program("plain", tmp_path / "to"), words)
    assert told["code"] == 0
    assert "nothing differs" in told["said"]
    assert "The backup is good, but the store could not note it" in told["said"]
    assert names(tmp_path / "to") == ["own-2027-01-04.sqlite"]


def test_a_server_is_backed_up_by_its_own_means(stockroom: Stockroom, own: Path) -> None:
    there = "postgresql+psycopg://prep@nowhere/house"
    for words in (["backup"], ["restore", str(own)]):
        refused = stockroom(*words, "--as-at", "2027-01-04", "--store", there)
        assert (refused.code, "by a server" in refused.err) == (1, True)


def test_a_restore_keeps_the_store_and_tells_what_was_newer(
    stockroom: Stockroom, own: Path
) -> None:
    copy = backed_up(stockroom, own)
    before = entries(own)
    draw(stockroom, own, "2027-01-05", "T2")
    draw(stockroom, own, "2027-01-06")
    draw(stockroom, own, "2027-01-06")
    stockroom("shift", "K06", "--groups", "13", "--by", "T1", store=own)
    newer = entries(own)
    done = stockroom("restore", str(copy), "--as-at", "2027-01-07", store=own)
    kept = own.parent / "own-replaced-2027-01-07.sqlite"
    assert done.code == 0
    assert f"Restored {own} from {copy}: 178 entries." in done.out
    assert f"What stood there is kept as {kept}." in done.out
    assert "It has 3 entries that the backup has not, by T1, T2, the last entered" in done.out
    assert "6 January 2027" in done.out
    assert "Other tables that differ: booking, booking_change." in done.out
    assert (entries(own), entries(kept)) == (before, newer)
    assert (verify(own).faults, verify(kept).faults) == ((), ())
    assert rows(own, "PRAGMA journal_mode") == [("wal",)]
    assert names(own.parent) == sorted(["backups", kept.name, own.name])
    draw(stockroom, own)
    # and back again: the number goes behind the name, and nothing is lost
    back = stockroom("restore", str(kept), "--as-at", "2027-01-07", store=own)
    assert "It has 1 entry that the backup has not" in back.out
    assert "The backup has 3 entries that it has not; the two went different ways." in back.out
    assert entries(own) == newer


def test_a_store_that_is_gone_is_restored(stockroom: Stockroom, own: Path) -> None:
    copy = backed_up(stockroom, own)
    before = entries(own)
    own.unlink()
    # another store's journal would be read as that of the backup
    Path(f"{own}-wal").write_bytes(b"left over")
    assert stockroom("restore", str(copy), store=own).code == 0
    assert entries(own) == before


def _text(path: Path) -> None:
    path.write_text("a letter, and no store at all", encoding="utf-8")


def _other(path: Path) -> None:
    path.unlink()
    with closing(sqlite3.connect(path)) as held:
        held.execute("CREATE TABLE bird (name TEXT)")


def _newer(path: Path) -> None:
    with closing(sqlite3.connect(path)) as held, held:
        held.execute("UPDATE alembic_version SET version_num = '9999'")


def _short(path: Path) -> None:
    path.write_bytes(path.read_bytes()[:200_000])


REFUSED: dict[str, tuple[Callable[[Path], object], str]] = {
    "a text": (_text, "not a stockroom store"),
    "another program's": (_other, "not a stockroom store"),
    "a newer program's": (_newer, "newer stockroom (revision 9999"),
    "cut short": (_short, "damaged"),
    "a bad page": (spoil_page, "damaged"),
    "missing": (Path.unlink, "No backup at"),
}


@pytest.mark.parametrize("what", REFUSED)
def test_what_is_no_good_backup_is_refused(what: str, stockroom: Stockroom, own: Path) -> None:
    spoil, said = REFUSED[what]
    copy = Path(shutil.copy(own, own.parent / "copy.sqlite"))
    spoil(copy)
    before, there = own.read_bytes(), names(own.parent)
    refused = stockroom("restore", str(copy), store=own)
    assert (refused.code, refused.out) == (1, "")
    assert said in refused.err
    assert own.read_bytes() == before
    assert names(own.parent) == there


@pytest.mark.parametrize("spoil", [_text, _other])
def test_what_is_no_store_is_not_put_aside(
    spoil: Callable[[Path], None], stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    mine = tmp_path / "mine.txt"
    mine.touch()
    spoil(mine)
    before = mine.read_bytes()
    refused = stockroom("restore", str(own), store=mine)
    assert (refused.code, "It was left alone" in refused.err) == (1, True)
    assert mine.read_bytes() == before


def _overdrawn(path: Path) -> None:
    """A balance kept too high, by another program, and a draw that leans on it."""
    with closing(sqlite3.connect(path)) as held, held:
        held.execute(
            "UPDATE kept_balance SET held = held + 1000000"
            " WHERE bottle_id = (SELECT id FROM bottle WHERE number = 'S13')"
        )


def test_a_store_whose_balances_are_off_is_backed_up_all_the_same(
    stockroom: Stockroom, own: Path
) -> None:
    _overdrawn(own)
    assert stockroom("draw", "S13", "500 cm3", "--by", "T1", store=own).code == 0
    made = stockroom("backup", "--as-at", "2027-01-04", store=own)
    assert made.code == 0
    assert "By their entries S13 holds less than nothing: stockroom count." in made.out
    assert "the entries of S13 is not what they come to: stockroom verify --afresh." in made.said
    copy = own.parent / "backups" / "own-2027-01-04.sqlite"
    back = stockroom("restore", str(copy), store=own)
    assert back.code == 0
    assert "S13 holds less than nothing" in back.said


def test_a_second_restore_does_not_touch_what_the_first_is_writing(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    copy = backed_up(stockroom, own)
    draw(stockroom, own)
    newest = entries(own)
    shown: list[Path] = []

    def other(fresh: Path) -> None:
        shown.append(fresh)
        if len(shown) == 1:
            putting_back.put_back(own, copy, "second")
            assert fresh.exists()

    monkeypatch.setattr(putting_back, "_keep_journal", other)
    putting_back.put_back(own, copy, "first")
    assert len(set(shown)) == 2
    assert verify(own).faults == ()
    assert entries(own.parent / "second.sqlite") == newest
    assert not list(own.parent.glob("*.part*"))


def test_a_restore_that_waited_behind_another_puts_nothing_in_its_place(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    copy = backed_up(stockroom, own)
    held = putting_back._alone_with

    def late(path: Path) -> sqlite3.Connection:
        found = held(path)
        shutil.copy(copy, own.parent / "new.sqlite")
        (own.parent / "new.sqlite").replace(own)
        return found

    monkeypatch.setattr(putting_back, "_alone_with", late)
    refused = stockroom("restore", str(copy), store=own)
    assert (refused.code, "a moment ago; it was left as it is" in refused.err) == (1, True)
    assert not list(own.parent.glob("own-replaced-*"))


LAST_WORDS = """
import os, signal, sqlite3, sys
held = sqlite3.connect(sys.argv[1], isolation_level=None)
held.execute("UPDATE bottle SET remark = 'the last words' WHERE id = 1")
os.kill(os.getpid(), signal.SIGKILL)
"""


def test_the_journal_of_a_store_that_was_moved_away_is_kept(
    stockroom: Stockroom, own: Path
) -> None:
    copy = backed_up(stockroom, own)
    subprocess.run([sys.executable, "-c", LAST_WORDS, str(own)], check=False)
    away = own.rename(own.parent / "away.sqlite")
    done = stockroom("restore", str(copy), "--as-at", "2027-01-07", store=own)
    kept = own.parent / "own-replaced-2027-01-07.sqlite-wal"
    assert (done.code, str(kept) in done.said) == (0, True)
    assert rows(own, "SELECT COUNT(*) FROM bottle WHERE remark = 'the last words'") == [(0,)]
    kept.rename(f"{away}-wal")
    assert rows(away, "SELECT COUNT(*) FROM bottle WHERE remark = 'the last words'") == [(1,)]


def test_what_a_backup_of_an_earlier_layout_cannot_have_is_told(
    stockroom: Stockroom, own: Path
) -> None:
    copy = own.parent / "old.sqlite"
    with closing(sqlite3.connect(copy)) as held:
        held.executescript(gzip.decompress((LAYOUTS / "0006.sql.gz").read_bytes()).decode())
    shutil.copy(copy, own)
    assert stockroom("past", store=own).code == 0
    quiet = stockroom("restore", str(copy), store=own)
    assert "Nothing in it was newer than the backup." in quiet.out
    for change, table in (
        ("UPDATE bottle SET remark = 'changed' WHERE id = 1", "bottle"),
        ("UPDATE bottle SET lot = 'L1' WHERE id = 1", "bottle"),
        (
            "INSERT INTO submission (token, entered_on, entered_at, by, answer)"
            " VALUES ('x', '2027-01-04', '2027-01-04 10:00:00', 'T1', '{}')",
            "submission",
        ),
    ):
        assert stockroom("past", store=own).code == 0
        with closing(sqlite3.connect(own)) as held, held:
            held.execute(change)
        told = stockroom("restore", str(copy), store=own)
        assert f"Other tables that differ: {table}." in told.out


def test_what_a_killed_backup_left_is_cleared_and_what_another_writes_is_not(
    stockroom: Stockroom, own: Path
) -> None:
    folder = own.parent / "backups"
    folder.mkdir()
    left = folder / "own-2027-01-04.sqlite.part"
    left.write_text("half a copy", encoding="utf-8")
    assert stockroom("backup", "--as-at", "2027-01-04", store=own).code == 0
    assert names(folder) == ["own-2027-01-04.sqlite"]
    with backup.free_place(folder, "mine") as (first, _):
        with backup.free_place(folder, "mine") as (second, _):
            assert (first.exists(), second.exists(), first != second) == (True, True, True)
        assert first.exists()
    assert names(folder) == ["own-2027-01-04.sqlite"]


def test_a_house_counts_the_age_of_a_backup_from_the_day_it_was_made(
    stockroom: Stockroom, house: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr("stockroom.clock.today", lambda: date(2027, 1, 5))
    assert stockroom("backup", "--as-at", "2030-01-01", store=house).code == 0
    assert rows(house, "SELECT entered_on FROM backup_made") == [("2027-01-05",)]


def test_a_store_is_not_its_own_backup(stockroom: Stockroom, own: Path) -> None:
    refused = stockroom("restore", str(own), store=own)
    assert (refused.code, "is the store itself" in refused.err) == (1, True)


def test_a_damaged_store_is_kept_as_it_lies(stockroom: Stockroom, own: Path) -> None:
    copy = backed_up(stockroom, own)
    before = entries(own)
    spoil_page(own)
    damaged = own.read_bytes()
    done = stockroom("restore", str(copy), "--as-at", "2027-01-07", store=own)
    assert "It is damaged, and was kept as it lay" in done.out
    assert (own.parent / "own-replaced-2027-01-07.sqlite").read_bytes() == damaged
    assert entries(own) == before


def test_practice_and_a_house_are_not_mixed_up_unnamed(
    stockroom: Stockroom, practice: Path, house: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("STOCKROOM_STORE", str(house))
    before = house.read_bytes()
    refused = stockroom("restore", str(practice))
    assert (refused.code, "is the practice college, and" in refused.err) == (1, True)
    assert house.read_bytes() == before
    assert f"--store {house}" in refused.err
    assert stockroom("restore", str(practice), store=house).code == 0
    assert rows(house, "SELECT value FROM house WHERE setting = 'practice'") == [("yes",)]
    # and a house does not slip into the place of a practice store
    [kept] = house.parent.glob("own-replaced-*.sqlite")
    again = stockroom("restore", str(kept))
    assert (again.code, "is a house of one's own, and" in again.err) == (1, True)


def test_an_older_backup_is_restored_and_comes_up(stockroom: Stockroom, own: Path) -> None:
    copy = own.parent / "old.sqlite"
    with closing(sqlite3.connect(copy)) as held:
        held.executescript(gzip.decompress((LAYOUTS / "0003.sql.gz").read_bytes()).decode())
    assert stockroom("restore", str(copy), store=own).code == 0
    assert rows(own, "SELECT version_num FROM alembic_version") == [("0003",)]
    assert stockroom("diary", "S05", store=own).code == 0
    assert rows(copy, "SELECT version_num FROM alembic_version") == [("0003",)]


def test_a_store_somebody_has_open_is_not_replaced(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    copy = backed_up(stockroom, own)
    draw(stockroom, own)
    before = entries(own)
    monkeypatch.setattr(putting_back, "BUSY_SECONDS", 0.1)
    with reading(own):
        refused = stockroom("restore", str(copy), store=own)
    assert (refused.code, "Somebody else has" in refused.err) == (1, True)
    assert entries(own) == before
    assert names(copy.parent) == [copy.name]
    assert stockroom("restore", str(copy), store=own).code == 0


def test_a_restore_that_fails_leaves_the_store_as_it_was(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    copy = backed_up(stockroom, own)
    draw(stockroom, own)
    before = entries(own)
    monkeypatch.setattr(putting_back, "_allow_alike", full)
    refused = stockroom("restore", str(copy), store=own)
    assert (refused.code, refused.out) == (1, "")
    assert "Not restored: " in refused.err
    assert "No space left on device" in refused.err
    assert entries(own) == before
    assert rows(own, "PRAGMA journal_mode") == [("wal",)]
    assert not list(own.parent.glob("*.part"))


def test_the_restored_store_may_be_written_by_whoever_might(
    stockroom: Stockroom, own: Path
) -> None:
    copy = backed_up(stockroom, own)
    own.chmod(0o660)
    link = own.parent / "link.sqlite"
    link.symlink_to(own)
    assert stockroom("restore", str(copy), store=link).code == 0
    assert (own.stat().st_mode & 0o777, link.is_symlink()) == (0o660, True)


def test_whoever_waited_for_the_old_store_is_told(stockroom: Stockroom, own: Path) -> None:
    """What they wrote would be saved in a file that has lost its name."""
    copy = backed_up(stockroom, own)
    with closing(sqlite3.connect(own)) as waited:
        assert stockroom("restore", str(copy), store=own).code == 0
        found = waited.execute("SELECT version_num FROM alembic_version").fetchone()
    assert found == (REPLACED,)
    with pytest.raises(StoreTrouble, match="a moment ago; nothing was saved"):
        is_older(own, REPLACED)
    assert rows(own, "SELECT COUNT(*) FROM alembic_version") == [(1,)]


KILLED = """
import os, shutil, signal, sys
from pathlib import Path
from stockroom.store import putting_back

folder, store, copy = map(Path, sys.argv[1:4])

def die(*_):
    os.kill(os.getpid(), signal.SIGKILL)

for at in sys.argv[4:]:
    place = folder / at
    place.mkdir()
    shutil.copy(store, place / "own.sqlite")
    if os.fork() == 0:
        setattr(putting_back, at, die)
        putting_back.put_back(place / "own.sqlite", copy, "kept")
        os._exit(1)
    os.wait()
"""


def test_cut_off_anywhere_one_whole_store_stands_in_the_place(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    copy = backed_up(stockroom, own)
    old = entries(own)
    draw(stockroom, own)
    new = entries(own)
    steps = ["_keep_journal", "_is_broken", "_copy_aside", "_newer", "_spoil", "settle"]
    words = [sys.executable, "-c", KILLED, str(tmp_path), str(own), str(copy), *steps]
    subprocess.run(words, check=True)
    stands = {}
    for at in steps:
        store = tmp_path / at / "own.sqlite"
        with reading(store) as reader:
            backup.check_sound(reader, str(store))
        stands[at] = "backup" if entries(store) == old else "store"
        assert entries(store) in (old, new)
        # readers stop no writer again, once somebody has written
        draw(stockroom, store)
        assert rows(store, "PRAGMA journal_mode") == [("wal",)]
    # and what was left lying about is in nobody's way
    assert stockroom("restore", str(copy), store=tmp_path / "_newer" / "own.sqlite").code == 0
    assert stands == dict.fromkeys(steps[:4], "store") | dict.fromkeys(steps[4:], "backup")


def test_the_week_says_how_old_the_last_good_backup_is(
    stockroom: Stockroom, house: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr("stockroom.clock.today", lambda: date(2027, 1, 4))

    def foot(command: str, day: str) -> list[str]:
        lines = stockroom(command, "--as-at", day, store=house).out.splitlines()
        return [line for line in lines if "backup" in line]

    def data(day: str) -> object:
        return stockroom("fresh", "--json", "--as-at", day, store=house).json["backup"]

    assert foot("plan", "2027-01-04") == ["no backup of this store yet: stockroom backup"]
    assert data("2027-01-04") == {"on": None, "days": None, "place": None}
    copy = backed_up(stockroom, house)
    told = "last good backup Mon 2027-01-04"
    assert foot("plan", "2027-01-04") == [f"{told}, today"]
    assert foot("fresh", "2027-01-11") == [f"{told}, 7 days ago"]
    assert foot("fresh", "2027-01-12") == [f"{told}, 8 days ago: stockroom backup"]
    assert data("2027-01-13") == {"on": "2027-01-04", "days": 9, "place": str(copy)}
    # of a day before it nobody could know it
    assert foot("fresh", "2027-01-03") == ["no backup of this store yet: stockroom backup"]


def test_a_practice_store_is_not_nagged_about(stockroom: Stockroom, practice: Path) -> None:
    assert "backup" not in stockroom("fresh", store=practice).out
    assert stockroom("fresh", "--json", store=practice).json["backup"] is None


def test_a_backup_says_not_when_the_day_is_unreadable(stockroom: Stockroom, own: Path) -> None:
    assert stockroom("backup", "--as-at", "soon", store=own).code == 2
    assert not (own.parent / "backups").exists()
    assert date(2027, 1, 4).isoformat() in stockroom("backup", store=own).out
