"""The reading commands: plan, fresh, past, usage, buying, ready, why."""

from __future__ import annotations

from datetime import date
from typing import Annotated, Any, TypedDict

import typer

from stockroom.cli.paper import Paper, Print, form_of, paper_of, put_out
from stockroom.cli.printing import show, width
from stockroom.cli.shared import Shared, of
from stockroom.cli.tables import Bom, Csv, check_files, write_table
from stockroom.errors import BadInput
from stockroom.service.typed import day_or_none

From = Annotated[
    str | None,
    typer.Option("--from", metavar="DATE", help="First day; else the first of the term."),
]
To = Annotated[
    str | None, typer.Option("--to", metavar="DATE", help="Last day; else the last of the term.")
]

Cautious = Annotated[
    bool,
    typer.Option("--cautious", help="Count every strength at its lower 95 % limit, where known."),
]

SOLVER = 30.0
"""Seconds the solver has where nobody says. Our choice."""


def plan(
    ctx: typer.Context,
    start: From = None,
    end: To = None,
    cautious: Cautious = False,
    exact: Annotated[
        str | None,
        typer.Option(metavar="NAME", help="Prove the makes of this stock and all made from it."),
    ] = None,
    seconds: Annotated[
        float | None,
        typer.Option(metavar="N", help="With --exact: the solver's time, else 30."),
    ] = None,
    keep: Annotated[
        bool, typer.Option("--keep", help="Keep the term's plan, and give this copy a number.")
    ] = False,
) -> None:
    """The plan of the term: have, make, check, order, and what cannot be done.

    Example: stockroom plan --from 2027-01-25 --to 2027-01-29
    """
    from stockroom.reports.json_plan import plan_json
    from stockroom.reports.plan_text import plan_text
    from stockroom.service.plan import term_plan
    from stockroom.service.printed_plans import keep as keep_plan

    shared = of(ctx)
    _check_together(exact, seconds, {"--keep": keep, "--from": start, "--to": end})
    if exact is not None:
        return _prove(shared, exact, SOLVER if seconds is None else seconds, cautious=cautious)
    asked = _asked(shared, start, end)
    if keep:
        answer = keep_plan(shared.path, **asked, cautious=cautious, by=shared.initials)
    else:
        answer = term_plan(shared.path, **asked, cautious=cautious)
    show(shared, lambda: plan_text(answer, width()), lambda: plan_json(answer))


def fresh(
    ctx: typer.Context, start: From = None, end: To = None, cautious: Cautious = False
) -> None:
    """What to make up, by day, with its steps and cautions.

    Example: stockroom fresh --from 2027-01-25 --to 2027-01-29
    """
    from stockroom.reports.makes_text import fresh_text
    from stockroom.service.plan import to_make

    shared = of(ctx)
    answer = to_make(shared.path, **_asked(shared, start, end), cautious=cautious)

    def as_data() -> dict[str, Any]:
        from stockroom.reports.hazards_text import fresh_with_hazards
        from stockroom.service.hazards import hazards_of_makes

        return fresh_with_hazards(answer, hazards_of_makes(shared.path, answer))

    show(shared, lambda: fresh_text(answer, width()), as_data)


def past(
    ctx: typer.Context,
    on: Annotated[str | None, typer.Option(metavar="DATE", help="The day; else today.")] = None,
    cautious: Cautious = False,
    csv: Csv = None,
    bom: Bom = False,
) -> None:
    """What is past, weak, undated or unchecked on a day, and for which booking it matters.

    Example: stockroom past --on 2027-02-10
    """
    from stockroom.reports.files.csv_out import past_csv
    from stockroom.reports.json_plan import past_json
    from stockroom.reports.past_text import past_text
    from stockroom.service.plan import past_on

    shared = of(ctx)
    check_files(csv, bom=bom)
    today = shared.today
    day = day_or_none(on, "--on") or today
    answer = past_on(shared.path, as_at=today, on=day, cautious=cautious)
    if csv is not None:
        return write_table(shared, csv, "past", past_csv(answer, bom=bom))
    show(shared, lambda: past_text(answer, day, width()), lambda: past_json(answer, day))


def usage(
    ctx: typer.Context,
    start: From = None,
    end: To = None,
    cautious: Cautious = False,
    csv: Csv = None,
    bom: Bom = False,
) -> None:
    """What the term uses, by solution and in bought form.

    Example: stockroom usage
    """
    from stockroom.reports.files.csv_out import usage_csv
    from stockroom.reports.json_plan import usage_json
    from stockroom.reports.usage_text import usage_text
    from stockroom.service.plan import term_plan

    shared = of(ctx)
    check_files(csv, bom=bom)
    answer = term_plan(shared.path, **_asked(shared, start, end), cautious=cautious)
    if csv is not None:
        return write_table(shared, csv, "usage", usage_csv(answer, bom=bom))
    show(shared, lambda: usage_text(answer, width()), lambda: usage_json(answer))


