"""A sheet that can be printed: what it asks for, and how it is made."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Any, NoReturn

from stockroom.errors import BadInput, StockroomError
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.typesetting import PAPERS
from stockroom.service.make_meant import make_now
from stockroom.service.printing import held_against
from stockroom.service.printing import printed as with_number
from stockroom.settings import StoreAt
from stockroom.web.forms.blaming import blamed
from stockroom.web.forms.field import Field, Form
from stockroom.web.forms.typed import AtField, Typed
from stockroom.web.making import alone, drawn
from stockroom.web.visit import Visit

_MAKE = re.compile(r"[Mm]\d{1,9}")

USUAL = ("A4", "Letter")
"""The papers of a sheet that does not say otherwise."""

OTHERWISE = "To read it, open it without a number."
"""What can be done where no number can be taken."""


@dataclass(frozen=True, slots=True)
class Ready:
    """A sheet ready to be set. `about` tells its copies from others of its kind.

    `told` is worth knowing before it is printed; `paper` a key of `typesetting.PAPERS`.
    """

    kind: Kind[Any]
    sheet: Any
    about: str
    told: tuple[str, ...] = ()
    paper: str = "A4"


@dataclass(frozen=True, slots=True)
class Sheet:
    """One kind of sheet. Its address is /paper/NAME, its file NAME.pdf.

    `promise` is one sentence on what it is for. All `fields` may be left empty, but not each of
    those in `one_of`.
    """

    name: str
    title: str
    promise: str
    make: Callable[[Typed], Ready]
    fields: tuple[Field, ...] = ()
    papers: tuple[str, ...] = USUAL
    one_of: tuple[str, ...] = ()

    @property
    def form(self) -> Form:
        """Its fields as a form, with the paper it is printed on."""
        choices = tuple((name, name) for name in self.papers)
        paper = Field("paper", "Paper", "choice", choices=choices, usual=self.papers[0])
        fields = (*self.fields, paper)
        return Form(self.name, self.title, self.promise, fields, _nothing, subject="Paper")

    def is_asked(self, values: Mapping[str, str]) -> bool:
        """Whether enough is said to make one."""
        return not self.one_of or any(values.get(name, "").strip() for name in self.one_of)


def ready(visit: Visit, sheet: Sheet, values: Mapping[str, str]) -> Ready:
    """The sheet asked for, held against the copy printed last. Writes nothing. Raises: AtField."""
    typed = _typed(visit, sheet, as_shown(visit, values))
    with_paper = _paper_of(sheet, typed)
    try:
        made = sheet.make(typed)
        held = held_against(visit.path, made.kind, made.sheet, made.about)
    except AtField:
        raise
    except StockroomError as error:
        raise AtField(blamed(sheet.form, values, error), error) from error
    return replace(made, sheet=held, paper=with_paper)


def as_shown(visit: Visit, values: Mapping[str, str]) -> Mapping[str, str]:
    """The values with the number a make has by now, where it is said what was shown beside it.

    Raises: AtField where the plan has no such make any more.
    """
    meant, number = values.get("meant", "").strip(), values.get("what", "")
    if not meant or not _MAKE.fullmatch(number.strip()):
        return values
    try:
        return {**values, "what": make_now(visit.path, number, meant, as_at=visit.today)}
    except StockroomError as error:
        raise AtField("what", error) from error


def printed(visit: Visit, made: Ready) -> tuple[str, bytes]:
    """The next copy's number and the sheet under it as PDF; what cannot be drawn takes none.

    Raises: NotAllowed where none can be taken; 503 where too many are drawn.
    """
    visit.check_today("print it", OTHERWISE)

    def draw(sheet: Any) -> bytes:
        return drawn(made.kind, sheet, form="pdf", paper=made.paper)[0]

    by = visit.session.initials
    # waited for first: nobody else can save while this has the store
    with alone():
        copy, pdf = with_number(
            visit.path, made.kind, made.sheet, made.about, by=by, otherwise=OTHERWISE, draw=draw
        )
    return copy.head.copy, pdf


def numbers_before(path: StoreAt, things: Mapping[str, str]) -> tuple[str, ...]:
    """What there is to say of makes by number whose number was another's on paper: a line each.

    Asked before the sheet is printed: by then its own copy would be the newest.
    """
    from stockroom.reports.paper.make_number import another_words, number_start
    from stockroom.service.cards import copy_numbering

    told = []
    for number, thing in things.items():
        before = copy_numbering(path, number_start(number))
        if before is not None:
            copy, key = before
            told.append(another_words(number, thing, key, copy))
    return tuple(line for line in told if line)


def _typed(visit: Visit, sheet: Sheet, values: Mapping[str, str]) -> Typed:
    return Typed(sheet.form, values, visit.path, visit.today, visit.session.initials)


def _paper_of(sheet: Sheet, typed: Typed) -> str:
    asked = typed.text("paper")
    for name in sheet.papers:
        if name.lower() == asked.lower() or not asked:
            return name
    assert set(sheet.papers) <= set(PAPERS)
    told = f"{asked}: this is not printed on that."
    raise AtField("paper", BadInput(told, f"Choose {' or '.join(sheet.papers)}."))


def _nothing(typed: Typed) -> NoReturn:
    raise AssertionError(f"{typed.form.name} is printed, and nothing is entered by it")
