"""Prove the store: ledger, balances, parents, days, guards and the file itself."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import show, show_done, width
from stockroom.cli.shared import of


def verify(
    ctx: typer.Context,
    quick: Annotated[
        bool, typer.Option("--quick", help="Leave out the look at every page of the file.")
    ] = False,
    afresh: Annotated[
        bool, typer.Option("--afresh", help="Keep the balances by the entries again (--by).")
    ] = False,
) -> None:
    """Prove that the store holds together, from its first entry on; nothing is changed.

    With --afresh, the balances kept beside the entries are reckoned anew from them, no more.

    Leaves with 1 when something is to be mended. Example: stockroom verify
    """
    from stockroom.reports.verify_text import Looked, verify_json, verify_text
    from stockroom.service.verify import keep_afresh
    from stockroom.service.verify import verify as prove

    shared = of(ctx)
    if afresh:
        done = keep_afresh(shared.path, today=shared.today, by=shared.initials)
        show_done(shared, done)
        return
    found = prove(shared.path, quick=quick)
    held = Looked(found.bottles, found.entries, found.quick, found.practice)
    show(
        shared,
        lambda: verify_text(found.faults, held, width()),
        lambda: verify_json(found.faults, held),
    )
    if not all(fault.remark for fault in found.faults):
        raise typer.Exit(1)
