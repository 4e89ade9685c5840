"""Questions about what stands on the shelves, and how it keeps: as the commands of their names."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Path, Query
from starlette.responses import Response

from stockroom.reports.diary_text import diary_json, diary_rows
from stockroom.reports.fades_text import fades_json
from stockroom.reports.hazards_text import hazards_json
from stockroom.reports.house_rules_text import rules_json
from stockroom.reports.learn_text import learn_json
from stockroom.reports.shelf_text import shelf_json
from stockroom.service import shelf as shelves
from stockroom.service.diary import story
from stockroom.service.fades import fading
from stockroom.service.hazards import hazards_of
from stockroom.service.house_rules import keeping_of
from stockroom.service.learn import learn as lesson_of
from stockroom.web.api import contract_shelf as keys
from stockroom.web.api.answering import Asking, Data, Day, Word, day, told

router = APIRouter(prefix="/api", tags=["On the shelf"])

Bottle = Annotated[str, Path(max_length=200, description="The number on its label, as S13.")]
Below = Annotated[
    list[Word],
    Query(default_factory=list, max_length=10, description="When is it below this? As 80 vol."),
]
Line = Annotated[str, Query(max_length=200, description="A stock line, by its name.")]


@router.get("/shelf", responses=told(keys.ShelfAnswer, "The bottles, in shelf order."))
def shelf(
    question: Asking,
    what: Annotated[
        str, Query(max_length=200, description="A place, a bottle, any name of a thing; else all.")
    ] = "",
    on: Day = "",
    known_on: Day = "",
) -> Response:
    """What stands where: bottles, how much is left, how good they are."""
    then, known = day(on, "on") or question.today, day(known_on, "known_on")

    def make() -> Data:
        today = question.today
        return shelf_json(shelves.shelf(question.path, what, on=then, known_on=known, today=today))

    return question.answer("shelf", (what, then, known), make)


@router.get("/diary/{bottle}", responses=told(keys.DiaryAnswer, "Its entries, oldest first."))
def diary(question: Asking, bottle: Bottle, known_on: Day = "") -> Response:
    """Every entry of a bottle with its number, as put-right asks for it."""
    known = day(known_on, "known_on")

    def make() -> Data:
        found = story(question.path, bottle, known)
        rows = list(diary_rows(found.diary.entries))
        number, item = found.diary.bottle, found.diary.line
        return diary_json(number, item, rows, practice=found.practice)

    return question.answer("diary", (bottle, known), make)


@router.get("/fades/{bottle}", responses=told(keys.FadesAnswer, "Its strength, and until when."))
def fades(
    question: Asking,
    bottle: Bottle,
    below: Below,
) -> Response:
    """How a bottle fades: its strength today, by which law, how warm it stood, until when."""

    def make() -> Data:
        found = fading(question.path, bottle, as_at=question.today, below=tuple(below))
        return fades_json(found)

    return question.answer("fades", (bottle, *below), make)


@router.get("/hazards", responses=told(keys.HazardsAnswer, "Statements, and what decided."))
def hazards(
    question: Asking,
    what: Annotated[str, Query(max_length=200, description="A bottle, a line or a substance.")],
    strength: Annotated[
        str | None, Query(max_length=200, description="Of a substance, as 0.5 mol/dm3.")
    ] = None,
) -> Response:
    """Hazard and precautionary statements at a strength, with the limit that decides."""

    def make() -> Data:
        return hazards_json(hazards_of(question.path, what, strength, as_at=question.today))

    return question.answer("hazards", (what, strength), make)


@router.get("/rule", responses=told(keys.RuleAnswer, "Its rules, and how they changed."))
def rule(question: Asking, line: Line) -> Response:
    """How a line keeps, by whose rule, and what was changed in it."""
    return question.answer("rule", (line,), lambda: rules_json(keeping_of(question.path, line)))


@router.get("/learn", responses=told(keys.LearnAnswer, "The rate found, and the life by it."))
def learn(
    question: Asking,
    what: Annotated[str, Query(max_length=200, description="A stock line, or a bottle, as S02.")],
    order: Annotated[int | None, Query(ge=0, le=2)] = None,
    to: Annotated[float | None, Query(gt=0, lt=100, description="Per cent of its label.")] = None,
    since: Day = "",
) -> Response:
    """How fast a line or a bottle fades by its own checks, and how long it keeps."""
    first = day(since, "since")

    def make() -> Data:
        found = lesson_of(
            question.path, what, order=order, to=to, since=first, as_at=question.today
        )
        return learn_json(found, practice=question.practice)

    return question.answer("learn", (what, order, to, first), make)
