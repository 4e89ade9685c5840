"""Differences in what is to be done: makes, orders and checks.

`pairing.py` says what is held against what, `change_words.py` how a difference is said.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from datetime import date

from stockroom.planning.changing import change_words as words
from stockroom.planning.changing.changes import About, Change, Touched, What
from stockroom.planning.changing.kept import KeptCheck, KeptMake, KeptOrder, KeptPlan, KeptSource
from stockroom.planning.changing.pairing import paired_checks, paired_makes, paired_orders
from stockroom.planning.facts import Happened, HappenedKind

Said = tuple[tuple[What, ...], str]


def make_changes(
    before: KeptPlan, after: KeptPlan, happened: Sequence[Happened], over: frozenset[str]
) -> Iterator[Change]:
    """Makes that came, went, were carried out, or differ; `over` are bookings of days gone by."""
    pairs = paired_makes(before.makes, after.makes)
    left = [h for h in happened if h.kind is HappenedKind.MADE]
    for was, now in sorted(pairs, key=lambda pair: _when(*pair)):
        make = now or was
        if make is None:
            continue
        if was and now:
            what, text = said(words.make_parts(was, now, before, after))
        elif now:
            what, text = (What.ADDED,), words.make_now(now) + _elsewhere("was", now, before.makes)
        else:
            carried = _carried_out(make, left)
            # nobody will make it now, and whether anybody did is not known
            missed = not carried and _of_days_gone_by(make.bookings, over)
            what = _how_gone(bool(carried), missed)
            gone = words.make_gone(make) + _elsewhere("now", make, after.makes)
            text = "; ".join(h.words for h in carried) or gone
            text += "; that day is past, and no make was entered" if missed else ""
        if what:
            yield Change(
                About.MAKE,
                was.id if was else "",
                now.id if now else "",
                words.named(make.item, make.strength),
                what,
                text,
                touched=_of_make(was, now),
            )


def _elsewhere(when: str, make: KeptMake, others: Iterable[KeptMake]) -> str:
    """The makes that serve its bookings on the other side: a batch was cut, or two were joined."""
    alike = [each for each in others if each.line == make.line]
    ids = [each.id for each in alike if set(each.bookings) & set(make.bookings)]
    return f"; {when} in {', '.join(ids)}" if ids else ""


def _of_days_gone_by(bookings: tuple[str, ...], over: frozenset[str]) -> bool:
    return bool(bookings) and set(bookings) <= over


def _how_gone(done: bool, past: bool) -> tuple[What, ...]:
    if done:
        return (What.DONE,)
    return (What.PAST,) if past else (What.GONE,)


def _when(was: KeptMake | None, now: KeptMake | None) -> tuple[date, str, tuple[str, ...]]:
    make = now or was
    assert make is not None
    return make.on, make.line, make.bookings


def _of_make(was: KeptMake | None, now: KeptMake | None) -> Touched:
    both = [make for make in (was, now) if make]
    return Touched(
        both[0].line,
        frozenset(number for make in both for number in make.bookings),
        bottles_in(*(make.sources for make in both)),
        was.on if was else None,
        sense_of(was.volume if was else 0, now.volume if now else 0),
    )


def _carried_out(make: KeptMake, left: list[Happened]) -> list[Happened]:
    """The entries that made it, used up: those for its bookings, else one for no booking at all."""
    mine = [h for h in left if h.line == make.line and set(h.bookings) & set(make.bookings)]
    mine = mine or [h for h in left if h.line == make.line and not h.bookings][:1]
    for each in mine:
        left.remove(each)
    return mine


def order_changes(
    before: KeptPlan, after: KeptPlan, happened: Sequence[Happened]
) -> Iterator[Change]:
    """Orders that came, went, were placed or came in, or differ."""
    came = (HappenedKind.ARRIVED, HappenedKind.ORDERED)
    for was, now in paired_orders(before.orders, after.orders):
        order = now or was
        if order is None:
            continue
        if was and now:
            what, text = said(words.order_parts(was, now))
        elif now:
            what, text = (What.ADDED,), words.order_now(now)
        else:
            done = [h for h in happened if h.kind in came and h.line == order.line]
            what = _how_gone(bool(done), False)
            text = "; ".join(h.words for h in done) or words.order_gone(order)
        if what:
            yield Change(
                About.ORDER,
                was.id if was else "",
                now.id if now else "",
                order.item,
                what,
                text,
                touched=_of_order(was, now),
            )


def _of_order(was: KeptOrder | None, now: KeptOrder | None) -> Touched:
    both = [order for order in (was, now) if order]
    return Touched(
        both[0].line,
        frozenset(number for order in both for number in order.bookings),
        sense=sense_of(was.pence if was else 0, now.pence if now else 0),
    )


def check_changes(
    before: KeptPlan, after: KeptPlan, happened: Sequence[Happened], over: frozenset[str]
) -> Iterator[Change]:
    """Checks that came, went, were done, or are on another day."""
    checked = [h for h in happened if h.kind is HappenedKind.CHECKED]
    for was, now in paired_checks(before.checks, after.checks):
        check = now or was
        if check is None:
            continue
        if was and now:
            what, text = said(words.check_parts(was, now))
        elif now:
            what, text = (What.ADDED,), words.check_now(now)
        else:
            done = [h for h in checked if h.subject == check.subject or h.line == check.line != ""]
            missed = not done and _of_days_gone_by(check.bookings, over)
            what = _how_gone(bool(done), missed)
            text = "; ".join(h.words for h in done) or words.check_gone(check)
            text += "; that day is past, and no check was entered" if missed else ""
        if what:
            yield Change(
                About.CHECK,
                was.subject if was else "",
                now.subject if now else "",
                check.item,
                what,
                text,
                touched=_of_check(was, now),
            )


def _of_check(was: KeptCheck | None, now: KeptCheck | None) -> Touched:
    both = [check for check in (was, now) if check]
    return Touched(
        both[0].line,
        frozenset(number for check in both for number in check.bookings),
        frozenset(check.subject for check in both if not check.line),
        was.best if was else None,
    )


def said(parts: words.Parts) -> Said:
    """In what a thing differs, each once, and all the words for it."""
    what = tuple(dict.fromkeys(What(part) for part, _ in parts))
    return what, "; ".join(text for _, text in parts)


def sense_of(was: int, now: int) -> int:
    """1 for more than there was, -1 for less, 0 for as much."""
    return (now > was) - (now < was)


def bottles_in(*rows: tuple[KeptSource, ...]) -> frozenset[str]:
    """The bottles among these sources."""
    return frozenset(source.bottle for row in rows for source in row if source.bottle)
