"""The stock of one line over the term: what is left, with orders and without, and its level."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import PER_UNIT
from stockroom.measure.amounts import Kind as Measure
from stockroom.planning.amounts import say
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.pictures.running import Running
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.pictures.canvas import SIZE
from stockroom.reports.sheet import columns, page, section, wrap
from stockroom.reports.words import day, raised

_DRAWN = "Drawn on the day of the booking it serves, as the plan counts it."

NONE_LEFT = "none fit to use"

MADE_HERE = "What is made for a class and used up is not shown."


@dataclass(frozen=True, slots=True)
class At:
    """The end of one day: what is left without further orders, with all that comes, and why."""

    on: date
    left: int
    with_orders: int
    what: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Due:
    """An order: to be placed by a day (None once placed), and come on another; "2 × 500 g"."""

    id: str
    pack: str
    order_by: date | None
    comes: date


@dataclass(frozen=True, slots=True)
class Stock:
    """Amounts are micro-units of `kind`. `level` is the line's reorder level, None for none.

    `days` begin with the plan's day. `note` is what the picture
    leaves out.
    """

    head: Head
    line: str
    kind: Measure
    first: date
    last: date
    level: int | None
    days: tuple[At, ...]
    due: tuple[Due, ...]
    falls_below: date | None = None
    runs_out: date | None = None
    note: str = ""

    @property
    def ordered(self) -> bool:
        """Whether the two lines of the picture can differ at all."""
        return bool(self.due)


def level_of(known: Facts, plan: Plan, running: Running) -> Stock:
    """The picture's values, from the plan's day to the end of the term."""
    line = running.line
    due = [
        Due(order.id, f"{order.packs} × {order.pack}", order.order_by, order.arrives)
        for order in plan.orders
        if order.line == line.key
    ]
    due += [
        Due(one.number, f"{one.packs} × {one.pack}", None, one.counts)
        for one in plan.on_order
        if one.line == line.key
    ]
    falls = running.falls_below[0] if running.falls_below else None
    return Stock(
        head=head_of(plan, f"Stock of {raised(line.key)}", _about(known, running)),
        line=line.key,
        kind=line.kind,
        first=min([known.as_at, *(one.order_by for one in due if one.order_by)]),
        last=max([known.end, known.as_at, *(step.on for step in running.steps)]),
        level=line.level,
        days=_days(running),
        due=tuple(sorted(due, key=lambda one: (one.comes, one.id))),
        falls_below=falls,
        runs_out=running.runs_out,
        note="" if running.bought else MADE_HERE,
    )


def _days(running: Running) -> tuple[At, ...]:
    """The steps of one day as one: what is left at its end."""
    found: dict[date, At] = {}
    for step in running.steps:
        before = found[step.on].what if step.on in found else ()
        what = before if not step.what or step.what in before else (*before, step.what)
        found[step.on] = At(step.on, step.left, step.with_orders, what)
    return tuple(found.values())


def _about(known: Facts, running: Running) -> str:
    line = running.line
    parts = []
    if line.level is None:
        parts.append("no level is kept for it")
    elif running.falls_below is None:
        parts.append(f"stays above its level of {say(line.level, line.kind)}")
    else:
        parts.append(_falls(known, running, *running.falls_below))
    if running.runs_out and running.runs_out > known.as_at:
        parts.append(f"does not suffice from {day(running.runs_out)} on")
    elif running.runs_out and running.falls_below is None:
        parts.append(NONE_LEFT)
    later = running.falls_below is not None and running.falls_below[0] > known.as_at
    front = "without further orders " if later or "does not" in parts[-1] else ""
    return front + "; ".join(parts)


def _falls(known: Facts, running: Running, on: date, left: int) -> str:
    line = running.line
    assert line.level is not None
    level = f"its level of {say(line.level, line.kind)}"
    if on > known.as_at:
        return f"falls below {level} on {day(on)}, {say(left, line.kind)} then left"
    stands = any(bottle.line == line.key for bottle in known.bottles)
    why = ": what is on record of it is used up, past or not found" if stands and not left else ""
    words = f"below {level} already, {say(left, line.kind)} fit to use{why}"
    # the plan tells of a level on the day of a booking
    first = running.first_asked
    return f"{words}; first asked for by {first[1]} on {day(first[0])}" if first else words


def out_words(stock: Stock) -> str:
    """What is said of the day it runs out; with nothing there today, nobody need have asked."""
    today = stock.days[0]
    nothing = stock.runs_out == today.on and today.left <= 0
    return NONE_LEFT if nothing else "does not suffice"


def in_units(stock: Stock, micro: int) -> float:
    """Micro-units as g, cm³ or items."""
    return micro / PER_UNIT[stock.kind]


def level_text(stock: Stock, width: int) -> str:
    """The picture in words: a row for each day on which anything happens."""
    rows = [
        (
            f"{mark(stock.head, at.on.isoformat())}{day(at.on)}",
            say(at.left, stock.kind),
            say(at.with_orders, stock.kind) if stock.ordered else "",
            _happens(stock, at),
        )
        for at in stock.days
    ]
    heading = ("", "left", "with orders" if stock.ordered else "", "")
    due = [wrap(_due_words(one, stock.head.as_at), width, indent=2, hang=4) for one in stock.due]
    return page(
        [
            head_lines(stock.head, width),
            "\n".join(columns([heading, *rows], width, indent=0)),
            section("ORDERS", due),
            wrap(f"{_DRAWN} {stock.note}".rstrip(), width),
            foot_lines(stock.head, width),
        ]
    )


def _happens(stock: Stock, at: At) -> str:
    words = list(at.what) or ["today"]
    if at.on == stock.falls_below:
        words.append("BELOW ITS LEVEL")
    if at.on == stock.runs_out:
        words.append(out_words(stock).upper())
    return ", ".join(words)


def _due_words(one: Due, today: date) -> str:
    if one.order_by is None:
        return f"{one.id}: {one.pack}, ordered, expected {day(one.comes)}"
    late = ", that is past: order today" if one.order_by < today else ""
    return f"{one.id}: {one.pack}, order by {day(one.order_by)}{late}; comes {day(one.comes)}"


def level_lines(stock: Stock) -> dict[str, str]:
    """Each day with what is left at its end."""
    return {
        at.on.isoformat(): f"{day(at.on)}: {say(at.left, stock.kind)} left, {_happens(stock, at)}"
        for at in stock.days
    }


def level_picture(
    stock: Stock, size: tuple[float, float] = SIZE, *, form: str = "svg", bare: bool = True
) -> bytes:
    """The picture of it, "svg" or "png"; `size` in mm."""
    from stockroom.reports.pictures.canvas import drawn
    from stockroom.reports.pictures.level_drawn import draw_level

    return drawn(stock.head, lambda axes: draw_level(axes, stock), form, size, bare=bare)


LEVEL = Kind(
    "picture",
    level_text,
    level_lines,
    lambda stock: {"picture": level_picture(stock, bare=False).decode("utf-8")},
)
