"""What every kind of sheet is to the commands: its values, its text, its template."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Generic, Protocol, TypeVar

from stockroom.reports.paper.data import as_data

if TYPE_CHECKING:
    from stockroom.reports.paper.head import Head


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
    with beside the values themselves: pictures, codes.
    """

    name: str
    text: Callable[[S, int], str]
    lines: Callable[[S], Mapping[str, str]]
    more: Callable[[S], Mapping[str, Any]] | None = None

    def data(self, sheet: S) -> dict[str, Any]:
        """What the template is filled with."""
        found: dict[str, Any] = as_data(sheet)
        return found | dict(self.more(sheet)) if self.more else found
