"""What can hurt on a day: what stands before all else on its page, and beside what is set out."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping

from stockroom.planning.decisions import Answer
from stockroom.reports.paper.day import Part
from stockroom.reports.paper.day_class import DESTROY, HERE, MIX, Row
from stockroom.reports.paper.label_of import hazard_text
from stockroom.reports.words import named, raised
from stockroom.safety.hazards import Hazards

_WATER = "H4"
_EYES = frozenset({"H314", "H318"})
_PROTECTED = ("eye protection", "goggles", "gloves", "screen", "fume cupboard", "no flame")
_FIRST = (HERE, MIX, DESTROY)


def mind_first(parts: Iterable[Part]) -> tuple[str, ...]:
    """What has to be known before the list is read: hours, what is never kept, what to wear.

    In the words of the list, each once; none where nothing of the kind is in it.
    """
    found: dict[str, None] = {}
    rows = [row for part in parts for row in part.rows]
    for row in rows:
        if row.step in _FIRST:
            text = " ".join((_ended(row.what), *row.cautions))
            found[f"{text[0].upper()}{text[1:]}"] = None
    for row in rows:
        if row.step not in _FIRST:
            found.update(dict.fromkeys(_to_wear(row)))
    return tuple(found)


def _ended(text: str) -> str:
    return text if text.endswith(".") else f"{text}."


def _to_wear(row: Row) -> Iterator[str]:
    for each in row.cautions:
        if any(words in each.casefold() for words in _PROTECTED):
            yield f"{row.ref or row.booking}: {each}"


def harm_of(needs: Iterable[Answer], hazards: Mapping[str, Hazards]) -> tuple[str, ...]:
    """What each thing set out can do to whoever handles it, by its label or as worked out.

    All but what it does to water; nothing of what has none, or of which nothing is held.
    """
    row: list[str] = []
    for need in needs:
        for key in _drawn(need) or (need.line,):
            found = hazards.get(key)
            if found is None or not (found.sheet or found.entered):
                continue
            text = hazard_text(found, key)
            said = [
                f"{words} ({code})" if code else words
                for code, words in text.statements
                if (code and not code.startswith(_WATER)) or (not code and found.sheet)
            ]
            whose = f"{key} {named(need.item, '')}" if _drawn(need) else key
            if said:
                signal = f"{text.signal}: " if text.signal else ""
                row.append(raised(f"{whose}: {signal}{'; '.join(said)}."))
    return tuple(dict.fromkeys(row))


def for_eyes(needs: Iterable[Answer], hazards: Mapping[str, Hazards]) -> tuple[str, ...]:
    """One line that names all that can damage eyes for good; none where nothing can."""
    named_so = dict.fromkeys(
        f"{key} {named(need.item, '')}" if _drawn(need) else key
        for need in needs
        for key in _drawn(need) or (need.line,)
        if key in hazards
        and _EYES & {code for code, _ in hazard_text(hazards[key], key).statements}
    )
    if not named_so:
        return ()
    return (raised(f"Eye protection, can damage eyes for good: {'; '.join(named_so)}."),)


def _drawn(need: Answer) -> tuple[str, ...]:
    return tuple(dict.fromkeys(draw.bottle for draw in need.draws if draw.bottle))
