"""The manifest of a handed-out folder: its tables in order, with counts and digests.

Whoever reads the folder back proves by it that nothing is missing, cut short or altered.
"""

from __future__ import annotations

import hashlib
import json
import re
from collections.abc import Iterator
from dataclasses import asdict, dataclass, field
from pathlib import Path
from typing import Any

from stockroom.errors import StoreTrouble
from stockroom.store.content import Content
from stockroom.store.trouble import REVISIONS

NAME = "manifest.json"
TABLES = "tables"
WHAT = "stockroom hand-out"
FORM = 1
"""The form of the folder itself; a later one that cannot be read as this one counts on."""

DAMAGED = "Nothing was made. Take another copy of the folder, or restore a backup."


@dataclass(frozen=True, slots=True)
class TableFile:
    """One table of the folder: its columns with their kinds, and its content."""

    table: str
    columns: dict[str, str]
    content: Content

    @property
    def file(self) -> str:
        """Where it stands in the folder."""
        return f"{TABLES}/{self.table}.csv"


@dataclass(frozen=True, slots=True)
class Manifest:
    """What a folder says of itself: the layout it was written in, and its tables, parents first."""

    layout: str
    house: str
    practice: bool
    tables: tuple[TableFile, ...]
    beside: dict[str, str] = field(default_factory=dict)
    """The SHA-256 of each file that is only to be read, by its name."""

    @property
    def contents(self) -> dict[str, Content]:
        """The content of each table, as it was handed out."""
        return {each.table: each.content for each in self.tables}


def written(manifest: Manifest) -> str:
    """The manifest as JSON, its own digest in it."""
    told = asdict(manifest)
    whole = {"what": WHAT, "form": FORM, **told, "digest": _digest(told)}
    return json.dumps(whole, ensure_ascii=False, indent=1) + "\n"


def is_handed_out(folder: Path) -> bool:
    """Whether a folder is one that was handed out, and not tables somebody typed."""
    return (folder / NAME).exists() or (folder / TABLES / "entry.csv").exists()


def read(folder: Path) -> Manifest:
    """The manifest of a folder. Raises: StoreTrouble when it is missing, damaged or newer."""
    path = folder / NAME
    try:
        told = json.loads(path.read_text(encoding="utf-8"))
        what, form, digest = (told.pop(key) for key in ("what", "form", "digest"))
        _check_form(path, form)
        if what != WHAT or digest != _digest(told):
            raise ValueError("its digest does not agree with what it says")
        manifest = _manifest(told)
    except FileNotFoundError as error:
        raise StoreTrouble(f"{path} is missing.", DAMAGED) from error
    except (ValueError, KeyError, TypeError, AttributeError) as error:
        raise StoreTrouble(f"{path} is damaged: {error}.", DAMAGED) from error
    if manifest.layout not in REVISIONS:
        raise StoreTrouble(
            f"{folder} was handed out by a newer stockroom (revision {manifest.layout};"
            f" this one knows up to {REVISIONS[-1]}).",
            "Upgrade the program; nothing was made.",
        )
    return manifest


def check_files(folder: Path, manifest: Manifest) -> None:
    """Pass when every file is there, whole and as it was. Raises: StoreTrouble naming them."""
    faults = list(_faults(folder, manifest))
    if faults:
        more = f"; and {len(faults) - 10} more" if len(faults) > 10 else ""
        raise StoreTrouble(f"{folder} is damaged: {'; '.join(faults[:10])}{more}.", DAMAGED)


def odd_beside(folder: Path, manifest: Manifest) -> tuple[str, ...]:
    """What is not as it was handed out and makes no other store: each told in a sentence.

    That is the copy to be read, and whatever else somebody put into the folder.
    """
    return tuple(_odd_beside(folder, manifest))


def _odd_beside(folder: Path, manifest: Manifest) -> Iterator[str]:
    for name, digest in manifest.beside.items():
        path = folder / name
        if not path.is_file():
            yield f"{name} is missing; the tables are whole without it."
        elif file_digest(path) != digest:
            yield f"{name} is not as it was handed out; the store is made from the tables."
    known = {NAME, *manifest.beside, *(each.file for each in manifest.tables)}
    for path in sorted(folder.rglob("*")):
        name = path.relative_to(folder).as_posix()
        if path.is_file() and name not in known:
            yield f"{name} was not handed out, and was not read."


def _check_form(path: Path, form: object) -> None:
    if form != FORM:
        raise StoreTrouble(
            f"{path} is of form {form!r}, and this program reads form {FORM}.",
            "Upgrade the program; nothing was made.",
        )


def _faults(folder: Path, manifest: Manifest) -> Iterator[str]:
    for each in manifest.tables:
        path = folder / each.file
        if not path.is_file():
            yield f"{each.file} is missing"
        elif file_digest(path) != each.content.digest:
            yield f"{each.file} is not as it was handed out ({each.content.rows} rows)"
    # a table more than was handed out was put there by somebody, and would be left out unsaid
    known = {each.file for each in manifest.tables}
    for path in sorted((folder / TABLES).glob("*.csv")):
        if f"{TABLES}/{path.name}" not in known:
            yield f"{TABLES}/{path.name} was not handed out"


def file_digest(path: Path) -> str:
    """The SHA-256 of a file, in hexadecimal digits."""
    with path.open("rb") as file:
        return hashlib.file_digest(file, "sha256").hexdigest()


def _manifest(told: dict[str, Any]) -> Manifest:
    tables = told.pop("tables")
    files = tuple(TableFile(**each | {"content": Content(**each["content"])}) for each in tables)
    odd = [each.table for each in files if not re.fullmatch("[a-z_]+", each.table)]
    if odd:
        # a name with a path in it would lead out of the folder
        raise ValueError(f"{odd[0]!r} is no name of a table")
    return Manifest(**told, tables=files)


def _digest(told: object) -> str:
    plain = json.dumps(told, ensure_ascii=False, sort_keys=True, separators=(",", ":"))
    return hashlib.sha256(plain.encode()).hexdigest()
