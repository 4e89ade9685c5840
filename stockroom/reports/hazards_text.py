"""The hazards of one thing: what is on the label first, then why, then what to look up."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from stockroom.planning.decisions import Plan
from stockroom.reports.json_plan import fresh_json
from stockroom.reports.sheet import PRACTICE, page, section, wrap
from stockroom.reports.words import raised, rounded
from stockroom.safety.cautions import HOUSE_LINE
from stockroom.safety.clp import NOT_ENTERED
from stockroom.safety.grounds import HOUSE, MARKS, MEMORY, OURS, weakest
from stockroom.safety.hazards import Hazards, SheetText
from stockroom.safety.pictograms import PICTOGRAMS
from stockroom.safety.precautions import NUMBERING, PRECAUTIONS
from stockroom.safety.statements import Statement, statement

_NOTHING = "No statement follows from the limits held."
_START = "A starting point, worked out from limits"
_SEEN = f"{_START} seen in print."
_REMEMBERED = f"{_START} of which some are from memory: check them against the regulation."
_OWN = f"{_START} of which some are the house's own."


def hazards_text(found: Hazards, width: int) -> str:
    """Signal word, statements and symbols; the limits that decide; notes; the house line."""
    head = raised(f"{found.what}: hazards")
    top = "\n".join([PRACTICE, head] if found.practice else [head])
    parts = [
        top,
        _label(found, width),
        section("DECIDED BY", [wrap(text, width, indent=2) for text in _decided_by(found)]),
        section("NOTES", [wrap(text, width, indent=2) for text in _notes(found)]),
        _precautions(found, width),
        section("CAUTIONS", [wrap(text, width, indent=2) for text in found.cautions]),
        section("BEFORE THAT", [wrap(_sheet_line(one), width, indent=2) for one in found.older]),
        section("SOURCES", [wrap(text, width, indent=2) for text in _sources(found)]),
        wrap(how_good(found), width, hang=0),
    ]
    return page(parts)


def hazard_grounds(found: Hazards) -> list[tuple[str, list[str]]]:
    """Why it is classed so: each heading with its lines, headings without any left out."""
    parts = [
        ("Decided by", _decided_by(found)),
        ("Notes", _notes(found)),
        ("Before that", [_sheet_line(one) for one in found.older]),
        ("Sources", _sources(found)),
    ]
    return [(title, lines) for title, lines in parts if lines]


def how_good(found: Hazards) -> str:
    """How good the limits are that were weighed, and what comes first in any case."""
    return f"{_how_good(found)} {HOUSE_LINE}".strip()


def _label(found: Hazards, width: int) -> str:
    if not found.entered:
        return wrap(f"Hazard text {NOT_ENTERED}.", width)
    if found.sheet:
        return "\n".join(
            [
                wrap(f"{found.sheet.signal_word or 'No signal word'}  {_symbols(found)}", width),
                wrap(found.sheet.statements, width, indent=2),
                wrap(_sheet_line(found.sheet), width, indent=2),
            ]
        )
    lines = [f"{code}  {_wording(found, code)}" for code in _codes(found)]
    first = f"{found.signal_word or 'No signal word'}  {_symbols(found)}".rstrip()
    return "\n".join(
        [first, *(wrap(line, width, indent=2, hang=8) for line in lines or [_NOTHING])]
    )


def _symbols(found: Hazards) -> str:
    return ", ".join(f"{code} {PICTOGRAMS[code]}" for code in found.pictograms)


def _codes(found: Hazards) -> tuple[str, ...]:
    return (*found.statements, *found.supplemental)


def _wording(found: Hazards, code: str) -> str:
    return _said(statement(code), found.worked_out.allergens)


def _said(each: Statement, allergens: tuple[str, ...]) -> str:
    named = ", ".join(allergens)
    return each.text.replace("(name of sensitising substance)", named) if named else each.text


def _sheet_line(sheet: SheetText) -> str:
    why = f": {sheet.why}" if sheet.why else ""
    return f"from {sheet.sheet}, typed by {sheet.by} on {sheet.entered_on}{why}"


def _deciding(found: Hazards) -> list[str]:
    if found.sheet:
        return [f"the supplier's sheet: {found.sheet.sheet}"]
    return list(found.worked_out.deciding)


def _decided_by(found: Hazards) -> list[str]:
    """The deciding lines, each with the mark of what it rests on that is known least well."""
    if found.sheet:
        return _deciding(found)
    behind: dict[str, list[str]] = {}
    for each in found.known:
        behind.setdefault(each.statement, []).append(each.how)
    return [
        f"{text} ({MARKS[weakest(behind.get(text.partition(':')[0], ()))]})"
        for text in _deciding(found)
    ]


def _sources(found: Hazards) -> list[str]:
    """Each source once, after the statements that rest on it."""
    if found.sheet:
        return []
    cited = dict(found.sources)
    if not found.known:
        # that nothing follows rests on limits too
        return [_cited(each.how, cited[each.source]) for each in found.worked_out.weighed]
    behind: dict[tuple[bool, str], list[str]] = {}
    for each in found.known:
        behind.setdefault((each.how == HOUSE, each.source), []).append(each.statement)
    return [
        f"{', '.join(codes)}: {_cited(HOUSE if own else '', cited[source])}"
        for (own, source), codes in behind.items()
    ]


def _cited(how: str, citation: str) -> str:
    if how != HOUSE:
        return citation
    return f"the house's own row, {citation or 'no source written'}"


def _how_good(found: Hazards) -> str:
    """Whether the limits weighed were seen, remembered or the house's own, in one sentence."""
    hows = [each.how for each in found.worked_out.weighed]
    if found.sheet or not hows:
        return ""
    if weakest(how for how in hows if how != OURS) == MEMORY:
        return _REMEMBERED
    return _OWN if HOUSE in hows else _SEEN


