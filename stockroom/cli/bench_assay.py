"""An assay as a label prints it: "99.9 ± 0.1 %", "≥97 %", "min. 99.5"."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from stockroom.cli.bench import PER_CENT, figure
from stockroom.errors import BadInput

if TYPE_CHECKING:
    from stockroom.service.bench_task import Assay

_AT_LEAST = re.compile(r"\s*(?:≥|>=|=>|>|min(?:imum|\.)?|at least|not less than)\s*", re.IGNORECASE)
_LEAST_PER_CENT = 1.0


def assay_of(text: str | None, where: str = "--assay") -> Assay:
    """The per cent and how far off it may be; "at least" counts as the figure itself.

    Raises: BadInput for what is none, and for a fraction in the place of a per cent.
    """
    from stockroom.service.bench_task import Assay

    if text is None:
        return Assay()
    at_least = _AT_LEAST.match(text)
    written = text[at_least.end() :] if at_least else text
    number, _, within = re.sub(r"\+/?-", "±", written).partition("±")
    percent = figure(number, where, like="97, or 99.9 ± 0.1", units=PER_CENT)
    # "0.97" is 97 % to whoever wrote it, and would make a hundredfold solution
    if percent is not None and percent <= _LEAST_PER_CENT:
        raise BadInput(
            f"{where} {text!r}: {percent:g} % of it is the substance?",
            f"Write a per cent, as {100 * percent:g}.",
        )
    spread = figure(within, where, like="99.9 ± 0.1", units=PER_CENT) if within.strip() else None
    return Assay(percent, spread or 0.0, at_least=at_least is not None)
