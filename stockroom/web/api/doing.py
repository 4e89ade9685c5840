"""Every form as a request: its fields in a JSON object, done once for each key the sender draws."""

from __future__ import annotations

import hashlib
import json
import secrets
from collections.abc import Callable, Mapping
from typing import Annotated, Any

from fastapi import APIRouter, Depends, Header, HTTPException, Request
from starlette.responses import JSONResponse, Response

from stockroom.errors import BadInput, SentOtherwise
from stockroom.web.api.answering import refused
from stockroom.web.api.contract import DoneAnswer
from stockroom.web.door.roles import Role
from stockroom.web.forms.field import LONGEST, Field, Form
from stockroom.web.forms.sending import MOST_INITIALS, send, trouble_of
from stockroom.web.forms.table import FORMS
from stockroom.web.forms.typed import AtField
from stockroom.web.hints import for_programs
from stockroom.web.refusals import problem
from stockroom.web.visit import Keeping, Reading, Recording, Visit

router = APIRouter(prefix="/api/do")

BY = "by"
"""The key of the initials, beside the fields of every form."""

_ROLES: dict[Role, Any] = {Role.READ: Reading, Role.RECORD: Recording, Role.KEEP_HOUSE: Keeping}


async def _sent(request: Request) -> dict[str, Any]:
    """The object a request brings. Raises: 415 for another kind, 400 for what is no object."""
    kind = request.headers.get("content-type", "").partition(";")[0].strip().lower()
    if kind != "application/json":
        raise HTTPException(415, "Send the fields as application/json.")
    try:
        # within the bounds of the door; nested deeper than any form is, it cannot be read
        found = json.loads(await request.body())
    except (ValueError, RecursionError) as error:
        raise HTTPException(400, "What was sent cannot be read as JSON.") from error
    if not isinstance(found, dict):
        raise HTTPException(400, "Send one JSON object, with a key for each field.")
    return found


Sent = Annotated[dict[str, Any], Depends(_sent)]
Key = Annotated[
    str,
    Header(
        alias="Idempotency-Key",
        max_length=200,
        description="Drawn by the sender. The same sent again under it counts once; "
        "something else under it is refused (422).",
    ),
]


def _take(form: Form) -> Callable[..., Response]:
    def take(visit: Recording, sent: Sent, key: Key = "") -> Response:
        try:
            done = send(visit, form, _values(form, sent), _token(form, visit, key))
        except AtField as told:
            return _refused(form, told)
        return JSONResponse(done.as_data())

    # who may send it stands with the form
    take.__annotations__["visit"] = _ROLES[form.role]
    return take


def _refused(form: Form, told: AtField) -> Response:
    trouble = trouble_of(form, told)
    if isinstance(told.error, SentOtherwise):
        # as the draft on this header has it, and not 409: sent as it is, it is refused for ever
        said = "This Idempotency-Key was sent already with something else; nothing was saved now."
        return problem(422, said, "Draw a new key for each event.")
    more = {"field": trouble.field} if trouble.field else {}
    hint = for_programs(trouble.hint, form)
    return problem(trouble.status, trouble.message, hint, **more)


def _token(form: Form, visit: Visit, key: str) -> str:
    # of this form and this bearer alone, whatever others draw
    mine = f"{form.name}\n{visit.session.number if visit.house.door else ''}\n{key}"
    drawn = hashlib.sha256(mine.encode()).hexdigest() if key.strip() else secrets.token_hex(32)
    return f"api-{drawn}"


def _values(form: Form, sent: Mapping[str, Any]) -> dict[str, str]:
    """The fields as text, as somebody would type them. Raises: AtField for what is none of it."""
    unknown = [key for key in sent if key != BY and form.field(key) is None]
    if unknown:
        names = ", ".join([*(each.name for each in form.fields), BY])
        told = f"{form.name} has no field {unknown[0][:40]!r}."
        raise AtField("", BadInput(told, f"It takes {names}."))
    return {key: _text(key, value) for key, value in sent.items() if value is not None}


def _text(key: str, value: object) -> str:
    if isinstance(value, bool):
        return "yes" if value else ""
    if isinstance(value, int) and abs(value) < 10**15:
        return str(value)
    if not isinstance(value, str):
        told = f"{key} is neither text, a whole number, nor true or false."
        raise AtField(key, BadInput(told, "Send it as text, as it would be typed."))
    try:
        value.encode()
    except UnicodeEncodeError as error:
        told = f"{key} holds half a sign."
        raise AtField(key, BadInput(told, "Send it as whole text.")) from error
    return value


def _described(form: Form) -> dict[str, Any]:
    """The form's fields for OpenAPI."""
    initials = {
        "type": "string",
        "maxLength": MOST_INITIALS,
        "description": "The initials it is entered by; needed where the visit has none.",
    }
    schema = {
        "type": "object",
        "properties": {each.name: _field(each) for each in form.fields} | {BY: initials},
        "required": [each.name for each in form.fields if each.needed],
        "additionalProperties": False,
    }
    return {"requestBody": {"required": True, "content": {"application/json": {"schema": schema}}}}


def _field(field: Field) -> dict[str, Any]:
    said = "; ".join(part for part in (field.label, field.hint) if part)
    if field.kind == "yes":
        return {"type": ["boolean", "null"], "description": said}
    kinds = ["string", "integer"] if field.kind == "number" else ["string"]
    found: dict[str, Any] = {"type": kinds if field.needed else [*kinds, "null"]}
    if field.choices:
        found["enum"] = [value for value, _ in field.choices] + ([] if field.needed else [None])
    else:
        found["maxLength"] = LONGEST
    return found | {"description": said}


def _promise(form: Form) -> str:
    return f"{form.promise}\n\nWith care: {form.caution}" if form.caution else form.promise


for _form in FORMS:
    router.add_api_route(
        f"/{_form.name}",
        _take(_form),
        methods=["POST"],
        name=f"do {_form.name}",
        summary=_form.title,
        description=_promise(_form),
        tags=[_form.subject],
        responses={200: {"description": "What was saved.", "model": DoneAnswer}, **refused()},
        openapi_extra=_described(_form),
    )
