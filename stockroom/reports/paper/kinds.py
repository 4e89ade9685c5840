"""What every kind of sheet is to the commands: its values, its text, its template."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import date
from typing import Any, Generic, Protocol, TypeVar

from stockroom.reports.paper.data import as_data
from stockroom.reports.paper.head import Head, Since, since


class Sheet(Protocol):
    """Any sheet: frozen values with a head."""

    @property
    def head(self) -> Head:
        """Its top and foot."""


S = TypeVar("S", bound=Sheet)


@dataclass(frozen=True, slots=True)
class Kind(Generic[S]):
    """One kind of sheet: the name of its template and of its copies, and how it is read.

    `text` takes the sheet and a width. `lines` are what is held against the copy printed
    last: a key that stays with a line, and all it says. `data` is what the template is filled
    with beside the values themselves: pictures, codes. `by_cause`, where a kind has it, tells
    its changes in an order of its own.
    """

    name: str
    text: Callable[[S, int], str]
    lines: Callable[[S], Mapping[str, str]]
    more: Callable[[S], Mapping[str, Any]] | None = None
    by_cause: Callable[[S, str, Mapping[str, str], date], Since] | None = None

    def since(self, sheet: S, number: str, before: Mapping[str, str]) -> Since:
        """What it says otherwise than the copy of that number, which said `before`."""
        if self.by_cause is not None:
            return self.by_cause(sheet, number, before, sheet.head.as_at)
        return since(number, before, self.lines(sheet), sheet.head.as_at)

    def data(self, sheet: S) -> dict[str, Any]:
        """What the template is filled with."""
        found: dict[str, Any] = as_data(sheet)
        return found | dict(self.more(sheet)) if self.more else found
