"""The lines of a recipe in words, and what changed from one version of it to the next."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from stockroom.planning.facts import TOLERANCE, Facts, Recipe, Requirement
from stockroom.reports.words import amount, counted, raised


@dataclass(frozen=True, slots=True)
class Line:
    """One line: what, how much for what, how close in strength, how fresh, and what to mind."""

    number: int
    what: str
    key: str
    size: str
    closeness: str
    fresh: str
    note: str


def lines_of(known: Facts, recipe: Recipe) -> tuple[Line, ...]:
    """The lines of a recipe in their order."""
    return tuple(_line(known, each) for each in recipe.requirements)


def _line(known: Facts, need: Requirement) -> Line:
    line = known.lines[need.line]
    notes = [need.note, f"never kept: {line.never_kept}" if line.never_kept else ""]
    return Line(
        number=need.number,
        what=raised(need.line),
        key=need.line,
        size=_size(known, need),
        closeness="; ".join(_close(known, need)),
        fresh=_fresh(need),
        note=raised("; ".join(note for note in notes if note)),
    )


def _size(known: Facts, need: Requirement) -> str:
    size = f"{amount(need.amount, known.lines[need.line].kind)} per {need.per}"
    return size if need.spare else f"{size}, a stand-by with no spare"


def _close(known: Facts, need: Requirement) -> Iterator[str]:
    """How near its strength must be; nothing for what has no strength to be near to."""
    if need.lowest is None and known.lines[need.line].strength is None:
        return
    guessed = ", as nobody said" if need.closeness_guessed else ""
    within = TOLERANCE[need.closeness] if need.tolerance is None else need.tolerance
    if need.lowest != need.highest:
        yield f"anything from {raised(need.strength_text)}"
    elif within is None:
        yield f"{need.closeness}: any strength will do"
    else:
        yield f"{need.closeness}{guessed}: within {100 * within:.3g} %"
    if need.may_differ is not None:
        yield f"may differ by {100 * need.may_differ:.3g} % if the strength found is printed"
    if need.found_within_days is not None:
        yield f"found within {counted(need.found_within_days, 'day')}"


def _fresh(need: Requirement) -> str:
    if need.fresh:
        return "made the same morning"
    if need.freshest_days is not None:
        return f"at most {counted(need.freshest_days, 'day')} old"
    return ""


def changes_between(known: Facts, before: Recipe | None, after: Recipe) -> tuple[str, ...]:
    """What a version changed, a sentence each; none for the first there is."""
    if before is None:
        return ()
    return tuple(raised(each) for each in _changes(known, before, after))


def _changes(known: Facts, before: Recipe, after: Recipe) -> Iterator[str]:
    old, new = _said(known, before), _said(known, after)
    for what in dict.fromkeys([*old, *new]):
        if what not in new:
            yield f"{what}: no longer there (was: {old[what]})"
        elif what not in old:
            yield f"{what}: new: {new[what]}"
        elif old[what] != new[what]:
            yield f"{what}: {old[what]} → {new[what]}"


def _said(known: Facts, recipe: Recipe) -> dict[str, str]:
    """All a version says, by what it says it of; what stands there twice is numbered."""
    said = {
        "title": recipe.title,
        "handling": recipe.handling,
        "never kept": recipe.never_kept,
        "clean-up and waste": recipe.waste,
        "risk assessment": recipe.assessment,
    }
    said |= {f"never with {bar.substance}": bar.reason for bar in recipe.bars}
    said |= {
        f"{swap.instead} in place of {swap.line}": swap.note or f"mass × {swap.factor}"
        for swap in recipe.swaps
    }
    for line in lines_of(known, recipe):
        name = line.what if line.what not in said else f"{line.what} (line {line.number})"
        parts = (line.size, line.closeness, line.fresh, line.note)
        said[name] = ", ".join(part for part in parts if part)
    return {what: text for what, text in said.items() if text}
