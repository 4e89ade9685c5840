"""Hints on a page: commands are links to forms and pages, options the labels of fields."""

from __future__ import annotations

import ast
import itertools
from collections.abc import Iterator
from pathlib import Path

import pytest

from stockroom.web.forms.table import BY_NAME
from stockroom.web.hint_words import ABOUT_ONE, ENTER, PAGES, POSITIONAL
from stockroom.web.hints import for_programs, hinted

SERVICE = Path(__file__).parents[2] / "stockroom" / "service"

COMMAND_LINE = frozenset(
    "backup hand-out hazards learn logger move-house new restore verify walk"
    " dilute strength titrate weigh".split()
)
"""Commands whose words stay: sums at the bench, files, and the store itself."""


def _links(text: str, form: str = "", back: str = "") -> dict[str, str]:
    pieces = hinted(text, BY_NAME.get(form), back)
    return {piece.text: piece.href for piece in pieces if piece.href}


def _words(text: str, form: str = "") -> str:
    return "".join(piece.text for piece in hinted(text, BY_NAME.get(form)))


@pytest.mark.parametrize(
    ("hint", "words", "address"),
    [
        ("Count it: stockroom count B06 …", "enter a count of B06", "/do/count?bottle=B06"),
        (
            "stockroom turned-up B28 --place …",
            "Enter that B28 turned up",
            "/do/turned-up?bottle=B28",
        ),
        ("stockroom look S03 --good, or --bad.", "Enter a look at S03", "/do/look?bottle=S03"),
        (
            "Is it wanted? stockroom cancel K06 --undo --why …",
            "take the cancelling of K06 back",
            "/do/cancel-undo?booking=K06",
        ),
        (
            "if twice, stockroom put-right 12 --why twice.",
            "put entry 12 right",
            "/do/put-right?entry=12&why=twice",
        ),
        (
            'Say what: stockroom order "silver nitrate" 1 "100 g" --price 9.60',
            "enter an order of silver nitrate",
            "/do/order?line=silver+nitrate&packs=1&size=100+g&price=9.60",
        ),
        (
            "Named by evidence: stockroom unknown B52 --is LINE --evidence …;",
            "name B52 by evidence",
            "/do/name-unknown?bottle=B52",
        ),
        ("stockroom order --cancel P01", "Cancel P01", "/do/order-cancel?order=P01"),
        ("stockroom order O02", "Enter that O02 was ordered", "/do/order-planned?order=O02"),
        ("See stockroom on-order.", "term's buying", "/buying"),
        ("stockroom why K15", "Why K15", "/why?ref=K15"),
        ("stockroom diary B06 lists them.", "The page of B06", "/bottle/B06"),
        ('stockroom rule "starch 0.5 % w/v"', "The rules of starch 0.5 % w/v", "/rules?line="),
        ("If it is new: stockroom add lines item='blue ink'", "add to lines", "?item=blue+ink"),
        ("Else put entry 7 right.", "put entry 7 right", "/do/put-right?entry=7"),
    ],
)
def test_a_command_is_a_link_filled_in(hint: str, words: str, address: str) -> None:
    links = _links(hint)
    assert address in links[words]


def test_a_link_leads_back_to_the_page_it_stood_on() -> None:
    (address,) = _links("stockroom count B06 …", back="/shelf?what=A2").values()
    assert address == "/do/count?bottle=B06&back=%2Fshelf%3Fwhat%3DA2"


@pytest.mark.parametrize(
    ("form", "hint", "words"),
    [
        ("lend", 'Add --to "the physics store".', 'Fill in “To whom” "the physics store".'),
        ("count", "confirm with --sure", "confirm with “Keep it though it is odd”"),
        ("make", "Name another bottle with --from.", "with “Made from the bottles”."),
        ("lend-back", "Say which with --from.", "with “From whom”."),
        ("book", "Add --dept CH.", "Fill in “Whose money” CH."),
        ("book", "Add --keep-closed to keep it.", "Tick “Keep it though the house is closed"),
        ("put-right", "One word is enough: --why …", "One word is enough: “What was meant”"),
        ("order-put-off", "Add --expected DATE.", "Fill in “Expected now on”."),
        ("shift", "say with --as-at which day", "say with the day at the top of the page which"),
        ("draw", "Add --by T1", "Fill in “Initials” T1"),
    ],
)
def test_an_option_is_the_label_of_its_field(form: str, hint: str, words: str) -> None:
    assert words in _words(hint, form)


def test_the_nearest_names_are_links_but_beside_a_field_they_are_to_be_typed() -> None:
    assert _links("Nearest: S09; K19.") == {"S09": "/bottle/S09", "K19": "/day/K19"}
    assert _links("Nearest: S09; K19.", form="draw") == {}


def test_what_has_no_page_says_where_it_is_done() -> None:
    assert _words("Put it back: stockroom restore FILE.") == (
        "Put it back: stockroom restore FILE (at the command line)."
    )
    assert _words("Add --accept-gaps.") == "Add --accept-gaps (at the command line)."


def test_plain_words_stay_as_they_are() -> None:
    for said in ("Nearest: S09; S19; B09.", "Check the year.", "", "a -- b, 5-6 and stockrooms"):
        assert _words(said) == said


def test_every_form_a_hint_may_name_is_there() -> None:
    assert set(ENTER) == set(POSITIONAL)
    for name, filled in POSITIONAL.items():
        assert all(BY_NAME[name].field(each) for each in filled), name
    assert set(ABOUT_ONE) <= set(PAGES)


# -- every hint there is --------------------------------------------------------------------


def _said(source: str) -> Iterator[str]:
    """The texts a file can say, with S01 where a value goes; docstrings are not said."""
    tree = ast.parse(source)
    silent: set[ast.AST] = set()
    for node in ast.walk(tree):
        if isinstance(node, ast.Expr):
            silent.add(node.value)
        elif isinstance(node, ast.JoinedStr):
            silent.update(node.values)
            yield "".join(
                str(part.value) if isinstance(part, ast.Constant) else "S01" for part in node.values
            )
        elif isinstance(node, ast.Constant) and isinstance(node.value, str) and node not in silent:
            yield node.value


def _left(text: str) -> set[str]:
    """The commands that are still words of the command line on a page."""
    shown = _words(text.replace("{0}", "S01"))
    words = shown.replace("`", "").split()
    return {
        word.rstrip(".,:;")
        for before, word in itertools.pairwise(words)
        if before.strip("(") == "stockroom" and word[:1].islower()
    }


def test_no_hint_of_a_use_case_names_a_command_that_has_a_page() -> None:
    left = {}
    for path in sorted(SERVICE.glob("*.py")):
        for text in _said(path.read_text(encoding="utf-8")):
            if _left(text) - COMMAND_LINE:
                left[path.name] = text
    assert left == {}


def test_a_command_left_in_the_words_would_be_found() -> None:
    (said,) = _said('HINT = f"See {name}: stockroom brew {name}."')
    assert _left(said) == {"brew"}


@pytest.mark.parametrize(
    ("hint", "said"),
    [
        (
            "Is it wanted? stockroom cancel K06 --undo",
            "Is it wanted? take the cancelling of K06 back"
            ' (POST /api/do/cancel-undo {"booking": "K06"})',
        ),
        ("stockroom plan", "The term (/term)"),
        ("stockroom verify", "stockroom verify (at the command line)"),
        ("Give initials with --by.", 'Give initials with "by".'),
    ],
)
def test_a_program_is_told_the_request_and_not_the_command(hint: str, said: str) -> None:
    assert for_programs(hint) == said
