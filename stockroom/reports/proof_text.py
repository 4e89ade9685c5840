"""How near the best a family's makes are, as a person and as a program read it."""

from __future__ import annotations

from typing import Any

from stockroom.lots.objective import Cost
from stockroom.planning.proof import Proved
from stockroom.reports.sheet import PRACTICE, wrap
from stockroom.reports.words import counted


def proof_text(proof: Proved, width: int, *, practice: bool = False) -> str:
    """The lines, what they cost, and what could still be saved."""
    rows = [f"{counted(len(proof.lines), 'line')} made together: {', '.join(proof.lines)}"]
    rows.append(f"this plan: {counted(proof.makes, 'make')}, {_cost(proof.ours)}")
    rows.append(_verdict(proof))
    if proof.best.total < proof.ours.total * (1 - 1e-6):
        rows.append(f"the solver found one of {_cost(proof.best)}")
    return "\n".join([*([PRACTICE] if practice else []), *(wrap(row, width) for row in rows)])


def proof_json(proof: Proved, *, practice: bool = False) -> dict[str, Any]:
    """The same as data; minutes, and the gap as a fraction."""
    return {
        "practice": practice,
        "lines": list(proof.lines),
        "makes": proof.makes,
        "minutes": round(proof.ours.minutes, 3),
        "wasted_minutes": round(proof.ours.waste, 3),
        "over_minutes": round(proof.ours.over, 3),
        "total": round(proof.ours.total, 3),
        "best_found": round(proof.best.total, 3),
        "bound": round(proof.bound, 3),
        "gap": round(proof.gap, 6),
        "proved": proof.proved,
    }


def _verdict(proof: Proved) -> str:
    if proof.proved:
        return f"proved: {_least(proof)} (open gap 0 %)"
    return (
        f"not proved: {_least(proof)}, so at most {100 * proof.gap:.2f} % could be saved (open gap)"
    )


def _least(proof: Proved) -> str:
    # the days and the sharing are proved, and not who got which bottle
    return (
        "with the bottles given out as they are, no way of making these "
        f"costs less than {proof.bound:.1f} min"
    )


def _cost(cost: Cost) -> str:
    words = f"{cost.total:.1f} min: {cost.minutes:g} min hands-on"
    words += f", {cost.waste:.1f} min worth thrown away" if cost.waste >= 0.05 else ""
    return words + (f", {cost.over:g} min over the day's limit" if cost.over else "")
