"""How warm a place was, by its logger: counts, extremes, means, and what it is held to."""

from __future__ import annotations

from datetime import datetime
from typing import Any

from stockroom.keeping.storage_limits import StorageLimits, Warmth
from stockroom.keeping.temperatures import Summary
from stockroom.measure.formats import format_number
from stockroom.reports.sheet import PRACTICE, wrap

# more would fill the screen; --json has them all
_MOST_GAPS, _MOST_NOTED = 5, 5
# a warm week makes a room this much warmer, and hardly more; ours, no source
_FAR_C = 5.0


def logger_text(row: Warmth, width: int) -> str:
    """The record of a place: what it comes to on the first lines, oddities marked below."""
    lines = [_heading(row)]
    if row.added is not None:
        added, already = (format_number(each or 0) for each in (row.added, row.already))
        lines.append(f"  added {added}; {already} were held already")
    if row.taken:
        lines.append(f"  taken back {row.taken}; kept on record, and out of use")
    if row.summary is not None:
        lines += [f"  {line}" for line in _figures(row, row.summary)]
    lines += [f"  ! {told}" for told in row.told]
    if len(row.noted) > _MOST_NOTED:
        lines.append(f"  {len(row.noted) - _MOST_NOTED} earlier, then")
    lines += [f"  {noted}" for noted in row.noted[-_MOST_NOTED:]]
    wrapped = [wrap(line.strip(), width, indent=2 if line[0] == " " else 0) for line in lines]
    return "\n".join([PRACTICE, *wrapped] if row.practice else wrapped)


def _heading(row: Warmth) -> str:
    name, found = f"{row.place} {row.title}".strip(), row.summary
    if found is None:
        if row.temperature_c is None:
            return (
                f"{name}: no logged temperatures and none of its own: each rule counts at its own"
            )
        return f"{name}: no logged temperatures; its own {_own(row)} counts"
    read = f"{format_number(found.count)} reading{'' if found.count == 1 else 's'}"
    return f"{name}: {read}, {_at(found.first)} to {_at(found.last)}"


def _figures(row: Warmth, found: Summary) -> list[str]:
    lines = [
        f"lowest {found.lowest:g} °C, highest {found.highest:g} °C, mean {found.mean:.2f} °C",
        f"mean kinetic temperature {found.kinetic:.2f} °C (at {row.energy:g} kJ/mol)",
        f"the place's own temperature: {_own(row)}, counted where nothing was logged",
    ]
    lines += [f"! {off}" for off in _off(row, found)]
    lines += [_limits(row, row.limits, found)] if row.limits else []
    lines += [f"not logged: {_at(one)} to {_at(two)}" for one, two in found.gaps[:_MOST_GAPS]]
    if len(found.gaps) > _MOST_GAPS:
        lines.append(f"and {len(found.gaps) - _MOST_GAPS} gaps more")
    return lines


def _off(row: Warmth, found: Summary) -> list[str]:
    """A record that reads like another place's: said, and left as it is."""
    if row.temperature_c is None or abs(found.mean - row.temperature_c) <= _FAR_C:
        return []
    apart = abs(found.mean - row.temperature_c)
    side = "above" if found.mean > row.temperature_c else "below"
    return [
        f"its mean is {format_number(apart, 2)} °C {side} that: of another place? stockroom logger"
        f" {row.place} --take-back; or is the place so now? stockroom change places {row.place}"
    ]


def _limits(row: Warmth, limits: StorageLimits, found: Summary) -> str:
    out = [
        f"{format_number(hours, 2)} h {side}"
        for hours, side in ((row.below, "below"), (row.above, "above"))
        if hours
    ]
    words = f"{limits.name}, {limits.lowest:g} to {limits.highest:g} °C: "
    words += " and ".join(out) if out else "inside all the time"
    if limits.kinetic is not None:
        over = "above" if found.kinetic > limits.kinetic else "within"
        words += f"; mean kinetic {over} {limits.kinetic:g} °C"
    return words


def _own(row: Warmth) -> str:
    return "not known" if row.temperature_c is None else f"{row.temperature_c:g} °C"


def logger_json(row: Warmth) -> dict[str, Any]:
    """The same as data: °C, hours, times in ISO text; `mkt` is the mean kinetic temperature."""
    found = row.summary
    data: dict[str, Any] = {
        "place": row.place,
        "temperature_c": row.temperature_c,
        "count": found.count if found else 0,
        "ea_kj_mol": row.energy,
        "added": row.added,
        "held_already": row.already,
        "notes": list(row.told),
        "taken_back": row.taken or None,
        "record": list(row.noted),
        "practice": row.practice,
    }
    return data | (_found_json(row, found) if found else {"first": None, "last": None})


def _found_json(row: Warmth, found: Summary) -> dict[str, Any]:
    limits = row.limits
    return {
        "first": _iso(found.first),
        "last": _iso(found.last),
        "min": found.lowest,
        "max": found.highest,
        "mean": round(found.mean, 4),
        "mkt": round(found.kinetic, 4),
        "gaps": [{"from": _iso(one), "to": _iso(two)} for one, two in found.gaps],
        "limits": limits
        and {
            "name": limits.name,
            "from": limits.lowest,
            "to": limits.highest,
            "mkt_up_to": limits.kinetic,
            "hours_below": round(row.below, 2),
            "hours_above": round(row.above, 2),
        },
    }


def _at(moment: datetime) -> str:
    return moment.isoformat(" ", "minutes")


def _iso(moment: datetime) -> str:
    return moment.isoformat(timespec="minutes")
