"""What to make up, by day: `fresh`, and the MAKE part of the plan."""

from __future__ import annotations

from datetime import date

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Make, Plan
from stockroom.reports.sheet import backup_age, foot, guesses, head, page, section, spanning, wrap
from stockroom.reports.words import TIED, amount, counted, day, day_heading, listed, named, source


def fresh_text(plan: Plan, width: int) -> str:
    """Every make of the period by the day its work starts, with steps and cautions."""
    about = f"What to make up {spanning(plan)}: {counted(len(plan.makes), 'make')}"
    lines = makes_by_day(plan.makes, width, steps=True)
    body = section("MAKE", lines) or "Nothing to make up in this period."
    told = (guesses(plan, width), backup_age(plan, width), _foot(plan, width))
    return page([head(plan, width, about), body, *told])


def makes_by_day(makes: tuple[Make, ...], width: int, *, steps: bool = False) -> list[str]:
    """Makes under day headings, each with its own cautions; two days' work stands under both."""
    # whoever is in on the second day reads only that day
    days = sorted({make.on for make in makes} | {m.finish_on for m in makes if m.finish_on})
    return [line for when in days for line in _one_day(makes, when, width, steps=steps)]


def _one_day(makes: tuple[Make, ...], when: date, width: int, *, steps: bool) -> list[str]:
    starting = [make for make in makes if make.on == when]
    finishing = [make for make in makes if make.finish_on == when and make.on != when]
    lines = [f" {day_heading(when)}"]
    for make in starting:
        lines += _make_lines(make, width, steps=steps)
        # under every make, however often: whoever makes the second has not read the first
        lines += [wrap(f"! {caution}", width, indent=8, hang=10) for caution in make.cautions]
    return lines + [_finishing(make, width) for make in finishing]


def _make_lines(make: Make, width: int, *, steps: bool) -> list[str]:
    fresh = " [fresh]" if make.fresh else ""
    size = amount(make.volume, Kind.VOLUME)
    hands_on = f"{make.minutes}{TIED}min hands-on"
    first = f"{make.id}{fresh} {named(make.item, make.strength)}, {size}, {hands_on}"
    served = f"for {listed(make.bookings)}" if make.bookings else ""
    told = (_from(make), served, _when(make), _heel(make), *make.too_little)
    details = [each for each in told if each]
    # the bench sheet gives each its line; the plan, read at a desk, keeps them together
    below = [*details, make.steps] if steps else ["; ".join(details)]
    shown = [wrap(each, width, indent=8, hang=8) for each in below if each]
    return [wrap(first, width, indent=2, hang=8), *shown]


def _from(make: Make) -> str:
    return "from " + " + ".join(source(draw) for draw in make.sources) if make.sources else ""


def _when(make: Make) -> str:
    parts = [f"ready {day(make.ready)}"] if make.ready != make.on else []
    if make.good_until:
        same = make.good_until == make.on
        parts.append("that day only" if same else f"good until {day(make.good_until)}")
    return ", ".join(parts)


def _heel(make: Make) -> str:
    if make.heel <= 0:
        return ""
    left = amount(make.heel, Kind.VOLUME)
    return f"{left} over: label it and keep it" if make.heel_kept else f"{left} over: pour away"


def _finishing(make: Make, width: int) -> str:
    text = f"{make.id} {named(make.item, make.strength)}: finish what was started {day(make.on)}"
    return wrap(text, width, indent=2, hang=8)


def _foot(plan: Plan, width: int) -> str:
    if not plan.makes:
        return foot(width, "stockroom plan")
    return foot(width, f"stockroom why {plan.makes[0].id}", "stockroom make --help")
