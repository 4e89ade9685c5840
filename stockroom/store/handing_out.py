"""A store written out as a folder anybody can read: each table as CSV, words, and a manifest.

Written beside its place under another name and renamed when it is whole, so that half a
folder is never taken for one.
"""

from __future__ import annotations

import os
import shutil
from collections.abc import Callable, Iterable, Iterator
from contextlib import contextmanager
from itertools import count
from pathlib import Path
from typing import BinaryIO

from stockroom.errors import StoreTrouble
from stockroom.store.content import Page, content_of, pages
from stockroom.store.described import folder_readme, kinds_of, tables_in_order
from stockroom.store.manifest import NAME, TABLES, Manifest, TableFile, file_digest, written
from stockroom.store.reading import Reader
from stockroom.store.trouble import REVISIONS

Words = Callable[[], Iterable[str]]
"""The readable copy, a piece of text at a time."""


def hand_out_to(reader: Reader, folder: Path, words: Words) -> Manifest:
    """Write everything a store holds into a folder that is not there yet, or is empty.

    Raises: StoreTrouble when something is in the folder, or it cannot be written;
    what stood there before is then as it was.
    """
    # "." has no name that another could be put beside
    folder = folder.resolve()
    check_free(folder)
    with _place_beside(folder) as fresh:
        manifest = _write(reader, fresh, words)
        if folder.exists():
            # refuses when somebody has put something in it meanwhile
            folder.rmdir()
        fresh.rename(folder)
    return manifest


def check_free(folder: Path) -> None:
    """Pass when a folder may be written there. Raises: StoreTrouble."""
    if folder.exists() and not folder.is_dir():
        raise StoreTrouble(f"{folder} is a file.", "Name a folder that is not there yet.")
    if folder.is_dir() and any(folder.iterdir()):
        raise StoreTrouble(
            f"There is something in {folder} already; it was left alone.",
            "Name a folder that is not there yet.",
        )


@contextmanager
def _place_beside(folder: Path) -> Iterator[Path]:
    try:
        folder.parent.mkdir(parents=True, exist_ok=True)
        fresh = _first_free(folder)
        try:
            yield fresh
        except BaseException:
            # and only then: once renamed, the name beside may be another's who began meanwhile
            shutil.rmtree(fresh, ignore_errors=True)
            raise
    except OSError as error:
        raise StoreTrouble(
            f"Not handed out: {folder} cannot be written ({error.strerror or error}).",
            "Nothing is left there. Make room, or name another folder.",
        ) from error


def _first_free(folder: Path) -> Path:
    for number in count(1):
        fresh = folder.with_name(f"{folder.name}.part-{number}")
        try:
            fresh.mkdir()
        except FileExistsError:
            # somebody else's at this moment, or left by one who was cut off
            continue
        return fresh
    raise AssertionError("numbers do not end")


def _write(reader: Reader, folder: Path, words: Words) -> Manifest:
    (folder / TABLES).mkdir()
    files = []
    for table in tables_in_order():
        kinds = kinds_of(table)
        whole = _saved_pages(folder / TABLES / f"{table.name}.csv", reader, tuple(kinds))
        files.append(TableFile(table.name, kinds, content_of(whole)))
    _save(folder / "house.txt", words())
    _save(folder / "README.txt", [folder_readme({each.table: each.content for each in files})])
    manifest = Manifest(
        layout=REVISIONS[-1],
        house=_setting(reader, "name"),
        practice=_setting(reader, "practice") == "yes",
        tables=tuple(files),
        beside={name: file_digest(folder / name) for name in ("house.txt", "README.txt")},
    )
    _save(folder / NAME, [written(manifest)])
    return manifest


def _saved_pages(path: Path, reader: Reader, columns: tuple[str, ...]) -> Iterator[Page]:
    with path.open("wb") as file:
        for page in pages(reader, path.stem, columns):
            file.write(page.text)
            yield page
        _settle(file)


def _save(path: Path, pieces: Iterable[str]) -> None:
    with path.open("wb") as file:
        for piece in pieces:
            file.write(piece.encode())
        _settle(file)


def _settle(file: BinaryIO) -> None:
    # on the disc before the folder gets its name: a power cut must not leave an empty file in it
    file.flush()
    os.fsync(file.fileno())


def _setting(reader: Reader, name: str) -> str:
    found = reader.rows("house", "WHERE setting = ?", name)
    return str(found[0]["value"]) if found else ""
