"""A question to the API: the day it is asked from, and the answer with the mark of its content."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable, Hashable
from dataclasses import dataclass
from datetime import date
from typing import Annotated, Any

from fastapi import Depends, Query
from pydantic import StringConstraints
from starlette.responses import Response

from stockroom.errors import BadInput
from stockroom.service.kept import kept
from stockroom.service.typed import day_or_none
from stockroom.settings import StoreAt
from stockroom.web.api.contract import PROBLEM
from stockroom.web.visit import Reading, Visit

Data = dict[str, Any]
Word = Annotated[str, StringConstraints(max_length=200)]
"""Anything typed, of a length a name may have."""

Day = Annotated[str, Query(max_length=40, description="A day, as 2027-01-25.")]
Cautious = Annotated[
    bool, Query(description="Count every strength at its lower 95 % limit, where known.")
]

MOST = 16
"""Answers kept as they are sent, those of one store. Our choice."""


@dataclass(frozen=True, slots=True)
class Question:
    """Whose question it is, and the day it is asked from."""

    visit: Visit
    today: date

    @property
    def path(self) -> StoreAt:
        """The store that is asked."""
        return self.visit.path

    @property
    def practice(self) -> bool:
        """Whether it is the invented college."""
        return self.visit.front.practice

    def answer(self, name: str, asked: tuple[Hashable, ...], make: Callable[[], Data]) -> Response:
        """What `make` gives, as JSON; 304 where the asker has it already.

        `name` and `asked` tell questions apart: while nothing is saved, the same one gets the
        same bytes. Raises: as `make`.
        """
        key = (name, self.today, *asked)
        body, tag = kept(self.path, "api", key, lambda: _written(make()), most=MOST)
        headers = {"etag": tag}
        if tag in self.visit.request.headers.get("if-none-match", "").replace("W/", ""):
            return Response(status_code=304, headers=headers)
        return Response(body, media_type="application/json", headers=headers)


def _asking(
    visit: Reading,
    as_at: Annotated[
        str, Query(max_length=40, description="The day to look from; else today.")
    ] = "",
) -> Question:
    return Question(visit, day(as_at, "as_at") or visit.today)


Asking = Annotated[Question, Depends(_asking)]
"""A question, where its asker may read."""


def day(text: str, where: str) -> date | None:
    """A day as it was typed, None for nothing. Raises: BadDate, quoting `where` it stood."""
    return day_or_none(text.strip() or None, where)


def period(start: str, end: str) -> dict[str, date | None]:
    """The first and the last day asked for. Raises: BadDate; BadInput when they run backwards."""
    first, last = day(start, "from"), day(end, "to")
    if first and last and last < first:
        raise BadInput(f"to {last} is before from {first}.", "Turn them round.")
    return {"start": first, "end": last}


def told(model: type[Any], words: str) -> dict[int | str, dict[str, Any]]:
    """What a question may be answered with, for OpenAPI: `model` are the keys, `words` say it."""
    fine = {"description": words, "model": model}
    unchanged = {"description": "As it was: the asker named the etag of this very answer."}
    return {200: fine, 304: unchanged, **refused()}


def refused() -> dict[int | str, dict[str, Any]]:
    """How whatever is refused is answered, for OpenAPI."""
    content = {"application/problem+json": {"schema": PROBLEM}}
    return {
        "4XX": {
            "description": "Refused: `detail` says why, `hint` what to do.",
            "content": content,
        },
        503: {"description": "The store cannot be read or written now.", "content": content},
    }


def _written(data: Data) -> tuple[bytes, str]:
    body = json.dumps(data, ensure_ascii=False, allow_nan=False, separators=(",", ":")).encode()
    # by the content, so that every worker gives the same one, also after a start anew
    return body, f'"{hashlib.sha256(body).hexdigest()[:32]}"'
