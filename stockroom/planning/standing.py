"""Where bottles stand: beside what they must not, under a tight cap, past a safety date."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping

from stockroom.findings import DO_NOT_TOUCH, Danger, DangerKind, Finding
from stockroom.keeping.verdict import Verdict
from stockroom.planning.facts import Bottle, Line, Place
from stockroom.planning.numbers import natural
from stockroom.safety.neighbours import (
    Stands,
    kinds_of,
    not_checked,
    tight_caps,
    wrong_neighbours,
)


def standing_there(bottles: Iterable[Bottle]) -> list[Bottle]:
    """Every bottle that stands somewhere with something in it, by number."""
    # an empty bottle waits to be washed and is no danger to anybody
    here = (b for b in bottles if b.left and not b.record.gone and not b.record.not_found)
    return sorted(here, key=lambda bottle: natural(bottle.number))


def where_things_stand(
    bottles: Iterable[Bottle], lines: Mapping[str, Line], places: Iterable[Place]
) -> list[Finding]:
    """Wrong neighbours, groups without a rule, and tight caps where gas is made."""
    here, meant = standing_there(bottles), {place.name: place.meant_for for place in places}
    stands = [_stands(one, lines[one.line], meant) for one in here if one.place]
    return [
        *wrong_neighbours(stands),
        *not_checked(_pairs(stands)),
        *tight_caps((b.number, b.cap, lines[b.line].vented_cap) for b in here),
    ]


def past_safety_date(number: str, judged: Verdict) -> Danger:
    """The danger of a bottle that was judged past its safety date, and what must be said of it."""
    text = f"safety date {judged.good_until} ({judged.decided_by}): past it, {DO_NOT_TOUCH}"
    return Danger(number, text, DangerKind.SAFETY_DATE, day=judged.good_until)


def _stands(bottle: Bottle, line: Line, meant: Mapping[str, str]) -> Stands:
    kinds = kinds_of(line.substance, line.storage_group)
    return Stands(bottle.number, kinds, bottle.place, meant.get(bottle.place, ""))


def _pairs(stands: list[Stands]) -> Iterator[tuple[str, str, str]]:
    """Each bottle with each group of its place, its own and the place's among them."""
    there: dict[str, set[str]] = {}
    for each in stands:
        there.setdefault(each.place, set()).update(each.kinds, {each.meant_for})
    for each in stands:
        for kind in each.kinds:
            yield from ((each.bottle, kind, other) for other in sorted(there[each.place]))
