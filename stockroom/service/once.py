"""The same thing sent in twice counts once: what was submitted keeps its token and its answer."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable
from dataclasses import asdict
from datetime import date, datetime, timedelta
from typing import TYPE_CHECKING, Any

from stockroom import clock
from stockroom.errors import BadInput, SentOtherwise
from stockroom.service.answers import Done
from stockroom.settings import StoreAt
from stockroom.store.kinds import EntryKind
from stockroom.store.reading import Reader

if TYPE_CHECKING:
    from stockroom.store.tables import Entry

MOMENT = timedelta(minutes=1)
"""The same entry by the same hand within this time is asked about. Common practice, no source."""

LONGEST = 200
"""The most signs of a token: room for any identifier, none for a letter. Our choice."""

SENT = "sent"
"""The key, beside the answer, of a digest of what was sent: no answer has one of that name."""

_ASKED = (EntryKind.DRAWN, EntryKind.SPILLED, EntryKind.LENT)


def once(
    path: StoreAt, token: str, call: Callable[[], Done], *, today: date, by: str, sent: str = ""
) -> Done:
    """Do what `call` does, or give the answer it gave when the token was first sent in.

    What the call writes in the store at `path` and the token are saved together or not at
    all; a call that is refused leaves the token free. `token` is whatever the sender drew
    by lot for this one submission; `sent` says in any words what it was drawn for, so that
    something else under the same token is never taken for it. Raises: BadInput for no token
    or one over 200 signs; SentOtherwise; StoreTrouble; and as the call.
    """
    # loaded here: whoever only wants to know what was entered a moment ago goes without
    from stockroom.store.engine import joined, reader_in
    from stockroom.store.tables import Submission

    mark = _checked(token)
    with joined(path) as session:
        # asked under the write lock: the first may have been saved a moment ago, elsewhere
        known = _submitted(reader_in(session), mark)
        if known is not None:
            _check_the_same(known, sent)
            return _answer_in(known)
        answer = call()
        session.add(
            Submission(
                token=mark,
                entered_on=today,
                entered_at=clock.now().isoformat(sep=" "),
                by=by.strip(),
                answer=json.dumps(asdict(answer) | {SENT: _digest(sent)}, ensure_ascii=False),
            )
        )
        return answer


def answered(reader: Reader, token: str) -> Done | None:
    """What was answered when the token was sent in; None for one that is new."""
    known = _submitted(reader, token)
    return None if known is None else _answer_in(known)


def entered_a_moment_ago(reader: Reader, entry: Entry) -> tuple[str, ...]:
    """One line where the same hand made the like of an entry within the minute before it."""
    if entry.kind not in _ASKED:
        return ()
    since = datetime.fromisoformat(entry.entered_at) - MOMENT
    rows = reader.ask(_ALIKE, entry.id, since.isoformat(sep=" "), entry.entered_at)
    return tuple(
        f"The same was entered a moment ago (entry {row['id']}):"
        f" if twice, stockroom put-right {entry.id} --why twice."
        for row in rows
    )


# a booking told apart is another draw: two classes may well take the same. Nobody enters two
# hundred things by hand in a minute, and a bottle's whole history is not read for a question
_ALIKE = """
    SELECT a.id FROM entry a JOIN entry b
    ON a.bottle_id = b.bottle_id AND a.kind = b.kind AND a.change = b.change AND a.by = b.by
    AND a.happened_on = b.happened_on AND a.booking = b.booking AND a.reason = b.reason
    WHERE b.id = ? AND a.id < b.id AND a.id >= b.id - 200
    AND a.entered_at >= ? AND a.entered_at <= ?
    AND NOT EXISTS (SELECT 1 FROM entry r WHERE r.puts_right = a.id)
    ORDER BY a.id DESC LIMIT 1
"""


def _submitted(reader: Reader, token: str) -> dict[str, Any] | None:
    rows = reader.rows("submission", "WHERE token = ?", token)
    return dict(json.loads(rows[0]["answer"])) if rows else None


def _answer_in(known: dict[str, Any]) -> Done:
    said = {key: value for key, value in known.items() if key != SENT}
    return Done(**{**said, "details": tuple(said["details"]), "also": tuple(said.get("also", ()))})


def _check_the_same(known: dict[str, Any], sent: str) -> None:
    # an answer kept before there was a digest stands for whatever was sent
    if known.get(SENT, _digest(sent)) != _digest(sent):
        raise SentOtherwise(
            "This page was sent already with something else, and nothing was saved now.",
            "Open it again, then send it.",
        )


def _digest(sent: str) -> str:
    return hashlib.sha256(sent.encode(errors="surrogatepass")).hexdigest()


def _checked(token: str) -> str:
    mark = token.strip()
    if not mark or len(mark) > LONGEST:
        shown = f"{mark[:20]}… ({len(mark)} signs)" if mark else "Nothing"
        raise BadInput(
            f"{shown} is no token.", f"Give one of 1 to {LONGEST} signs, drawn anew for each time."
        )
    return mark
