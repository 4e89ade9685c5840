"""Who is wanted when: days with too much hands-on work, and mixtures that are never kept."""

from __future__ import annotations

from stockroom.findings import Finding
from stockroom.planning.decisions import DayLoad, Plan, Watch
from stockroom.planning.people import clock, watch_note
from stockroom.reports.sheet import columns, section
from stockroom.reports.words import TIED, day, listed


def load_section(plan: Plan, width: int) -> str:
    """The days over the house's limit of hands-on minutes, and what could go earlier."""
    rows = [(day(load.day), _load(load)) for load in plan.loads if load.over]
    return section("TOO MUCH FOR ONE DAY", columns(rows, width))


def watch_section(plan: Plan, width: int) -> str:
    """What is never kept: when it may be mixed, by when it is gone, and a blank to tick it."""
    rows = [(each.booking, day(each.on), _watch(each)) for each in plan.watch]
    return section("NEVER KEPT", columns(rows, width))


def told_apart(plan: Plan) -> tuple[Finding, ...]:
    """The notes of a plan that no section of its own tells."""
    told = {watch_note(each) for each in plan.watch}
    heavy = {load.day.isoformat() for load in plan.loads if load.over}
    return tuple(
        note
        for note in plan.notes
        if note not in told and not (note.subject in heavy and "min hands-on" in note.text)
    )


def _load(load: DayLoad) -> str:
    work = [*load.makes, *(f"titrating {subject}" for subject in load.checks)]
    moves = [f"{name} to {day(to)}" for name, to in load.movable]
    earlier = f"could go earlier: {', '.join(moves)}" if moves else "nothing in it fits earlier"
    return f"{load.minutes} of {load.limit}{TIED}min: {listed(work)}; {earlier}"


def _watch(watch: Watch) -> str:
    mix, destroy = clock(watch.not_before), clock(watch.destroy_by)
    ticked = watch.ticked_by or "........"
    times = f"mix not before {mix}, destroyed by {destroy}, ticked by {ticked}"
    return f"{watch.title}: {times}: {' '.join((*watch.dangers, watch.how))}"
