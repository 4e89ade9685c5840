"""Paper from the pages: looked at without a trace, printed under a number, named by us."""

from __future__ import annotations

import hashlib
import io
import re
import threading
from datetime import date
from html import unescape
from pathlib import Path
from typing import TYPE_CHECKING
from urllib.parse import parse_qs, urlsplit

import paper_reading as read
import pytest
from fastapi import HTTPException

from stockroom.store.reading import reading
from stockroom.web.making import alone
from stockroom.web.paper.labels import words_of

if TYPE_CHECKING:
    from conftest import Stockroom
    from windows import Window

BUSY = date(2027, 1, 25)


def bytes_of(window: Window, path: str, **query: str) -> bytes:
    came = window.client.get(path, params=query or None)
    assert came.status_code == 200, came.text[:500]
    return came.content


def printed(window: Window, sheet: str, **fields: str) -> bytes:
    token = window.get("/enter").field("form_token")
    came = window.client.post(f"/paper/{sheet}", data={"form_token": token} | fields)
    assert came.status_code == 200, came.text[:500]
    return came.content


def copies(window: Window) -> int:
    with reading(window.house.path) as reader:
        [[count]] = reader.ask("SELECT COUNT(*) FROM printed_copy")
    return int(count)


def store_of(window: Window) -> Path:
    assert isinstance(window.house.path, Path)
    return window.house.path


@pytest.mark.parametrize(
    ("sheet", "query", "said"),
    [
        ("week", {"of": "2027-01-26"}, "Week 4: 25 to 29 January 2027"),
        ("day", {"ref": "K15"}, "Catalysed peroxide foam"),
        ("slip", {"ref": "K11"}, "Permanganate titration"),
        ("card", {"what": "M01"}, "glucose 1.0 % w/v"),
        ("card", {"on": "2027-01-26"}, "hydrogen peroxide 0.100 mol/dm³"),
        ("strip", {}, "The term at a glance"),
        ("buying", {}, "5 orders"),
        ("report", {}, "The term's report"),
        ("walk", {"places": "a2"}, 'Walk "A2"'),
        ("label", {"what": "S02 S04"}, "S04"),
    ],
)
def test_a_sheet_is_looked_at_without_a_number(
    onlooker: Window, sheet: str, query: dict[str, str], said: str
) -> None:
    pdf = bytes_of(onlooker.on(BUSY), f"/paper/{sheet}.pdf", **query)
    assert said in read.words(pdf).replace("\u00a0", " ")
    assert "copy 0001" not in read.words(pdf)


@pytest.mark.file
def test_to_look_writes_nothing(onlooker: Window) -> None:
    before = hashlib.sha256(store_of(onlooker).read_bytes()).digest()
    for path in ("week.pdf", "week", "label.svg?what=S02", "calendar.ics", "walk.png?places=A2"):
        assert onlooker.client.get(f"/paper/{path}").status_code == 200
    assert hashlib.sha256(store_of(onlooker).read_bytes()).digest() == before


def test_a_printed_copy_has_a_number_and_the_next_is_held_against_it(window: Window) -> None:
    assert "copy 0001" in read.words(printed(window, "week", of="2027-01-25"))
    window.enter("shift", booking="K07", groups="9")
    page = window.get("/paper/week", of="2027-01-25").text
    assert "Changed since copy 0001" in page
    again = read.words(printed(window, "week", of="2027-01-25"))
    assert ("copy 0002" in again, "9 groups" in again) == (True, True)


def test_page_and_command_count_the_same_copies(window: Window, stockroom: Stockroom) -> None:
    printed(window, "strip")
    told = stockroom("strip", store=store_of(window)).said
    assert "nothing changed since copy 0001" in told


def test_labels_of_the_page_are_held_against_the_commands(
    window: Window, stockroom: Stockroom
) -> None:
    printed(window, "label", what="S02 S04")
    told = stockroom("label", "S02", "S04", store=store_of(window)).said
    assert "since copy 0001" in told


