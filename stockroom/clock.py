"""The only reader of the clock. Everything else is told what day it is."""

from __future__ import annotations

from datetime import date, datetime


def today() -> date:
    """The day on this machine's calendar."""
    return date.today()


def now() -> datetime:
    """The local time on this machine, to the second, without a zone."""
    return datetime.now().replace(microsecond=0)
