"""What is dangerous as things stand today: told first, with what to type when it is put right."""

from __future__ import annotations

from stockroom.findings import Danger, DangerKind, Moves
from stockroom.planning.decisions import Plan
from stockroom.reports.files.handover_parts import WHO, Job, Point
from stockroom.reports.words import raised
from stockroom.safety.neighbours import told_once

NAME = "Dangerous now, before anything else"

UNKNOWN = "unknown"


def dangerous(plan: Plan) -> Point | None:
    """The point that stands first, boxed; None where nothing is known to be dangerous."""
    jobs = [_job(one, plan) for one in told_once(dangers(plan))]
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


def dangers(plan: Plan) -> list[Danger]:
    """What the plan noticed that can hurt somebody, the worst first."""
    return sorted((note for note in plan.notes if isinstance(note, Danger)), key=_rank)


def _rank(danger: Danger) -> tuple[int, int, int]:
    kind = list(DangerKind).index(danger.kind)
    return kind, list(Moves).index(danger.moves), -len(danger.others)


def _job(danger: Danger, plan: Plan) -> Job:
    number, text = danger.subject, raised(f"{danger.subject} {danger.text}.")
    if danger.kind is DangerKind.SAFETY_DATE and danger.day and danger.day >= plan.as_at:
        test = f'stockroom tested {number} --peroxide "NUMBER mg/kg" {WHO}'
        return Job(f"{text} Test it before that day.", (test,))
    # past its day it is not to be opened, and so not to be tested
    if danger.kind in (DangerKind.TIGHT, DangerKind.SAFETY_DATE):
        return Job(text, (f"stockroom shelf {number}",))
    goes = danger.others[0] if danger.moves is Moves.OTHER and danger.others else number
    return Job(text, (f"stockroom move {goes} PLACE {WHO}",))
