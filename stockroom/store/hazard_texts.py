"""Writing down what a supplier's sheet says of a line; nothing earlier is taken away."""

from __future__ import annotations

from datetime import date, datetime

from sqlmodel import Session

from stockroom.errors import BadInput
from stockroom.safety.pictograms import DANGER, WARNING
from stockroom.safety.statements import codes_in
from stockroom.store.hazards import symbols_for
from stockroom.store.tables import HazardText, Line

NO_SIGNAL = "none"
SIGNALS = {"danger": DANGER, "warning": WARNING, NO_SIGNAL: ""}


def enter_text(
    session: Session,
    line: Line,
    *,
    text: str,
    signal: str,
    sheet: str,
    why: str,
    by: str,
    today: date,
    at: datetime,
) -> HazardText:
    """Keep a sheet's statements for a line, beside whatever was kept before.

    `signal` is danger, warning or none; the symbols follow from the codes.
    Raises: BadInput for a text without a statement code, an unknown code or signal
    word, and for a blank sheet or reason.
    """
    _check_said(line, sheet=sheet, why=why)
    row = HazardText(
        line_id=_id(line),
        signal_word=_signal(signal),
        statements=text.strip(),
        pictograms=symbols_for(_codes(text)),
        sheet=sheet.strip(),
        why=why.strip(),
        by=by,
        entered_on=today,
        entered_at=at.isoformat(sep=" "),
    )
    session.add(row)
    session.flush()
    return row


def _id(line: Line) -> int:
    assert line.id is not None
    return line.id


def _check_said(line: Line, *, sheet: str, why: str) -> None:
    if not sheet.strip():
        raise BadInput(
            f"Which sheet says so of {line.key}?", 'Add --sheet "the supplier, its date".'
        )
    if not why.strip():
        raise BadInput(f"Why is the text of {line.key} entered?", "One word is enough: --why …")


def _codes(text: str) -> tuple[str, ...]:
    codes = codes_in(text)
    # a sheet may say that nothing is classed, and then says it in words
    if not codes and text.strip().lower() != "not classified":
        raise BadInput(
            f"{text.strip()!r} holds no hazard statement.",
            'Type them off the sheet: "H314 H335", or "not classified".',
        )
    return codes


def _signal(word: str) -> str:
    if word.strip().lower() not in SIGNALS:
        raise BadInput(
            f"{word!r} is no signal word.", f"Say {', '.join(SIGNALS)}, as the sheet does."
        )
    return SIGNALS[word.strip().lower()]
