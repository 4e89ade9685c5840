"""A store can be read where nothing may be written: a shared drive, a copy on a disc."""

from __future__ import annotations

import os
import shutil
import subprocess
import sys
import tempfile
from collections.abc import Iterator
from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import StoreTrouble
from stockroom.store import reading
from stockroom.store.snapshot import facts

DAY = date(2027, 1, 4)

# root may write everywhere, so the reader gives its rights up; it reads another store before
# that, since the library itself may be root's alone
READER = """
import datetime, os, pathlib, sys
from stockroom.store.snapshot import facts
open_store, shut_store = map(pathlib.Path, sys.argv[1:])
facts(open_store, datetime.date(2027, 1, 4))
os.setgroups([]); os.setgid(65534); os.setuid(65534)
assert not os.access(shut_store, os.W_OK) and not os.access(shut_store.parent, os.W_OK)
print(len(facts(shut_store, datetime.date(2027, 1, 4)).bottles))
"""
AS_ROOT = pytest.mark.skipif(
    not hasattr(os, "geteuid") or os.geteuid() != 0, reason="only root can give up its rights"
)


@pytest.fixture
def shut(practice: Path) -> Iterator[Path]:
    """A copy in a folder that anybody can look into; the usual one is its owner's alone."""
    folder = Path(tempfile.mkdtemp(prefix="stockroom-"))
    yield Path(shutil.copy(practice, folder / "shut.sqlite"))
    folder.chmod(0o755)
    shutil.rmtree(folder)


def read_by_nobody(practice: Path, store: Path) -> subprocess.CompletedProcess[str]:
    for path in store.parent.iterdir():
        path.chmod(0o444)
    store.parent.chmod(0o555)
    words = [sys.executable, "-c", READER, str(practice), str(store)]
    return subprocess.run(words, capture_output=True, text=True, check=False)


@pytest.mark.file
@AS_ROOT
@pytest.mark.parametrize("litter", [(), ("-wal",), ("-shm",), ("-wal", "-shm")])
def test_a_store_that_may_only_be_read_is_read(
    practice: Path, shut: Path, litter: tuple[str, ...]
) -> None:
    for ending in litter:
        Path(f"{shut}{ending}").touch()
    ran = read_by_nobody(practice, shut)
    assert (ran.returncode, ran.stdout) == (0, "75\n"), ran.stderr


@pytest.mark.file
@AS_ROOT
def test_entries_still_in_the_side_file_are_never_left_out(practice: Path, shut: Path) -> None:
    Path(f"{shut}-wal").write_bytes(b"x" * 4096)
    ran = read_by_nobody(practice, shut)
    assert "was not closed properly" in ran.stderr


@pytest.mark.file
def test_reading_leaves_nothing_beside_the_store(own: Path) -> None:
    facts(own, DAY)
    assert [path.name for path in own.parent.glob(f"{own.name}*")] == [own.name]


def test_reading_cannot_write(own: Path) -> None:
    with (
        pytest.raises(StoreTrouble, match="read but not written"),
        reading.reading(own) as reader,
    ):
        reader.ask("UPDATE booking SET groups = 1")


@pytest.mark.file
def test_a_writer_that_closes_leaves_nothing_beside_the_store(own: Path) -> None:
    from stockroom.service import bookings

    bookings.cancel(own, "K06", today=DAY, by="T1")
    assert [path.name for path in own.parent.glob(f"{own.name}*")] == [own.name]
