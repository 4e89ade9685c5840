"""What a session has read already, so that one piece of work asks the same thing once."""

from __future__ import annotations

from typing import Any, cast

from sqlalchemy import event
from sqlmodel import Session

_ANSWERS = "answers"


def keep_rows(session: Session) -> None:
    """Hold on to every row the session reads, until it is closed."""
    # it forgets a row that nobody holds on to, and would fetch it again at each look
    kept: list[object] = []
    event.listen(session, "loaded_as_persistent", lambda _, row: kept.append(row))


def forget(session: Session) -> None:
    """Let go of the answers worked out so far: something was written past the session."""
    session.info.get(_ANSWERS, {}).clear()


def answers_in(session: Session) -> dict[Any, Any]:
    """Answers worked out in this session; none are left once anything was written in it."""
    if _ANSWERS not in session.info:
        answers: dict[Any, Any] = {}
        session.info[_ANSWERS] = answers
        event.listen(session, "after_flush", lambda *_: answers.clear())
    return cast(dict[Any, Any], session.info[_ANSWERS])