def test_a_copy_is_saved_under_a_name_of_ours(window: Window) -> None:
    token = window.get("/enter").field("form_token")
    sent = {"form_token": token, "of": '2027-01-25";evil'}
    refused = window.client.post("/paper/week", data=sent)
    assert refused.status_code == 422
    came = window.client.post("/paper/week", data={"form_token": token})
    assert came.headers["content-disposition"] == 'attachment; filename="week-copy-0001.pdf"'
    assert came.headers["content-type"] == "application/pdf"


def test_a_copy_asked_for_by_a_stranger_takes_no_number(window: Window) -> None:
    assert window.client.post("/paper/week", data={"form_token": "guessed"}).status_code == 403
    assert copies(window) == 0


def test_a_sheet_that_is_refused_takes_no_number(window: Window) -> None:
    token = window.get("/enter").field("form_token")
    came = window.client.post("/paper/day", data={"form_token": token, "ref": "K99"})
    assert (came.status_code, copies(window)) == (404, 0)


def test_a_sheet_that_cannot_be_drawn_takes_no_number(
    window: Window, monkeypatch: pytest.MonkeyPatch
) -> None:
    token = window.get("/enter").field("form_token")
    with monkeypatch.context() as patched:
        patched.setattr("stockroom.reports.typesetting.typeset", lambda *a, **k: 1 / 0)
        with pytest.raises(ZeroDivisionError):
            window.client.post("/paper/week", data={"form_token": token})
    assert copies(window) == 0


