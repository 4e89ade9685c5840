"""Bringing in the old spreadsheet: given, looked at as often as wanted, and agreed."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from typing import Annotated

from fastapi import APIRouter, HTTPException, Path
from starlette.datastructures import FormData, UploadFile
from starlette.responses import Response

from stockroom.errors import BadInput, StockroomError, StoreTrouble
from stockroom.reports.pages.bring_in import BringIn, bring_in_page, done_of
from stockroom.service.bring_in import COLUMN, Meant, bring_in, look_at, meant
from stockroom.web.forms.sending import Trouble, remember_initials
from stockroom.web.held_files import Held, Said, held, hold, keep, put_away, shown_name
from stockroom.web.refusals import status_of
from stockroom.web.visit import Keeping, Reading, Recording, Sent, Visit, back_to, values_of

router = APIRouter(include_in_schema=False)

Token = Annotated[str, Path(max_length=80)]

ALL_IN = "The rows are in the store, but this page cannot note which."
HERE_ALREADY = "Given again, the list shows them as here already."

_OPTION = re.compile(r"--(sheet|column|encoding|answer)\b")
_CHOSEN, _TYPED, _COLUMN = "chosen.", "typed.", "column."
"""How the fields of answers begin: one of those offered, one's own, and what a column is."""


@dataclass(frozen=True, slots=True)
class Answering:
    """What was sent in as answers: every line, and the question whose answer nobody can read."""

    lines: tuple[str, ...]
    typed: dict[str, str]
    trouble: Trouble | None = None


@router.get("/bring-in")
def start(visit: Reading) -> Response:
    """Where a list is given."""
    return visit.page("bring_in.html", None, trouble=None)


@router.post("/bring-in")
def given(visit: Recording, sent: Sent) -> Response:
    """A list given: held, and then looked at."""
    values = values_of(sent)
    data, name = _file_in(sent)
    try:
        if not data:
            raise BadInput("No list was given.", "Choose the file, a .csv or .xlsx.")
        said = Said(shown_name(name), values.get("sheet", "").strip()[:100])
        token = hold(visit.house, visit.session, data, said)
    except StockroomError as error:
        trouble = _trouble("file", error)
        return visit.page("bring_in.html", None, status=trouble.status, trouble=trouble)
    return back_to(f"/bring-in/{token}")


def _file_in(sent: FormData) -> tuple[bytes, str]:
    """The bytes of the file that was sent, and what it was called; both empty for none."""
    file = sent.get("file")
    if not isinstance(file, UploadFile):
        return b"", ""
    with file.file:
        return file.file.read(), file.filename or ""


@router.get("/bring-in/{token}")
def looked_at(visit: Recording, token: Token) -> Response:
    """What each row of a list would become, and what is asked; nothing is written."""
    return _page(visit, token, held(visit.house, visit.session, token))


@router.post("/bring-in/{token}")
def answered(visit: Recording, token: Token, sent: Sent) -> Response:
    """Answers taken, and the list looked at again; the same page where one cannot be read."""
    known, values = held(visit.house, visit.session, token), values_of(sent)
    answers = _answers(values)
    said = replace(
        known.said,
        sheet=values.get("sheet", "").strip()[:100],
        encoding=values.get("encoding", "").strip()[:40],
        lines=answers.lines,
    )
    trouble = answers.trouble
    if trouble is None:
        try:
            _look(visit, Held(known.path, said))
        except StockroomError as error:
            trouble = _trouble("", error)
    if trouble is not None:
        return _page(visit, token, known, trouble=trouble, said=said, typed=answers.typed)
    keep(known, said)
    return back_to(f"/bring-in/{token}")