def _notes(found: Hazards) -> list[str]:
    if not found.entered:
        # how strong nothing is known of tells nobody anything
        return list(found.worked_out.notes)
    notes = [f"strength: {found.strength}"] if found.strength else []
    notes += [f"{c.substance} {c.percent:.3g} % by mass at most" for c in found.contents]
    notes += found.notes
    notes += found.worked_out.notes if found.sheet is None else ()
    if found.missing_from_sheet:
        listed = ", ".join(found.missing_from_sheet)
        notes.append(f"worked out from limits, and not in the sheet's text: {listed}; compare them")
    return notes


def _precautions(found: Hazards, width: int) -> str:
    if found.sheet:
        return ""
    rows = [
        wrap(f"{code}  {PRECAUTIONS[code].text}", width, indent=2, hang=4)
        for code in found.worked_out.precautions
    ]
    return section(f"PRECAUTIONS, numbers of {NUMBERING}", rows)


def hazards_json(found: Hazards) -> dict[str, Any]:
    """The same as data; `statements` are H codes, `supplemental` EUH codes, `wording` their text.

    `basis` is "supplier's sheet", "worked out", or "not entered: look it up". `known` says of
    each statement how it is known (a seen, b worked out, c from memory, house, ours, sheet)
    and by which source; `sources` are their citations.
    """
    codes = (*_codes(found), *found.worked_out.precautions)
    top = {
        "practice": found.practice,
        "what": found.what,
        "bottle": found.bottle or None,
        "line": found.line or None,
        "strength": found.strength,
        "first": HOUSE_LINE,
    }
    return (
        top
        | label_json(found)
        | {
            "sheet": sheet_json(found.sheet) if found.sheet else None,
            "older_sheets": [sheet_json(one) for one in found.older],
            "contents": [
                {"substance": c.substance, "percent_ww": rounded(c.percent, 4), "note": c.note}
                for c in found.contents
            ],
            "wording": {code: _text(found, code) for code in codes},
            "sources": dict(found.sources),
            "notes": _notes(found),
            "cautions": list(found.cautions),
            "worked_out": {
                "statements": list(found.worked_out.statements),
                "supplemental": list(found.worked_out.supplemental),
                "signal_word": found.worked_out.signal_word,
                "pictograms": list(found.worked_out.pictograms),
            },
        }
    )


def label_json(found: Hazards) -> dict[str, Any]:
    """What a make or a label needs of it: codes, symbols, signal word, and what decided."""
    return {
        "basis": _basis(found),
        "signal_word": found.signal_word,
        "statements": list(found.statements),
        "supplemental": list(found.supplemental),
        "pictograms": list(found.pictograms),
        "precautions": [] if found.sheet else list(found.worked_out.precautions),
        "classes": [] if found.sheet else list(found.worked_out.classes),
        "deciding": _deciding(found),
        "known": [
            {"statement": each.statement, "how": each.how, "source": each.source}
            for each in found.known
        ],
        "not_entered": list(found.worked_out.unknown),
        "notes": _notes(found),
    }


def fresh_with_hazards(plan: Plan, found: Mapping[str, Hazards]) -> dict[str, Any]:
    """What to make up as data, each make with the hazards its label will want, by line."""
    data = fresh_json(plan)
    for make, shown in zip(plan.makes, data["makes"], strict=True):
        shown["hazards"] = label_json(found[make.line]) | {"first": HOUSE_LINE}
    return data


def _basis(found: Hazards) -> str:
    if found.sheet:
        return "supplier's sheet"
    return "worked out" if found.entered else NOT_ENTERED


def _text(found: Hazards, code: str) -> str:
    return PRECAUTIONS[code].text if code in PRECAUTIONS else _wording(found, code)


def sheet_json(sheet: SheetText) -> dict[str, Any]:
    """A supplier's text as data."""
    return {
        "text": sheet.statements,
        "signal_word": sheet.signal_word,
        "sheet": sheet.sheet,
        "by": sheet.by,
        "entered_on": sheet.entered_on.isoformat(),
        "why": sheet.why,
    }
