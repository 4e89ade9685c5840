"""Why as a page: the reasons behind one line, each name in them a link."""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.errors import StockroomError
from stockroom.reports.pages.links import Piece, href_of, linked
from stockroom.reports.words import raised


@dataclass(frozen=True, slots=True)
class Trouble:
    """Why there are no reasons: the field it is about, and what to do, its names as links."""

    field: str
    message: str
    hint: tuple[Piece, ...]


@dataclass(frozen=True, slots=True)
class WhyPage:
    """What was asked, and at most five lines; `subject` is the page about it, "" for none."""

    ref: str
    instead: str
    lines: tuple[tuple[Piece, ...], ...] = ()
    subject: str = ""
    trouble: Trouble | None = None

    @property
    def title(self) -> str:
        """The heading: "Why K15.2?", "Why not S10 in place of K11?"."""
        if not self.ref:
            return "Why?"
        return f"Why not {self.instead}, for {self.ref}?" if self.instead else f"Why {self.ref}?"


def why_page(ref: str, instead: str, reasons: tuple[str, ...]) -> WhyPage:
    """The page of these reasons."""
    href = href_of(ref.upper())
    # a need, a make or an order has no page but this one
    subject = "" if href.startswith("/why") else href
    return WhyPage(ref, instead, tuple(linked(raised(each)) for each in reasons), subject)


def why_refused(ref: str, instead: str, error: StockroomError) -> WhyPage:
    """The page where nothing of that name is known, or nothing can be read."""
    field = "instead" if instead and instead in error.message else "ref"
    trouble = Trouble(field, error.message, linked(_for_a_page(error.hint)))
    return WhyPage(ref, instead, trouble=trouble)


def _for_a_page(hint: str) -> str:
    # an example of the command helps nobody at a page
    return "" if hint.startswith("stockroom ") else hint