@router.post("/bring-in/{token}/agree")
def agreed(visit: Keeping, token: Token, sent: Sent) -> Response:
    """Every row that nothing is open in written, all of them or none."""
    known, values = held(visit.house, visit.session, token), values_of(sent)
    try:
        remember_initials(visit, values)
        visit.check_today("agree")
        done = bring_in(
            visit.path,
            known.path,
            as_meant=_meant(known.said),
            today=visit.today,
            by=visit.request.state.session.initials,
            called=known.said.name,
        )
    except StockroomError as error:
        return _page(visit, token, known, trouble=_trouble("agree", error))
    # sent twice, the second finds its rows here already and adds none
    said = replace(known.said, done=(*known.said.done, *done_of(done.read, done.written)))
    try:
        keep(known, said)
    except StoreTrouble as error:
        if not done.written:
            return _page(visit, token, known, trouble=_trouble("agree", error))
        # the rows were saved before: nobody is to think that they were not
        told = StoreTrouble(f"{ALL_IN} {error.message}", f"{error.hint} {HERE_ALREADY}")
        return _page(visit, token, Held(known.path, said), trouble=_trouble("agree", told))
    return back_to(f"/bring-in/{token}")


@router.post("/bring-in/{token}/away")
def away(visit: Recording, token: Token, sent: Sent) -> Response:
    """The list held no longer; nothing in the store changes."""
    if not sent:
        raise HTTPException(400, "Nothing was sent.")
    put_away(held(visit.house, visit.session, token))
    return back_to("/bring-in")


def _page(
    visit: Visit,
    token: str,
    known: Held,
    *,
    trouble: Trouble | None = None,
    said: Said | None = None,
    typed: dict[str, str] | None = None,
) -> Response:
    """The list as it is read by what is kept of it; `said` and `typed` are shown as refused."""
    page: BringIn | None = None
    try:
        page = _look(visit, known)
    except StockroomError as error:
        trouble = trouble or _trouble("", error)
    asked = {each.key for each in page.questions} if page else set()
    if trouble is not None and trouble.field not in asked:
        # nothing on the page to stand beside
        trouble = replace(trouble, field="")
    return visit.page(
        "bring_in_list.html",
        page,
        status=trouble.status if trouble else 200,
        trouble=trouble,
        said=said or known.said,
        typed=typed or {},
        address=f"/bring-in/{token}",
    )


def _look(visit: Visit, known: Held) -> BringIn:
    said = known.said
    tried = look_at(
        visit.path, known.path, as_meant=_meant(said), today=visit.today, called=said.name
    )
    return bring_in_page(tried.read, said.done)


def _meant(said: Said) -> Meant:
    columns = [line.removeprefix(COLUMN) for line in said.lines if line.startswith(COLUMN)]
    answers = [line for line in said.lines if not line.startswith(COLUMN)]
    return meant(sheet=said.sheet, encoding=said.encoding, columns=columns, answers=answers)


def _answers(values: dict[str, str]) -> Answering:
    """The lines said before as they were left, with each new answer in the place of an old one."""
    before = [line.strip() for line in values.get("lines", "").splitlines()]
    lines = {_key(line): line for line in before if line}
    typed = {key.removeprefix(_TYPED): text for key, text in values.items() if _is_typed(key, text)}
    given = {
        key.removeprefix(_CHOSEN): text for key, text in values.items() if key.startswith(_CHOSEN)
    } | {key: f"{key}={text.strip()}" for key, text in typed.items()}
    columns = [text for key, text in values.items() if key.startswith(_COLUMN) and text]
    trouble = None
    for key, line in [*given.items(), *(("", f"{COLUMN}{each}") for each in columns)]:
        try:
            _meant(Said("", lines=(line,)))
        except StockroomError as error:
            trouble = trouble or _trouble(key, error)
        else:
            lines[_key(line)] = line
    return Answering(tuple(lines.values()), typed, trouble)


def _is_typed(key: str, text: str) -> bool:
    return key.startswith(_TYPED) and bool(text.strip())


def _key(line: str) -> str:
    # of a column from the right: a heading may hold the sign itself
    key = line.rpartition("=")[0] if line.startswith(COLUMN) else line.partition("=")[0]
    return key.strip().casefold()


def _trouble(field: str, error: StockroomError) -> Trouble:
    # options of the command are fields of the page, called the same
    message, hint = (_OPTION.sub(r"\1", text) for text in (error.message, error.hint))
    return Trouble(field, message, hint, status_of(error))
