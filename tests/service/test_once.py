"""The same thing sent in twice counts once, and the like of it within a minute is asked about."""

from __future__ import annotations

import contextlib
import json
from collections.abc import Callable
from datetime import date, datetime
from pathlib import Path

import pytest

from stockroom import clock
from stockroom.errors import BadInput, NotEnough, SentOtherwise, StockroomError
from stockroom.measure.amounts import Amount
from stockroom.service import bookings, checks, stock
from stockroom.service.answers import Done
from stockroom.service.once import answered, once
from stockroom.store.engine import writing
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, Stamp, append
from stockroom.store.names import find_bottle
from stockroom.store.reading import reading
from stockroom.store.tables import Submission

TODAY = date(2027, 1, 4)


def drawn(path: Path, cubic: float = 10, **changed: str) -> Done:
    said = {"bottle": "S13", "by": "T1", **changed}
    bottle, by = said["bottle"], said["by"]
    booking = said.get("booking")
    amount = Amount.cm3(cubic)
    return stock.draw(path, bottle, amount, booking=booking, on=None, today=TODAY, by=by)


def sent(path: Path, token: str, call: Callable[[], Done]) -> Done:
    return once(path, token, call, today=TODAY, by="T1")


def written(path: Path) -> tuple[int, int]:
    with reading(path) as reader:
        counted = "SELECT (SELECT COUNT(*) FROM entry), (SELECT COUNT(*) FROM submission)"
        entries, tokens = reader.ask(counted)[0]
    return entries, tokens


def test_a_token_sent_twice_draws_once_and_answers_alike(own: Path) -> None:
    entries, _ = written(own)
    first = sent(own, "a1", lambda: drawn(own))
    again = sent(own, " a1 ", lambda: drawn(own))
    assert again == first
    assert first.text.startswith("Drew 10 cm³ from S13")
    assert written(own) == (entries + 1, 1)


def test_another_token_is_another_draw(own: Path) -> None:
    entries, _ = written(own)
    sent(own, "a1", lambda: drawn(own))
    sent(own, "a2", lambda: drawn(own))
    assert written(own) == (entries + 2, 2)


def test_what_was_refused_leaves_the_token_free(own: Path) -> None:
    before = written(own)
    with pytest.raises(NotEnough, match="S13 holds 130 cm³"):
        sent(own, "a1", lambda: drawn(own, 1000))
    assert written(own) == before
    assert sent(own, "a1", lambda: drawn(own)).text.startswith("Drew 10 cm³")


def test_two_events_under_one_token_are_one_piece(own: Path) -> None:
    before = written(own)

    def both() -> Done:
        drawn(own)
        return drawn(own, 1000)

    with pytest.raises(StockroomError):
        sent(own, "a1", both)
    assert written(own) == before


def test_a_refusal_caught_on_the_way_leaves_nothing_half_written(own: Path) -> None:
    def first_cut_short() -> Done:
        with contextlib.suppress(NotEnough), writing(own) as session:
            bottle = find_bottle(session, "S13")
            stamp = Stamp(TODAY, TODAY, datetime(2027, 1, 4), "T1")
            append(session, bottle, Event(EntryKind.DRAWN, change=-1_000), stamp)
            append(session, bottle, Event(EntryKind.DRAWN, change=-500_000), stamp)
        return drawn(own)

    entries, _ = written(own)
    assert "120 cm³ left" in sent(own, "a1", first_cut_short).text
    assert written(own) == (entries + 1, 1)


def test_a_booking_and_a_loss_count_once_as_well(own: Path) -> None:
    day = date(2027, 1, 4)
    lost = sent(own, "a1", lambda: checks.lost(own, "S13", on=None, today=day, by="T1"))
    assert sent(own, "a1", lambda: checks.lost(own, "S13", on=None, today=day, by="T1")) == lost
    # without its token the second is refused: it is missing already
    with pytest.raises(StockroomError):
        checks.lost(own, "S13", on=None, today=day, by="T1")
    dropped = sent(own, "a2", lambda: bookings.cancel(own, "K05", today=day, by="T1"))
    assert sent(own, "a2", lambda: bookings.cancel(own, "K05", today=day, by="T1")) == dropped


@pytest.mark.parametrize(("token", "said"), [("", "Nothing is no token"), ("x" * 201, "201 signs")])
def test_what_is_no_token_is_refused_before_anything_happens(
    own: Path, token: str, said: str
) -> None:
    before = written(own)
    with pytest.raises(BadInput, match=said):
        sent(own, token, lambda: drawn(own))
    assert written(own) == before


def test_the_same_within_a_minute_is_asked_about(
    own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(clock, "now", lambda: datetime(2027, 1, 4, 9, 0, 10))
    first = drawn(own)
    assert not any("a moment ago" in line for line in first.details)
    monkeypatch.setattr(clock, "now", lambda: datetime(2027, 1, 4, 9, 1, 10))
    second = drawn(own)
    asked = f"The same was entered a moment ago (entry {first.entry}): if twice, stockroom"
    assert second.details[-1].startswith(f"{asked} put-right {second.entry}")


@pytest.mark.parametrize("other", ["later", "by", "amount", "bottle", "booking", "right"])
def test_what_differs_is_not_asked_about(
    own: Path, monkeypatch: pytest.MonkeyPatch, other: str
) -> None:
    monkeypatch.setattr(clock, "now", lambda: datetime(2027, 1, 4, 9, 0, 10))
    first = drawn(own)
    if other == "later":
        monkeypatch.setattr(clock, "now", lambda: datetime(2027, 1, 4, 9, 1, 11))
    if other == "right":
        assert first.entry
        stock.put_right(own, first.entry, "slip", on=None, today=TODAY, by="T1")
    changed = {"by": {"by": "T2"}, "bottle": {"bottle": "S14"}, "booking": {"booking": "K06"}}
    second = drawn(own, 11 if other == "amount" else 10, **changed.get(other, {}))
    assert not any("a moment ago" in line for line in second.details)


# -- what the token was drawn for --------------------------------------------------------


def test_another_thing_under_the_same_token_is_refused_and_not_dropped(own: Path) -> None:
    once(own, "a1", lambda: drawn(own), today=TODAY, by="T1", sent="ten")
    before = written(own)
    with pytest.raises(SentOtherwise, match="sent already with something else"):
        once(own, "a1", lambda: drawn(own, 20), today=TODAY, by="T1", sent="twenty")
    assert written(own) == before


def test_the_same_thing_under_the_same_token_is_answered_as_before(own: Path) -> None:
    first = once(own, "a1", lambda: drawn(own), today=TODAY, by="T1", sent="ten")
    again = once(own, "a1", lambda: drawn(own), today=TODAY, by="T1", sent="ten")
    assert again == first
    with reading(own) as reader:
        assert answered(reader, "a1") == first


def test_an_answer_kept_before_there_was_a_digest_is_still_given(own: Path) -> None:
    kept = {"text": "Drew 10 cm³ from S13", "details": []}
    with writing(own) as session:
        at = "2027-01-04 10:00:00"
        said = json.dumps(kept)
        session.add(Submission(token="a1", answer=said, entered_on=TODAY, entered_at=at, by="T1"))
    told = once(own, "a1", lambda: drawn(own), today=TODAY, by="T1", sent="ten")
    assert told.text == "Drew 10 cm³ from S13"
