"""What a row says, as a short mark: the same row is known again, wherever it stands."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Iterable
from decimal import Decimal
from functools import lru_cache

from stockroom.errors import BadDate
from stockroom.measure.days import parse_printed
from stockroom.measure.reading import tidy

# 64 bits: among ten thousand rows two alike by chance are one in hundreds of millions of files
_LENGTH = 16
_NUMBER = re.compile(r"[0-9]{1,15}(?:[.,][0-9]{1,2})?")
_DATE = re.compile(
    r"[0-9]{1,4}[-/. ][0-9]{1,4}(?:[-/. ][0-9]{1,4})?|.*(?:jan|feb|mar|apr|may|jun|jul|aug|sep|oct"
    r"|nov|dec).*",
    re.IGNORECASE,
)


def fingerprint(cells: Iterable[tuple[str, str]]) -> str:
    """Sixteen signs that stand for what a row says: each cell with the field it is in.

    In whatever order the columns stand, whichever encoding, separator or kind of file they
    came in: dates and numbers of one reading are compared as what they mean. A day opened
    is none received.
    """
    said = sorted(f"{field}\x1e{_plain(text)}" for field, text in cells)
    return hashlib.sha256("\x1f".join(said).encode()).hexdigest()[:_LENGTH]


@lru_cache(maxsize=16384)
def _plain(text: str) -> str:
    plain = tidy(text).casefold()
    if _NUMBER.fullmatch(plain):
        return f"{Decimal(plain.replace(',', '.')).normalize():f}"
    if len(plain) < 20 and _DATE.fullmatch(plain):
        try:
            printed = parse_printed(text)
        except BadDate:
            return plain
        if printed is not None and not printed.ambiguous:
            return printed.readings[0].isoformat()
    return plain
