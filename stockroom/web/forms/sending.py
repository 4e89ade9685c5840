"""A form sent in: read, done once, or refused with the field it is about."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from stockroom.errors import NotAllowed, StockroomError
from stockroom.service.answers import Done
from stockroom.service.once import once
from stockroom.web.forms.field import Form
from stockroom.web.forms.typed import AtField, Typed, blamed
from stockroom.web.visit import Visit


@dataclass(frozen=True, slots=True)
class Trouble:
    """Why a form was refused: the field it stands beside ("" for the whole), and what to do."""

    field: str
    message: str
    hint: str
    status: int


def send(visit: Visit, form: Form, values: Mapping[str, str], token: str) -> Done:
    """Do what the form asks, once for each token. Raises: AtField, with nothing saved."""
    if visit.looks_elsewhere:
        told = f"You are looking from {visit.today.isoformat()}, which is not today."
        raise AtField("", NotAllowed(told, "Go back to today, then enter it."))
    by = values.get("by", "").strip() or visit.session.initials
    typed = Typed(form, values, visit.path, visit.today, by)
    try:
        return once(visit.path, token, lambda: form.do(typed), today=visit.today, by=by)
    except AtField:
        raise
    except StockroomError as error:
        raise AtField(blamed(form, values, error), error) from error


def trouble_of(refused: AtField) -> Trouble:
    """The refusal as a page shows it."""
    from stockroom.web.refusals import status_of

    return Trouble(refused.field, refused.message, refused.hint, status_of(refused.error))
