"""Whose file it is that stands where one is to be written: ours may be replaced, no other."""

from __future__ import annotations

import zipfile
from pathlib import Path

from stockroom.errors import NotAllowed

PRODID = b"PRODID:-//stockroom//"
"""What every calendar file of ours holds."""

_BEGINS = {".png": (b"\x89PNG\r\n\x1a\n",), ".svg": (b"<svg", b"<?xml")}
_AUTHOR = (b"/Author(stockroom)", b"/Author (stockroom)")
_CREATOR = b">stockroom</dc:creator>"
_BOM = b"\xef\xbb\xbf"
_LARGE = 1_000_000


def check_ours(target: Path, fresh: bytes | None = None) -> None:
    """Pass where no file stands, an empty one, or one of our making; `fresh` is to replace it.

    A table is known by its heading line alone, so it passes until `fresh` is known. A picture
    is known by nothing but its form: no mark of ours would outlast a program that saves it.
    Raises: NotAllowed for a stranger's file; OSError for one that cannot be read.
    """
    if not target.exists() or not target.stat().st_size or _is_ours(target, fresh):
        return
    raise NotAllowed(
        f"{target} is there already and is not a sheet of stockroom's.",
        "Name another file, or move it away.",
    )


def _is_ours(target: Path, fresh: bytes | None) -> bool:
    ending = target.suffix.lower()
    if ending == ".xlsx":
        return _our_workbook(target)
    if ending == ".csv" and fresh is None:
        return True
    held = target.read_bytes()
    if ending == ".csv":
        return _heading(held) == _heading(fresh or b"")
    if ending == ".ics":
        return held.startswith(b"BEGIN:VCALENDAR") and PRODID in held
    if ending == ".pdf":
        return held.startswith(b"%PDF-") and any(mark in held for mark in _AUTHOR)
    return held.startswith(_BEGINS.get(ending, ()))


def _heading(table: bytes) -> bytes:
    return table.removeprefix(_BOM).partition(b"\n")[0].rstrip(b"\r")


def _our_workbook(target: Path) -> bool:
    try:
        with zipfile.ZipFile(target) as found:
            part = found.getinfo("docProps/core.xml")
            # packed small, it may be of any size
            return part.file_size <= _LARGE and _CREATOR in found.read(part)
    except (zipfile.BadZipFile, KeyError, NotImplementedError, RuntimeError, ValueError):
        return False