def test_whoever_waits_too_long_for_their_copy_takes_no_number(
    window: Window, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(alone.__wrapped__, "__defaults__", (0.01,))  # type: ignore[attr-defined]
    token = window.get("/enter").field("form_token")
    with alone():
        came = window.client.post("/paper/week", data={"form_token": token})
    assert (came.status_code, copies(window)) == (503, 0)


@pytest.mark.parametrize(
    ("file", "query", "begins"),
    [
        ("buying.csv", {}, b"order_by,"),
        ("usage.csv", {"bom": "yes"}, "\ufeffform,".encode()),
        ("past.csv", {"on": "2027-02-10"}, b"bottle,"),
        ("calendar.ics", {}, b"BEGIN:VCALENDAR"),
        ("morning.txt", {}, b"4 things due today"),
        ("phone.txt", {"ref": "K15"}, b"Wed 10 Feb 18:30"),
    ],
)
def test_each_file_is_what_its_name_says(
    onlooker: Window, file: str, query: dict[str, str], begins: bytes
) -> None:
    assert bytes_of(onlooker, f"/paper/{file}", **query).startswith(begins)


def test_the_workbook_opens(onlooker: Window) -> None:
    from python_calamine import CalamineWorkbook

    book = CalamineWorkbook.from_filelike(io.BytesIO(bytes_of(onlooker, "/paper/workbook.xlsx")))
    assert len(book.sheet_names) > 3


def test_a_calendar_that_is_kept_withdraws_what_fell_out(window: Window) -> None:
    assert b"STATUS:CANCELLED" not in printed(window, "calendar")
    window.enter("cancel", booking="K15", why="snow")
    # to look at it keeps nothing, so it can be asked for again
    for _ in range(2):
        assert b"STATUS:CANCELLED" in bytes_of(window, "/paper/calendar.ics")


@pytest.mark.parametrize(
    ("path", "status", "said"),
    [
        ("nothing.pdf", 404, "nothing"),
        ("week.exe", 404, "week.exe"),
        ("..%2fsecret.pdf", 404, ""),
        ("week.pdf?of=someday", 422, "someday"),
        ("day.pdf?ref=K99", 404, "K99"),
        ("card.pdf?what=M99", 404, "M99"),
        ("label.pdf", 422, "Labels of what?"),
        ("label.pdf?what=zzz", 404, "zzz"),
        ("label.pdf?what=S02&size=1x1", 422, "1x1"),
        ("label.pdf?what=S02&paper=A5", 422, "A5"),
        ("walk.pdf?places=Z9", 404, "Z9"),
        ("walk.pdf?name=nobodys", 404, "nobodys"),
        ("report.pdf?term=nosuch", 404, "nosuch"),
        ("week.svg?page=400", 404, "Page 400"),
        ("week.svg?page=0", 422, "page"),
        (f"label.pdf?what={'x' * 600}", 422, "600"),
    ],
)
def test_what_cannot_be_drawn_is_refused_in_words(
    onlooker: Window, path: str, status: int, said: str
) -> None:
    page = onlooker.get(f"/paper/{path}")
    assert (page.status, said in page.text) == (status, True)


def test_a_refusal_before_printing_stands_beside_its_field(onlooker: Window) -> None:
    page = onlooker.get("/paper/label", what="S02", size="7")
    assert (page.status, 'id="paper-size-wrong"' in page.html) == (422, True)
    assert "--" not in page.text
    assert page.field("what") == "S02"


def test_more_labels_than_are_drawn_at_once_are_refused(
    window: Window, monkeypatch: pytest.MonkeyPatch
) -> None:
    from stockroom.web.paper import labels

    monkeypatch.setattr(labels, "MOST", 3)
    page = window.get("/paper/label", what="all")
    assert (page.status, "and 3 are drawn at once" in page.text) == (422, True)


def test_every_sheet_and_file_is_on_the_list(onlooker: Window) -> None:
    from stockroom.web.paper.files import FILES
    from stockroom.web.paper.sheets import SHEETS

    page = onlooker.get("/paper").html
    assert [s.name for s in SHEETS if f'"/paper/{s.name}"' not in page] == []
    assert [f.name for f in FILES if f'"/paper/{f.name}.{f.ending}"' not in page] == []


@pytest.mark.parametrize(
    ("typed", "words"),
    [
        ("S02 S04", ["S02", "S04"]),
        ("starch 0.5 % w/v", ["starch 0.5 % w/v"]),
        ("hypo, S02 B14; M14", ["hypo", "S02", "B14", "M14"]),
        (" , ", []),
    ],
)
def test_names_for_labels_are_told_apart(typed: str, words: list[str]) -> None:
    assert words_of(typed) == words


def test_two_never_draw_at_once_and_whoever_waits_too_long_is_told() -> None:
    inside, leave = threading.Event(), threading.Event()

    def draw() -> None:
        with alone():
            inside.set()
            leave.wait(5)

    other = threading.Thread(target=draw)
    other.start()
    inside.wait(5)
    with pytest.raises(HTTPException) as refused, alone(0.01):
        pytest.fail("two at once")
    leave.set()
    other.join()
    assert refused.value.status_code == 503
    with alone(0.01):
        pass


def test_a_card_asked_from_a_page_left_open_is_of_the_make_it_showed(window: Window) -> None:
    shown = window.get("/week", of="2027-01-25").html
    address = next(each for each in re.findall(r'"(/paper/card\.pdf\?[^"]*)"', shown))
    what, meant = (parse_qs(urlsplit(unescape(address)).query)[key][0] for key in ("what", "meant"))
    right = read.words(bytes_of(window, "/paper/card.pdf", what=what))
    moved = bytes_of(window, "/paper/card.pdf", what="M01", meant=meant)
    assert read.words(moved) == right


def test_a_card_of_a_make_the_plan_has_no_more_is_refused(window: Window) -> None:
    seen = "starch 0.5 % w/v, 9 cm³, 2027-01-25"
    came = window.client.get("/paper/label.pdf", params={"what": "M03", "meant": seen})
    assert came.status_code == 409
    assert f"The plan changed: M03 was {seen}, and is now " in unescape(came.text)
