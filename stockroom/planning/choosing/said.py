"""What was said against bottles: taken back of those used after all, told of those given up."""

from __future__ import annotations

import re
from collections.abc import Container, Iterable, Mapping

from stockroom.planning.choosing.serve import Shares
from stockroom.planning.wants import Want

Holders = Mapping[str, Mapping[int, Want]]
"""The wants served from each bottle."""


def explain(moved: Iterable[tuple[Want, Shares]], holders: Holders) -> None:
    """Say of whoever was moved what became of the bottle it would have had in its turn."""
    for want, had in moved:
        now = {promise.bottle for promise in want.promises}
        forget(want, now)
        for number, _ in had:
            others = [w for k, w in holders[number].items() if k != id(want)]
            if number in now:
                continue
            last = max(others, key=lambda w: w.need.rank, default=None)
            why = (
                f"kept for {last.ref}, which nothing else will serve" if last
                else f"not opened: {', '.join(sorted(now))} will do"
            )  # fmt: skip
            want.passed_over.append((number, why))


def forget(want: Want, numbers: Container[str]) -> None:
    """Take back what was said against bottles that are used after all."""
    want.passed_over = [said for said in want.passed_over if said[0] not in numbers]
    close = re.compile(r" in (\S+): too close to call")
    want.reasons = [
        words for words in want.reasons
        if not (found := close.search(words)) or found[1] not in numbers
    ]  # fmt: skip
