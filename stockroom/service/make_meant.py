"""The make that was read off a page, found again in the plan as it is by now."""

from __future__ import annotations

from datetime import date

from stockroom.errors import NotAllowed
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt


def make_now(path: StoreAt, number: str, meant: str, *, as_at: date) -> str:
    """The number that the make shown under `number` has now.

    `meant` is what stood beside it (`Make.wanted`). Raises: NotAllowed where the plan has no
    such make any more: another make under the same number is never taken for it.
    """
    wanted = number.strip().upper()
    plan = known_and_planned(path, as_at=as_at)[1]
    alike = [make.id for make in plan.makes if make.wanted == meant]
    if alike:
        # its own number first, should two makes be alike
        return wanted if wanted in alike else alike[0]
    same = next((make.wanted for make in plan.makes if make.id == wanted), "nothing")
    raise NotAllowed(
        f"The plan changed: {wanted[:20]} was {meant[:120]}, and is now {same}.",
        "Look at the week again: what is to be made has its number there.",
    )
