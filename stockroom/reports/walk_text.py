"""A walk on paper: the sheet to count by, what came of it, and the list of walks."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import groupby

from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_about, format_amount
from stockroom.planning.amounts import say_left
from stockroom.planning.on_shelf import OnShelf
from stockroom.planning.walking import Met, Sheet, Total, Visit, totals
from stockroom.reports.sheet import PRACTICE, columns, page, section, wrap
from stockroom.reports.words import TIED, counted, day, raised

WIDEST = 100
"""Columns of the sheet at most, so that it prints on one page upright."""

_BLANK = "............"
HOW = f"How to write it: 640{TIED}g, same, about half, missing, here; blank for not yet."
"""How a count is written, as it is typed back."""

HOW_UNLISTED = (
    f"+{TIED}brown{TIED}powder,{TIED}A2,{TIED}100{TIED}g for a bottle that is not listed."
)
"""How a bottle that is not listed is written."""


def walk_text(sheet: Sheet, width: int) -> str:
    """The sheet of what is still to be counted; once nothing is, or it is ended, the result."""
    if sheet.walk.ended is None and (sheet.again or sheet.to_count):
        return sheet_text(sheet, width)
    return result_text(sheet, width)


def sheet_text(sheet: Sheet, width: int) -> str:
    """What is to be counted, in shelf order, with what should be there and a blank."""
    wide = min(width, WIDEST)
    places = groupby(sheet.again or sheet.to_count, key=lambda row: row.bottle.place)
    shelves = [_shelf(sheet, place, list(rows), wide) for place, rows in places]
    return page(
        [
            _head(sheet, wide),
            *shelves,
            section("LOOK OUT FOR", _look_out(sheet, wide)),
            f"Turned up, not listed: {'_' * (wide - 24)}",
            wrap(f"{HOW} {HOW_UNLISTED}", wide, hang=0),
            _next(sheet, "--enter --again" if sheet.again else "--enter", wide),
        ]
    )


def _head(sheet: Sheet, width: int) -> str:
    lines = [sheet.house, wrap(f'Walk "{sheet.walk.name}" {about_walk(sheet)}', width)]
    return "\n".join([PRACTICE, *lines] if sheet.practice else lines)


def about_walk(sheet: Sheet) -> str:
    """Where a walk goes along, since when, by whom, and how far it is."""
    walk = sheet.walk
    along = f"along {', '.join(walk.places)}" if walk.places else "along every shelf"
    ended = f", ended {day(walk.ended)} by {walk.ended_by}" if walk.ended else ""
    # one that nobody signs was not started: its sheet is only to count by
    since = f", started {day(walk.started)} by {walk.by}" if walk.by else ""
    return f"{along}{since}{ended}: {progress(sheet)}"


def progress(sheet: Sheet) -> str:
    """How far it is, in words: "12 counted, 3 of them differing, 63 still to count"."""
    counts = [visit for visit in sheet.visits if visit.how is Met.COUNTED]
    told = [f"{len(counts)} counted"]
    differing = sum(visit in counts for visit in sheet.differing)
    if differing:
        told.append(f"{differing} of them differing")
    for how in (Met.TURNED_UP, Met.UNLISTED, Met.MISSING, Met.SEEN):
        some = sum(visit.how is how for visit in sheet.visits)
        told += [f"{some} {how.value}"] if some else []
    left = len(sheet.to_count)
    return ", ".join(
        [*told, f"{left} not counted" if sheet.walk.ended else f"{left} still to count"]
    )


def _shelf(sheet: Sheet, place: str, rows: list[OnShelf], width: int) -> str:
    title = next((one.title for one in sheet.places if one.name == place), "")
    heading = f"{place} {title}".strip() or "AT NO PLACE"
    cells = [_cells(row) for row in rows]
    return section(heading, columns([("no.", "should be", "is", "name"), *cells], width))


def _cells(row: OnShelf) -> tuple[str, ...]:
    bottle = row.bottle
    warned = f" ({row.verdict.warning}: write here)" if row.verdict.warning else ""
    remark = f'; "{bottle.remark}"' if bottle.remark else ""
    return bottle.number, _left(row), _BLANK, f"{bottle.line}{warned}{remark}"


def _left(row: OnShelf) -> str:
    return say_left(row.bottle, row.line).replace(" ", TIED)


def _amount(kind: Kind, micro: int) -> str:
    return format_amount(Amount(kind, micro)).replace(" ", TIED)


def _by_eye(kind: Kind, micro: int) -> str:
    return format_about(Amount(kind, micro)).replace(" ", TIED)


def _look_out(sheet: Sheet, width: int) -> list[str]:
    return columns(
        [
            (row.bottle.number, f"{row.bottle.line}, not found; last at {row.bottle.place or '-'}")
            for row in sheet.look_out
        ],
        width,
    )


def _next(sheet: Sheet, option: str, width: int) -> str:
    return wrap(f'Next: stockroom walk "{sheet.walk.name}" {option}', width, hang=6)


def asked(row: OnShelf) -> str:
    """What is asked at a terminal of one bottle: "A2  B06 640 g? sodium thiosulfate: "."""
    bottle = row.bottle
    left = f"{_left(row)}?".replace(TIED, " ")
    warned = f" ({row.verdict.warning}: here)" if row.verdict.warning else ""
    return raised(f"{bottle.place or '-'}  {bottle.number}  {bottle.line}{warned}, {left} ")


def sitting_text(
    sheet: Sheet, came: Sequence[str], skipped: int, missed: Sequence[str], width: int
) -> str:
    """What one sitting of entering came to, by what came of its lines, and how far the walk is."""
    told = [f"{came.count(word)} {word}" for word in dict.fromkeys(came)]
    lines = [counted(skipped, "line") + " skipped"] if skipped else []
    this = f"This sitting: {', '.join([*told, *lines]) or 'nothing entered'}."
    whole = f'Walk "{sheet.walk.name}": {progress(sheet)}.'
    return "\n".join(wrap(line, width) for line in (this, *missed, whole))


def result_text(sheet: Sheet, width: int) -> str:
    """What came of a walk: differences, what was not found or turned up, what nobody counted."""
    wide = min(width, WIDEST)
    missing = [visit for visit in sheet.visits if visit.how is Met.MISSING]
    came = [visit for visit in sheet.visits if visit.how in (Met.TURNED_UP, Met.UNLISTED)]
    ended = sheet.walk.ended is not None
    return page(
        [
            _head(sheet, wide),
            section("DIFFERENCES", columns([_difference(x) for x in sheet.differing], wide))
            or "No count differs from what was entered.",
            section("BY WHAT IT IS, NOT COUNTED AS USED", _totals(sheet.visits, wide)),
            section("NOT FOUND", columns([_met(visit) for visit in missing], wide)),
            section("TURNED UP", columns([_met(visit) for visit in came], wide)),
            section("NOBODY COUNTED", columns([_uncounted(x) for x in sheet.to_count], wide)),
            section("STILL NOT FOUND", _look_out(sheet, wide)),
            "" if ended else _next(sheet, "--end", wide),
        ]
    )


def _difference(visit: Visit) -> tuple[str, ...]:
    # an empty bottle is seen to be empty
    about = visit.about and visit.left > 0
    now = _by_eye(visit.kind, visit.left) if about else _amount(visit.kind, visit.left)
    before = _amount(visit.kind, visit.left - visit.difference)
    told = f"{visit.line}; {visit.by}, {day(visit.on)}"
    return visit.bottle, f"{before} → {now}", _signed(visit.kind, visit.difference), told


def _signed(kind: Kind, micro: int) -> str:
    return f"{'+' if micro > 0 else '−'}{_amount(kind, abs(micro))}"


def _totals(visits: Sequence[Visit], width: int) -> list[str]:
    return columns([_total(total) for total in totals(visits)], width)


def _total(total: Total) -> tuple[str, ...]:
    parts = [(-total.less, total.less), (total.more, total.more)]
    said = ", ".join(_signed(total.kind, signed) for signed, some in parts if some)
    return said, total.line


def _met(visit: Visit) -> tuple[str, ...]:
    return (
        visit.bottle,
        _amount(visit.kind, visit.left),
        f"{visit.line}; {visit.by}, {day(visit.on)}",
    )


def _uncounted(row: OnShelf) -> tuple[str, ...]:
    return row.bottle.number, row.bottle.place or "-", _left(row), row.bottle.line


def walks_text(sheets: Sequence[Sheet], width: int) -> str:
    """Every walk, one a row: when, along where, how far it is or when it ended."""
    if not sheets:
        return 'No walk was started yet: stockroom walk "Jan-A2" --places A2'
    heads = [PRACTICE] if sheets[0].practice else []
    rows = [_walk_row(sheet) for sheet in sheets]
    return "\n".join([*heads, *columns(rows, min(width, WIDEST), indent=0)])


def _walk_row(sheet: Sheet) -> tuple[str, ...]:
    walk = sheet.walk
    state = f"ended {walk.ended.isoformat()} by {walk.ended_by}" if walk.ended else "open"
    # of a finished one nobody asks here what was left
    told = progress(sheet).rsplit(", ", 1)[0] if walk.ended else progress(sheet)
    along = ", ".join(walk.places) or "every shelf"
    return walk.name, walk.started.isoformat(), walk.by, along, f"{state}: {told}"
