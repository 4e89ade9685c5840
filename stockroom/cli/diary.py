"""The story of one bottle: every entry with its number, slips and their putting-right included."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import typer

from stockroom.cli.printing import show, width
from stockroom.cli.shared import of
from stockroom.cli.stock import Bottle

if TYPE_CHECKING:
    from stockroom.service.diary import Story, Told

_HEADING = ("entry", "happened", "entered", "by", "what", "amount", "left", "")


def diary(ctx: typer.Context, bottle: Bottle) -> None:
    """Every entry of a bottle with its number, as put-right asks for it.

    Example: stockroom diary B06
    """
    from stockroom.service.diary import story

    shared = of(ctx)
    told = story(shared.path, bottle)
    show(shared, lambda: _text(told, width()), lambda: _json(told))


def _text(story: Story, columns_wide: int) -> str:
    from stockroom.reports.sheet import PRACTICE, columns
    from stockroom.reports.words import raised

    rows = [_HEADING, *(_cells(told) for told in story.diary.entries)]
    lines = [
        raised(f"{story.diary.bottle} {story.diary.line}"),
        *columns(rows, columns_wide, indent=0),
    ]
    return "\n".join([PRACTICE, *lines] if story.practice else lines)


def _cells(told: Told) -> tuple[str, ...]:
    from stockroom.measure.formats import format_amount

    # a plus sign sets what came in apart from what was counted to be there
    change = f"{'+' if told.change.micro > 0 else ''}{format_amount(told.change)}"
    return (
        str(told.entry),
        told.happened.isoformat(),
        told.entered.isoformat(),
        told.by,
        f"{told.kind} (put right by {told.undone_by})" if told.undone_by else told.kind,
        change if told.change.micro else "",
        format_amount(told.left),
        _said(told),
    )


def _said(told: Told) -> str:
    mends = f"puts right {told.puts_right}" if told.puts_right else ""
    to = f"at {told.place}" if told.place else ""
    booking = f"for {told.booking.replace(';', ', ')}" if told.booking else ""
    return "; ".join(part for part in (mends, to, booking, told.said) if part)


def _json(story: Story) -> dict[str, Any]:
    return {
        "bottle": story.diary.bottle,
        "item": story.diary.line,
        "practice": story.practice,
        "entries": [_entry(told) for told in story.diary.entries],
    }


def _entry(told: Told) -> dict[str, Any]:
    return {
        "entry": told.entry,
        "happened": told.happened.isoformat(),
        "entered": told.entered.isoformat(),
        "by": told.by,
        "what": told.kind,
        "amount": told.change.number,
        "left": told.left.number,
        "unit": told.left.unit,
        "place": told.place,
        "booking": told.booking,
        "said": told.said,
        "puts_right": told.puts_right,
        "put_right_by": told.undone_by,
    }
