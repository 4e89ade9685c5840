"""A finding: one thing a check noticed, with what to do about it.

Checks over many records return findings rather than stop at the first, so a
list with nine faults is mended in one sitting. The words more than one room must say alike
stand here too.
"""

from __future__ import annotations

from dataclasses import dataclass

DO_NOT_TOUCH = "do not open or move it; ask"
"""What every message about a bottle past its safety date says, and of peroxide. House choice.

It stands at the root because keeping and safety both say it and neither may see the other.
"""


@dataclass(frozen=True, slots=True)
class Finding:
    """What was noticed (`text`) about what (`subject`: a bottle, booking or item)."""

    subject: str
    text: str


@dataclass(frozen=True, slots=True)
class Fault(Finding):
    """Something in a store that does not hold together, and how to mend it.

    `check` is the word for the kind of fault. A `remark` is worth knowing and wants no
    mending: it alone never makes a store out of order.
    """

    check: str
    mend: str
    remark: bool = False
