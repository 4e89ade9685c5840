"""A table saved as text: its encoding and its separator found out, its cells read."""

from __future__ import annotations

import codecs
import csv
import io
import re
from collections import Counter
from contextlib import suppress

from stockroom.bringing.sheet import Sheet, trimmed
from stockroom.errors import BadInput
from stockroom.measure.reading import quote

_MARKS = (
    (codecs.BOM_UTF8, "utf-8-sig", "UTF-8"),
    (codecs.BOM_UTF32_LE, "utf-32", "UTF-32"),
    (codecs.BOM_UTF16_LE, "utf-16", "UTF-16"),
    (codecs.BOM_UTF16_BE, "utf-16", "UTF-16"),
)
# what the three commonest one-byte encodings of spreadsheet programs are called
_ONE_BYTE = {"cp1252": "Windows (cp1252)", "mac_roman": "Mac Roman", "cp850": "DOS (cp850)"}
# signs a bench writes, so that the encoding that shows them is the likelier
_BENCH = frozenset("°²³µ·×–—’“”£½¼¾…™®ß\u2018")
_FOR_BENCH, _AGAINST = 3, -2
_SEPARATORS = {";": "semicolons", "\t": "tabs", ",": "commas", "|": "upright strokes"}
_SAMPLE = 60
"""Lines looked at for the separator: past titles and into the rows. Our choice."""
_SAID = re.compile(r"sep=(?P<mark>[;,|\t])\r?\n?", re.IGNORECASE)
_CONTROLS = re.compile(r"[\x00-\x08\x0e-\x1a\x1c-\x1f]")


def read_text(data: bytes, name: str, encoding: str = "") -> Sheet:
    """The sheet in a text's bytes. Raises: BadInput when it is no table of text."""
    text, called = decoded(data, name, encoding)
    odd = _CONTROLS.search(text)
    if odd:
        raise BadInput(
            f"{name} is no table of text: it begins {text[:8]!r}.",
            "Save it as .xlsx or .csv in the spreadsheet program.",
        )
    said = _SAID.match(text)
    body = text[said.end() :] if said else text
    mark = said["mark"] if said else separator(body)
    rows = _rows(body, mark, name)
    # the line that names the separator is a line of the file all the same
    cells = trimmed([[""], *rows] if said else rows)
    split = f", separated by {_SEPARATORS[mark]}" if any(len(row) > 1 for row in cells) else ""
    return Sheet(cells, f"{called}{split}")


def decoded(data: bytes, name: str, encoding: str = "") -> tuple[str, str]:
    """The text and what its encoding is called.

    Raises: BadInput for an encoding nobody knows, or that the bytes are not in.
    """
    if encoding:
        return _as_said(data, name, encoding), encoding
    for mark, codec, called in _MARKS:
        if data.startswith(mark):
            return data.decode(codec, errors="replace"), called
    if b"\0" in data[:4000]:
        # no text has a zero byte in it, but for those that take two for each letter
        codec = "utf-16-le" if data[1:4000:2].count(0) >= data[:4000:2].count(0) else "utf-16-be"
        return data.decode(codec, errors="replace"), "UTF-16"
    try:
        return data.decode("utf-8"), "UTF-8"
    except UnicodeDecodeError:
        return _one_byte(data)


def separator(text: str) -> str:
    """The sign between cells: the one that parts most rows into equally many; "," for none."""
    lines = "\n".join(text.splitlines()[:_SAMPLE])
    most, chosen = 0, ","
    for mark in _SEPARATORS:
        widths = _widths(lines, mark)
        alike = max((widths[width] for width in widths if width > 1), default=0)
        # ";" comes before ",": where both part the rows, the commas are decimal signs
        if alike > most:
            most, chosen = alike, mark
    return chosen


def _widths(lines: str, mark: str) -> Counter[int]:
    widths: Counter[int] = Counter()
    # a cell too long for a row ends the count, and is told of where the rows are read
    with suppress(csv.Error):
        for row in csv.reader(io.StringIO(lines), delimiter=mark):
            widths[len(row)] += 1
    return widths


def _as_said(data: bytes, name: str, encoding: str) -> str:
    try:
        return data.decode(encoding)
    except LookupError:
        raise BadInput(
            f"--encoding {quote(encoding)}: I know no such encoding.",
            "Write it as utf-8, utf-16, cp1252 or mac_roman, or leave it out.",
        ) from None
    except UnicodeDecodeError as error:
        raise BadInput(
            f"{name} is not in {encoding}: byte {error.start + 1} cannot be read so.",
            "Leave --encoding out, and I will find it out.",
        ) from None


def _one_byte(data: bytes) -> tuple[str, str]:
    scores = {}
    for codec in _ONE_BYTE:
        try:
            scores[codec] = _likeness(data.decode(codec))
        except UnicodeDecodeError:
            continue
    ranked = sorted(scores, key=lambda codec: -scores[codec])
    if (len(ranked) > 1 and scores[ranked[0]] == scores[ranked[1]]) or not ranked:
        guessed = _guessed(data)
        if guessed:
            return guessed
    codec = ranked[0] if ranked else "latin-1"
    return data.decode(codec, errors="replace"), _ONE_BYTE.get(codec, codec)


def _likeness(text: str) -> int:
    """How like a list of bottles: bench signs for it, then small letters, all else against it.

    Source: the weights are our choice; tests read lists in each encoding.
    """
    beyond = Counter(sign for sign in text if ord(sign) > 127)
    return sum(
        count * (_FOR_BENCH if sign in _BENCH else 1 if sign.islower() else _AGAINST)
        for sign, count in beyond.items()
    )


def _guessed(data: bytes) -> tuple[str, str] | None:
    from charset_normalizer import from_bytes

    best = from_bytes(data).best()
    return None if best is None else (str(best), best.encoding)


def _rows(text: str, mark: str, name: str) -> list[list[str]]:
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=mark, strict=True)
    rows: list[list[str]] = []
    try:
        rows.extend(reader)
    except csv.Error as error:
        raise BadInput(*_why_unread(error, name, len(rows) + 1)) from None
    return rows


def _why_unread(error: csv.Error, name: str, row: int) -> tuple[str, str]:
    said = str(error)
    if "field limit" in said:
        return (
            f"{name}, line {row}: a cell of more than {csv.field_size_limit()} signs is too long.",
            "Is a quotation mark opened and never closed? Put it right, or shorten the cell.",
        )
    unclosed = "unexpected end" in said
    what = "a quotation mark is opened and never closed" if unclosed else said
    hint = "Put the quotation marks right there, or save the sheet anew."
    return f"{name}, line {row}: {what}.", hint
