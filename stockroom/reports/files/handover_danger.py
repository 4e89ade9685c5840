"""What is dangerous as things stand today: told first, with what to type when it is put right."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence

from stockroom.findings import Finding
from stockroom.planning.decisions import Plan
from stockroom.reports.files.handover_parts import WHO, Job, Point
from stockroom.reports.words import raised

NAME = "Dangerous now, before anything else"

# the sentences of planning/notes.py and safety/neighbours.py, the worst first
_TIGHT = re.compile(r"^tight cap")
_BESIDE = re.compile(r"^stands beside (?P<others>.+?) in .*: move (?P<which>it|one|the other)$")
_PEROXIDE = re.compile(r"^safety date (?P<day>\S+) ")
_WARM = re.compile(r"^stands at .*fades .*: move it$")
_MOVES = ("it", "one", "the other")

UNKNOWN = "unknown"


def dangerous(plan: Plan) -> Point | None:
    """The point that stands first, boxed; None where nothing is known to be dangerous."""
    findings = dangers(plan)
    jobs = [_job(one, plan) for one in told_once(findings)]
    jobs += [
        Job(
            f"{one.bottle} {raised(one.decided_by)}: nobody knows what it is. Leave it closed and "
            "apart; never pour it away.",
            (f'stockroom unknown {one.bottle} --is "LINE" --evidence "TEXT" {WHO}',),
        )
        for one in plan.past
        if one.item == UNKNOWN
    ]
    return Point(NAME, jobs=tuple(jobs), boxed=True) if jobs else None


def dangers(plan: Plan) -> list[Finding]:
    """What the plan noticed that can hurt somebody, the worst first."""
    found = [note for note in plan.notes if _rank(note.text) < _SAFE]
    return sorted(found, key=lambda note: _rank(note.text))


_SAFE = 9


def _rank(text: str) -> int:
    if _TIGHT.match(text):
        return 0
    if beside := _BESIDE.match(text):
        return 1 + _MOVES.index(beside["which"])
    if _PEROXIDE.match(text):
        return 4
    return 5 if _WARM.match(text) else _SAFE


def told_once(findings: Sequence[Finding]) -> Iterable[Finding]:
    """Each of them, but of two that stand wrongly together only the one with most others."""
    rows = [(note, _others(note)) for note in findings]
    covered: set[frozenset[str]] = set()
    # by rank still, since a sort keeps the order of equals
    rows.sort(key=lambda row: (_rank(row[0].text), -len(row[1])))
    for note, others in rows:
        pairs = {frozenset((note.subject, other)) for other in others}
        if pairs and pairs <= covered:
            continue
        covered |= pairs
        yield note


def _others(note: Finding) -> list[str]:
    beside = _BESIDE.match(note.text)
    return re.split(r", | and ", beside["others"]) if beside else []


def _job(note: Finding, plan: Plan) -> Job:
    number, text = note.subject, raised(f"{note.subject} {note.text}.")
    if _TIGHT.match(note.text):
        return Job(text, (f"stockroom shelf {number}",))
    safety = _PEROXIDE.match(note.text)
    if safety is None:
        return Job(text, (f"stockroom move {number} PLACE {WHO}",))
    # past its day it is not to be opened, and so not to be tested
    if safety["day"] < plan.as_at.isoformat():
        return Job(text, (f"stockroom shelf {number}",))
    test = f'stockroom tested {number} --peroxide "NUMBER mg/kg" {WHO}'
    return Job(f"{text} Test it before that day.", (test,))
