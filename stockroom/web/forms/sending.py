"""A form sent in: read, done once, or refused with the field it is about."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import dataclass

from stockroom.errors import BadInput, NotAllowed, SentOtherwise, StockroomError
from stockroom.service.answers import Done
from stockroom.service.once import once
from stockroom.web.door.session import LONGEST_INITIALS, with_initials
from stockroom.web.forms.blaming import blamed, in_columns, in_labels, to_tick
from stockroom.web.forms.field import Form
from stockroom.web.forms.typed import AtField, Typed, check_plain
from stockroom.web.visit import Visit

MOST_INITIALS = LONGEST_INITIALS
"""Signs that the initials in a form may have."""


_OF_THE_PAGE = ("form_token", "once", "back", "by")


@dataclass(frozen=True, slots=True)
class Trouble:
    """Why a form was refused: the field it stands beside ("" for the whole), and what to do.

    `tick` is the box that says it is meant all the same, "" where nothing but mending helps.
    """

    field: str
    message: str
    hint: str
    status: int
    tick: str = ""


def send(visit: Visit, form: Form, values: Mapping[str, str], token: str) -> Done:
    """Do what the form asks, once for each token.

    The same token with something else in the form is refused. Raises: AtField, with nothing
    saved.
    """
    try:
        visit.check_today("enter it")
    except NotAllowed as elsewhere:
        raise AtField("", elsewhere) from elsewhere
    by = initials_in(values) or visit.session.initials
    typed = Typed(form, values, visit.path, visit.today, by)
    sent = _sent(visit, form, values, by)
    try:
        return once(visit.path, token, lambda: form.do(typed), today=visit.today, by=by, sent=sent)
    except AtField:
        raise
    except SentOtherwise as error:
        raise AtField("", error) from error
    except StockroomError as error:
        raise AtField(blamed(form, values, error), error) from error


def _sent(visit: Visit, form: Form, values: Mapping[str, str], by: str) -> str:
    """All that makes one event another: an empty field is as good as none."""
    filled = {key: text.strip() for key, text in values.items() if key not in _OF_THE_PAGE}
    # the day that was chosen and not today's, or what is sent again after midnight would differ
    said = [form.name, form.title, by.strip(), str(visit.session.as_at or "")]
    return json.dumps([said, sorted((key, text) for key, text in filled.items() if text)])


def remember_initials(visit: Visit, values: Mapping[str, str]) -> None:
    """Keep the initials a form carries for the rest of the visit. Raises: as `initials_in`."""
    by = initials_in(values)
    if by and by != visit.session.initials:
        visit.request.state.session = with_initials(visit.session, by)


def initials_in(values: Mapping[str, str]) -> str:
    """The initials a form carries, "" for none. Raises: AtField for what is too long for any."""
    by = values.get("by", "").strip()
    check_plain("by", by)
    if len(by) > MOST_INITIALS or "\n" in by or "\t" in by or "\r" in by:
        told = f"{by[:30]!r} is no initials."
        raise AtField("by", BadInput(told, f"Give at most {MOST_INITIALS} signs, as T1."))
    return by


def trouble_of(form: Form, refused: AtField) -> Trouble:
    """The refusal as a page shows it."""
    from stockroom.web.refusals import status_of

    status, tick = status_of(refused.error), to_tick(form, refused.error)
    message = in_labels(form, refused.message)
    hint = in_columns(form, refused.hint) if refused.hint else ""
    return Trouble(refused.field, message, hint, status, tick)
