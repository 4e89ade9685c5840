"""Hints in the words of the pages: commands become links to forms, options their fields.

The use cases speak of commands, since a hint must be something one can do. On a page one does
it with a form; what has none is left in the words of the command line, and says so.
"""

from __future__ import annotations

import json
import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from urllib.parse import parse_qsl, quote, urlencode

from stockroom.reports.pages.links import Piece, linked
from stockroom.web.forms.field import Form
from stockroom.web.forms.options import field_of
from stockroom.web.hint_words import ABOUT_ONE, ENTER, FLAGS, LABELS, PAGES, POSITIONAL

_QUOTED = r"\"[^\"]*\"|'[^']*'|…"
_BARE = r"[^\s;,:\"'`]+?(?=[.;,:`)]*(?:\s|$))"
# a word of prose ends what a command is given: names stand in quotes, numbers begin with a capital
_GIVEN = rf"(?: (?:{_QUOTED}|--[a-z][a-z-]*|(?![a-z–-]){_BARE}|[a-z_0-9]+=(?:{_QUOTED}|{_BARE})))"
_AFTER = rf"(?: --[a-z][a-z-]*(?: (?:{_QUOTED}|(?!-){_BARE}))?)"
_ROW = r"(?P<row>(?:add|change) [a-z_]+)"
_COMMAND = rf"`?stockroom (?:{_ROW}|(?P<name>[a-z]+(?:-[a-z]+)*))(?P<rest>(?:{_AFTER}|{_GIVEN})*)`?"
# the other side of a choice that the form offers anyway, but for another order's number
_OR = r"(?:,? or (?:--[a-z-]+(?![a-z-])(?! [A-Z])|\d{4}-\d\d-\d\d))?"
_ENTRY = r"[Pp]ut entry (?P<entry>\d+) right"
_OPTION = (
    r"(?P<verb>[Aa]dd )?--(?P<option>[a-z][a-z-]*)(?: (?:(?P<number>[A-Z]\d+)|[A-Z_]{4,}\b|…))?"
)
_FOUND = re.compile(rf"{_COMMAND}{_OR}|{_ENTRY}|{_OPTION}")
_WORD = re.compile(rf"--[a-z][a-z-]*|{_QUOTED}|[a-z_0-9]+='[^']*'|\S+")
_METAVAR = re.compile(r"[A-Z_]{2,}|…|\.\.\.")


@dataclass
class _Asked:
    """A command of a hint: what it is given, and its options with their values."""

    name: str
    given: list[str] = field(default_factory=list)
    options: dict[str, str] = field(default_factory=dict)


def hinted(text: str, form: Form | None = None, back: str = "") -> tuple[Piece, ...]:
    """A hint in pieces, some of them links. `form` is the one it was said of, `back` the page."""
    text = text.replace("an AMOUNT", "an amount")
    pieces = [each for each in _pieces(text, form, back) if each.text]
    if pieces and pieces[0].href:
        first = pieces[0]
        pieces[0] = Piece(first.text[0].upper() + first.text[1:], first.href)
    if form is not None:
        # a name beside a field is to be typed into it, not followed away from the form
        return tuple(pieces)
    return tuple(one for each in pieces for one in ((each,) if each.href else linked(each.text)))


def for_programs(text: str, form: Form | None = None) -> str:
    """A hint in the words of the API: a command is the request that does it, an option its key."""
    said = "".join(_for_program(each) for each in _pieces(text, form, "") if each.text)
    labels = {each.label: each.name for each in form.fields} if form else {}
    for label, name in ({label: name for name, label in LABELS.items()} | labels).items():
        said = said.replace(f"“{label}”", f'"{name}"')
    return said if said.startswith("stockroom ") else said[:1].upper() + said[1:]


def _for_program(piece: Piece) -> str:
    if not piece.href:
        return piece.text
    address, _, query = piece.href.partition("?")
    if not address.startswith("/do/"):
        return f"{piece.text} ({piece.href})"
    given = f" {json.dumps(dict(parse_qsl(query)), ensure_ascii=False)}" if query else ""
    return f"{piece.text} (POST /api{address}{given})"


