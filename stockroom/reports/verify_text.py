"""What proving a store found: one line when all is well, else each fault and how to mend it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from stockroom.findings import Fault
from stockroom.reports.sheet import PRACTICE, wrap
from stockroom.reports.words import counted

_HEADINGS = {
    "layout": "Layout",
    "damage": "The file itself",
    "guards": "Guards of the ledger",
    "orphans": "Rows that point nowhere",
    "cells": "Cells nobody can read",
    "gaps": "Entries that are gone",
    "entries": "Bottles without an entry",
    "kept": "Kept balances",
    "balance": "Balances",
    "days": "Days",
    "put right": "Put right",
    "parents": "Made from",
    "references": "Bookings and orders",
    "shelf": "The shelf as read",
    "full": "Fuller than full",
    "clock": "Clock",
}


# a row of its own, because what was proved is the store's, and reports know no store
@dataclass(frozen=True, slots=True)
class Looked:
    """How much was looked at; `quick` without the pages of the file."""

    bottles: int
    entries: int
    quick: bool = False
    practice: bool = False


def verify_text(faults: Sequence[Fault], looked: Looked, width: int) -> str:
    """Whether the store holds together, with every fault under the heading of its kind."""
    noun = "entry" if looked.entries == 1 else "entries"
    held = f"{counted(looked.bottles, 'bottle')}, {looked.entries} {noun}"
    wrong = [fault for fault in faults if not fault.remark]
    left_out = " The pages of the file were not looked at (--quick)." if looked.quick else ""
    first = f"Not in order: {counted(len(wrong), 'finding')}" if wrong else "All is well"
    lines = [wrap(f"{first}: {held}.{left_out}", width)]
    for check, heading in _HEADINGS.items():
        of_kind = [fault for fault in faults if fault.check == check]
        remark = " (worth knowing)" if of_kind and all(fault.remark for fault in of_kind) else ""
        lines += ["", f"{heading}{remark}"] if of_kind else []
        for fault in of_kind:
            lines.append(wrap(f"{fault.subject}: {fault.text}.", width, indent=2))
            lines.append(wrap(f"→ {fault.mend}", width, indent=4))
    return "\n".join([PRACTICE, *lines] if looked.practice else lines)


def verify_json(faults: Sequence[Fault], looked: Looked) -> dict[str, Any]:
    """The same as data; `well` is what the exit code says."""
    return {
        "well": all(fault.remark for fault in faults),
        "practice": looked.practice,
        "bottles": looked.bottles,
        "entries": looked.entries,
        "quick": looked.quick,
        "findings": [
            {
                "check": fault.check,
                "subject": fault.subject,
                "text": fault.text,
                "mend": fault.mend,
                "remark": fault.remark,
            }
            for fault in faults
        ],
    }
