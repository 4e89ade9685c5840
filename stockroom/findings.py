"""A finding: one thing a check noticed, with what to do about it.

Checks over many records return findings rather than stop at the first, so a
list with nine faults is mended in one sitting.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Finding:
    """What was noticed (`text`) about what (`subject`: a bottle, booking or item)."""

    subject: str
    text: str