def buying(
    ctx: typer.Context,
    cautious: Cautious = False,
    to: Print = None,
    paper: Paper = "A4",
    csv: Csv = None,
    bom: Bom = False,
) -> None:
    """What to order, by when, why, and whose money it is.

    Example: stockroom buying --csv buying.csv
    """
    from stockroom.reports.buying_text import buying_text
    from stockroom.reports.files.csv_out import buying_csv
    from stockroom.reports.json_plan import buying_json
    from stockroom.reports.paper.buying_sheet import BUYING, buying_sheet_of
    from stockroom.service.plan import term_plan

    shared = of(ctx)
    check_files(csv, bom=bom)
    answer = term_plan(shared.path, as_at=shared.today, cautious=cautious)
    if to is not None:
        # nothing is written where the other file could not be
        form_of(to), paper_of(paper)
    if csv is not None:
        table = buying_csv(answer, bom=bom)
        write_table(shared, csv, "buying", table, beside=to is not None)
    if to is None and csv is not None:
        return
    if to is not None:
        about = answer.start.isoformat()
        return put_out(shared, BUYING, buying_sheet_of(answer), about, to=to, paper=paper)
    show(shared, lambda: buying_text(answer, width()), lambda: buying_json(answer))


def ready(
    ctx: typer.Context,
    ref: Annotated[str, typer.Argument(metavar="BOOKING|DATE", help="K11, or 2027-03-23.")],
    cautious: Cautious = False,
) -> None:
    """Is everything good on the day: first line YES or NO, exit 1 for no.

    Example: stockroom ready K11
    """
    from stockroom.reports.json_plan import ready_json
    from stockroom.reports.ready_text import ready_text
    from stockroom.service.database import is_practice
    from stockroom.service.plan import ready as is_ready

    shared = of(ctx)
    today, practice = shared.today, is_practice(shared.path)
    answer = is_ready(shared.path, ref, as_at=today, cautious=cautious)
    show(
        shared,
        lambda: ready_text(answer, width(), practice=practice, cautious=cautious),
        lambda: ready_json(answer, as_at=today, practice=practice, cautious=cautious),
    )
    raise typer.Exit(0 if answer.ready else 1)


def why(
    ctx: typer.Context,
    ref: Annotated[
        str,
        typer.Argument(metavar="REF", help="What is meant: K15, K15.1, M14, O02, S10, a name."),
    ],
    instead: Annotated[
        str | None, typer.Option(metavar="NAME", help="Why not this: S10, a day, a pack.")
    ] = None,
    cautious: Cautious = False,
) -> None:
    """The reasons behind one line, in five lines or fewer.

    Example: stockroom why K11 --instead "hydrochloric acid"
    """
    from stockroom.reports.json_plan import why_json
    from stockroom.reports.ready_text import why_text
    from stockroom.service.database import is_practice
    from stockroom.service.plan import why as reasons_for

    shared = of(ctx)
    today, practice = shared.today, is_practice(shared.path)
    reasons = reasons_for(shared.path, ref, as_at=today, instead=instead, cautious=cautious)
    show(
        shared,
        lambda: why_text(reasons, practice=practice, cautious=cautious),
        lambda: why_json(ref, reasons, as_at=today, practice=practice, cautious=cautious),
    )


def _check_together(exact: str | None, seconds: float | None, others: dict[str, object]) -> None:
    """Pass for options that go together. Raises: BadInput, naming those that do not."""
    # what is left out without a word is taken to have been done
    if exact is None and seconds is not None:
        raise BadInput(
            f"--seconds {seconds:g} goes with --exact only, and there is none.",
            'Say what to prove: --exact "starch", or leave --seconds out.',
        )
    given = [name for name, value in others.items() if value is not None and value is not False]
    if exact is not None and given:
        raise BadInput(
            f'--exact "{exact}" does not go with {" and ".join(given)}: '
            "it proves makes of the whole term, and keeps no plan.",
            "Ask for one, then for the other.",
        )


def _prove(shared: Shared, name: str, seconds: float, *, cautious: bool) -> None:
    from stockroom.reports.proof_text import proof_json, proof_text
    from stockroom.service.database import is_practice
    from stockroom.service.proof import proof

    practice = is_practice(shared.path)
    told = proof(shared.path, name, seconds=seconds, as_at=shared.today, cautious=cautious)
    show(
        shared,
        lambda: proof_text(told, width(), practice=practice),
        lambda: proof_json(told, practice=practice),
    )


class _Asked(TypedDict):
    as_at: date
    start: date | None
    end: date | None


def _asked(shared: Shared, start: str | None, end: str | None) -> _Asked:
    """The day to look from and the period. Raises: BadDate; BadInput when it runs backwards."""
    first, last = day_or_none(start, "--from"), day_or_none(end, "--to")
    if first and last and last < first:
        raise BadInput(f"--to {last} is before --from {first}.", "Turn them round.")
    return _Asked(as_at=shared.today, start=first, end=last)