def _pieces(text: str, form: Form | None, back: str) -> Iterator[Piece]:
    end = 0
    for found in _FOUND.finditer(text):
        yield Piece(text[end : found.start()])
        end = found.end()
        if found["name"] or found["row"]:
            name, _, table = (found["name"] or found["row"]).partition(" ")
            yield _of_command(found[0], _read(name, f"{table} {found['rest']}"), back)
        elif found["entry"]:
            yield _form_link("put-right", {"entry": found["entry"]}, back, words=found[0])
        else:
            yield _of_option(found, form, back)
    yield Piece(text[end:])


def _read(name: str, rest: str) -> _Asked:
    asked, option = _Asked(name), ""
    for word in _WORD.findall(rest):
        if word.startswith("--"):
            option = "" if word in FLAGS else word
            asked.options[word] = ""
        elif option:
            asked.options[option], option = word.strip("\"'"), ""
        else:
            asked.given.append(word.strip("\"'"))
    return asked


def _of_command(said: str, asked: _Asked, back: str) -> Piece:
    name = _form_name(asked)
    if name in POSITIONAL:
        return _form_link(name, _values(name, asked), back)
    named = [each for each in asked.given if not _METAVAR.fullmatch(each)]
    if asked.name in ABOUT_ONE and named:
        address, words = ABOUT_ONE[asked.name]
        return Piece(words.format(named[0]), address.format(quote(named[0])) + _cells(named[1:]))
    if asked.name in PAGES:
        address, words = PAGES[asked.name]
        return Piece(words, address)
    return Piece(f"{said.strip('`')} (at the command line)")


def _cells(given: list[str]) -> str:
    """What is known of a row to be added, as the question of its form's address."""
    cells = [(key, value.strip("'")) for key, _, value in (each.partition("=") for each in given)]
    known = [(key, value) for key, value in cells if value and not _METAVAR.fullmatch(value)]
    return f"?{urlencode(known)}" if known else ""


def _form_name(asked: _Asked) -> str:
    told = (
        ("lend", "--back", "lend-back"),
        ("unknown", "--is", "name-unknown"),
        ("order", "--cancel", "order-cancel"),
        ("order", "--put-off", "order-put-off"),
        ("cancel", "--undo", "cancel-undo"),
        ("destroyed", "--undo", "destroyed-undo"),
    )
    for command, option, form in told:
        if asked.name == command and option in asked.options:
            return form
    planned = len(asked.given) == 1 and re.fullmatch(r"O\d+", asked.given[0])
    return "order-planned" if asked.name == "order" and planned else asked.name


def _values(name: str, asked: _Asked) -> dict[str, str]:
    from stockroom.web.forms.table import BY_NAME

    values = dict(zip(POSITIONAL[name], asked.given, strict=False))
    for option, value in asked.options.items():
        meant = field_of(BY_NAME[name], option)
        if meant is not None and value:
            values[meant.name] = value
    return {key: value for key, value in values.items() if not _METAVAR.fullmatch(value)}


def _form_link(name: str, values: dict[str, str], back: str, words: str = "") -> Piece:
    query = values | ({"back": back} if back else {})
    address = f"/do/{name}" + (f"?{urlencode(query)}" if query else "")
    return Piece(words or ENTER[name].format(_about(name, values)), address)


def _about(name: str, values: dict[str, str]) -> str:
    if name == "put-right":
        return f"entry {values['entry']}" if "entry" in values else "an entry"
    kinds = ("bottle", "first", "booking", "order", "line", "recipe")
    return next((values[each] for each in kinds if each in values), "it")


def _of_option(found: re.Match[str], form: Form | None, back: str) -> Piece:
    option, number, verb = found["option"], found["number"] or "", found["verb"] or ""
    if option == "put-off" and number:
        return _form_link("order-put-off", {"order": number}, back)
    if option == "as-at":
        return Piece(f"{verb}the day at the top of the page")
    meant = field_of(form, f"--{option}") if form else None
    label = meant.label if meant else LABELS.get(option, "")
    if not label:
        return Piece(f"{found[0]} (at the command line)")
    done = "tick" if meant and meant.kind == "yes" else "fill in"
    said = (done.capitalize() if verb[:1].isupper() else done) + " " if verb else ""
    return Piece(f"{said}“{label}”" + (f" {number}" if number else ""))
