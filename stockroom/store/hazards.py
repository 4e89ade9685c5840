"""Hazard limits and suppliers' texts: the table that travels along, and the store's own.

The house's own rows for a substance take the place of all the shipped ones for it. A
supplier's text is kept with who and when; the last one counts, the older ones stay.
This half only reads, and loads nothing heavy; `enter_text` is in `hazard_texts.py`.
"""

from __future__ import annotations

import csv
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, replace
from datetime import date
from functools import lru_cache
from pathlib import Path
from typing import Any

from stockroom.errors import BadInput, StockroomError
from stockroom.safety.acute import CODES
from stockroom.safety.grounds import HOUSE
from stockroom.safety.hazards import SheetText
from stockroom.safety.limits import ACUTE, Basis, Limit, Route
from stockroom.safety.pictograms import pictograms_for
from stockroom.safety.statements import codes_in, statement
from stockroom.store.likeness import plain
from stockroom.store.reading import Reader, Row

Limits = tuple[Limit, ...]
Cells = Row | Mapping[str, Any]
"""One row by column: of the shipped table all text, of the store's own as it is kept."""


@dataclass(frozen=True, slots=True)
class LimitBook:
    """What is held of each substance, by plain name; the house's own before the shipped.

    The house's own rows are read when they are asked for, so that one that makes no
    sense spoils the answer for its own substance alone.
    """

    shipped: Mapping[str, Limits]
    own: Mapping[str, list[Row]] = field(default_factory=dict)

    def of(self, *names: str) -> Limits:
        """The limits under the first of these names that has any; () for none of them.

        The house's own are marked as its own. Raises: BadInput for one of those that
        cannot be read.
        """
        wanted = [plain(name) for name in names if name]
        own = next((self.own[name] for name in wanted if name in self.own), None)
        if own is not None:
            return tuple(replace(limit_from(row), how=HOUSE) for row in own)
        return next((self.shipped[name] for name in wanted if name in self.shipped), ())


@lru_cache(maxsize=2)
def shipped_limits(folder: Path) -> Mapping[str, Limits]:
    """The rows of `hazards.csv` in a folder of tables, by plain name of the substance.

    Raises: BadInput quoting the row that cannot be read.
    """
    held: dict[str, list[Limit]] = {}
    with (folder / "hazards.csv").open(encoding="utf-8", newline="") as file:
        for row in csv.DictReader(file):
            held.setdefault(plain(row["substance"]), []).append(limit_from(row))
    return {name: tuple(rows) for name, rows in held.items()}


def limit_from(row: Cells) -> Limit:
    """One row of either table as a limit. Raises: BadInput quoting substance and value."""
    try:
        limit = Limit(
            hazard_class=row["hazard_class"],
            h_code=row["h_code"],
            basis=Basis(row["basis"]),
            from_percent=_number(row["from_percent"]),
            below_percent=_number(row["below_percent"]),
            route=Route(row["route"]) if row["route"] else None,
            ate=_number(row["ate"]),
            m_factor=_number(row["m_factor"]) or 1.0,
            percent_of=row["percent_of"],
            how=row["how"],
            source=row["source"],
        )
        _check(limit)
    except (ValueError, StockroomError) as trouble:
        raise BadInput(
            f"hazards: {row['hazard_class'] or row['h_code']!r}: {trouble}", "Mend the row."
        ) from trouble
    return limit


def _check(limit: Limit) -> None:
    if limit.basis is Basis.NONE:
        return
    statement(limit.h_code)
    if not limit.supplemental:
        _check_code(limit)


def _check_code(limit: Limit) -> None:
    expected = limit.kind.statement
    # some classes are marked with one of several statements, and their rows say which
    if expected and limit.h_code[:4] != expected:
        raise BadInput(
            f"{limit.hazard_class} is {expected}, not {limit.h_code!r}.", "Which of them is meant?"
        )
    ways = {row[int(limit.hazard_class[-1]) - 1] for row in CODES.values()} if _acute(limit) else ()
    if ways and limit.h_code not in ways:
        raise BadInput(
            f"{limit.hazard_class} is {', '.join(sorted(ways))}, not {limit.h_code!r}.",
            "Which of them is meant?",
        )
    if ways and limit.route is not None and limit.route is not limit.counted_by:
        raise BadInput(
            f"{limit.h_code} is {limit.way_in}, not {str(limit.route)!r}.",
            "Mend the route, or the statement.",
        )


def _acute(limit: Limit) -> bool:
    return limit.kind.ladder == ACUTE


def _number(written: str | float | None) -> float | None:
    return None if written in ("", None) else float(written)


def limit_book(folder: Path, reader: Reader | None = None) -> LimitBook:
    """The limits of the tables in `folder`, and those of an open store before them."""
    return LimitBook(shipped_limits(folder), _own(reader) if reader else {})


def _own(reader: Reader) -> Mapping[str, list[Row]]:
    names = reader.pairs("SELECT id, substance FROM substance")
    held: dict[str, list[Row]] = {}
    for row in reader.rows("hazard"):
        held.setdefault(plain(names[row["substance_id"]]), []).append(row)
    return held


def texts_of(reader: Reader, line: str) -> tuple[SheetText, ...]:
    """What was typed from suppliers' sheets for a line, by key; the newest, which counts, first."""
    rows = reader.rows(
        "hazard_text", "WHERE line_id = (SELECT id FROM line WHERE key = ?) ORDER BY id DESC", line
    )
    return tuple(text_from(row) for row in rows)


def text_from(row: Row) -> SheetText:
    """One row of typed text as a value."""
    return SheetText(
        statements=row["statements"],
        codes=codes_in(row["statements"]),
        signal_word=row["signal_word"],
        pictograms=tuple(row["pictograms"].split()),
        sheet=row["sheet"],
        why=row["why"],
        by=row["by"],
        entered_on=date.fromisoformat(row["entered_on"]),
    )


def symbols_for(codes: Iterable[str]) -> str:
    """The pictograms the codes of a sheet call for, as they are kept: "GHS05 GHS07"."""
    return " ".join(pictograms_for(codes))
