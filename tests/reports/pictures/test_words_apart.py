"""No words of a picture lie over other words or off the paper: the college's, and hideous ones."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date, timedelta
from itertools import combinations, pairwise
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest
from fading_bottles import FADES, checked, fade
from houses import MONDAY
from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.keeping.course import Mark
from stockroom.measure.amounts import Kind
from stockroom.planning.pictures.running import running
from stockroom.reports.paper.head import Head, head_for
from stockroom.reports.pictures import canvas
from stockroom.reports.pictures.fade import fade_of
from stockroom.reports.pictures.fade_drawn import need_words, stretches, together
from stockroom.reports.pictures.fade_words import fade_picture
from stockroom.reports.pictures.level import (
    MADE_HERE,
    At,
    Due,
    Stock,
    level_of,
    level_picture,
    level_text,
)
from stockroom.reports.pictures.load import Load, LoadDay, load_of, load_picture
from stockroom.reports.pictures.placing import apart, set_flags
from stockroom.service.pictures import bottle_fading
from stockroom.service.sheets import known_and_planned

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from stockroom.planning.decisions import Plan
    from stockroom.planning.facts import Facts

TODAY = date(2027, 1, 4)
LONG = "Stock of " + "nitrate of ammonium and cerium " * 6 + "W" * 40


@dataclass
class Drawn:
    """What the last picture drawn holds: its words with their boxes, dots; and its own box."""

    boxes: list[tuple[str, Any]]
    paper: Any

    def faults(self) -> list[str]:
        """Words over others, and words off the paper."""
        over = [
            f"{one!r} over {other!r}"
            for (one, box), (other, second) in combinations(self.boxes, 2)
            # half a dot: letters are set to whole ones
            if min(box.x1, second.x1) - max(box.x0, second.x0) > 0.5
            and min(box.y1, second.y1) - max(box.y0, second.y0) > 0.5
        ]
        return over + [
            f"{words!r} off the paper"
            for words, box in self.boxes
            if box.x0 < 0 or box.y0 < 0 or box.x1 > self.paper.x1 or box.y1 > self.paper.y1
        ]

    def said(self) -> str:
        """Every word of it."""
        return " ".join(words for words, _ in self.boxes).replace("\u00a0", " ")


def unseen(figure: Figure) -> set[Any]:
    """Names of ticks beyond the ends of an axis, which are never drawn."""
    found: set[Any] = set()
    for axes in figure.axes:
        for axis in (axes.xaxis, axes.yaxis):
            low, high = sorted(axis.get_view_interval())
            ticks = axis.get_major_ticks()
            found |= {tick.label1 for tick in ticks if not low <= tick.get_loc() <= high}
    return found


@pytest.fixture
def drawn(monkeypatch: pytest.MonkeyPatch) -> Drawn:
    found = Drawn([], None)

    def measured(figure: Figure, form: str) -> bytes:
        from matplotlib.backends.backend_agg import FigureCanvasAgg
        from matplotlib.text import Text

        agg: Any = FigureCanvasAgg(figure)
        renderer = agg.get_renderer()
        figure.draw_without_rendering()
        texts: list[Any] = figure.findobj(Text)
        hidden = unseen(figure)
        shown = [
            one
            for one in texts
            if one.get_visible() and one.get_text().strip() and one not in hidden
        ]
        found.boxes = [(one.get_text(), one.get_window_extent(renderer)) for one in shown]
        found.paper = figure.bbox
        return b""

    monkeypatch.setattr(canvas, "_written", measured)
    return found


@pytest.fixture(scope="module")
def college(practice: Path) -> tuple[Facts, Plan]:
    return known_and_planned(practice, as_at=TODAY)


def head(title: str = "Stock of potassium iodide") -> Head:
    return head_for("Quillmere College", title, TODAY, about="as told", practice=True)


def test_planted_faults_are_told() -> None:
    from matplotlib.transforms import Bbox

    boxes = [("a", Bbox([[0, 0], [5, 5]])), ("b", Bbox([[4, 4], [9, 9]]))]
    assert Drawn(boxes, Bbox([[0, 0], [8, 8]])).faults() == ["'a' over 'b'", "'b' off the paper"]


@pytest.mark.parametrize("number", ["B01", "S20"])
def test_a_bottle_of_the_college(number: str, practice: Path, drawn: Drawn) -> None:
    below = ("80 vol", "89 vol") if number == "B01" else ()
    fade_picture(fade_of(*bottle_fading(practice, number, as_at=TODAY, below=below)))
    assert drawn.faults() == []
    assert "expected, an estimate" in drawn.said()


@pytest.mark.parametrize(
    "key", ["potassium iodide", "lithium chloride", "hydrogen peroxide 0.100 mol/dm3"]
)
def test_a_line_of_the_college(key: str, college: tuple[Facts, Plan], drawn: Drawn) -> None:
    known, plan = college
    level_picture(level_of(known, plan, running(known, key, plan.orders)), form="png")
    assert drawn.faults() == []


def test_a_level_passed_already_is_told_with_the_booking(college: tuple[Facts, Plan]) -> None:
    known, plan = college
    told = level_of(known, plan, running(known, "lithium chloride", plan.orders))
    about = told.head.about.replace("\u00a0", " ")
    assert about.startswith("below its level of 10 g already")
    assert about.endswith("first asked for by K01 on Tue 2027-01-12")
    assert "NONE FIT TO USE" in level_text(told, 100)


def test_what_is_made_and_used_up_is_said_not_to_be_shown(college: tuple[Facts, Plan]) -> None:
    known, plan = college
    made = running(known, "hydrogen peroxide 0.100 mol/dm3", plan.orders)
    assert MADE_HERE in " ".join(level_text(level_of(known, plan, made), 100).split())
    bought = running(known, "potassium iodide", plan.orders)
    assert level_of(known, plan, bought).note == ""


def test_the_load_of_the_college(college: tuple[Facts, Plan], drawn: Drawn) -> None:
    load_picture(load_of(*college), bare=True)
    assert drawn.faults() == []


def test_twenty_needs_of_nearly_one_strength(drawn: Drawn) -> None:
    found = fade(checked(4, 0.0005))
    marks = tuple(
        Mark(
            f"K{n:03}",
            0.07 + n / 2000,
            on=MONDAY + timedelta(days=60 - 3 * n),
            by=MONDAY + timedelta(days=2 * n),
        )
        for n in range(20)
    )
    recheck = MONDAY + timedelta(days=6)
    fade_picture(replace(found, head=head(LONG), wanted=marks, recheck=recheck), form="png")
    assert drawn.faults() == []
    assert " more" in drawn.said()


def test_orders_on_neighbouring_days_and_a_long_name(drawn: Drawn) -> None:
    due = tuple(
        Due(f"O{n:02}", "12 × 2.5 dm³", date(2027, 3, n), date(2027, 3, 18 + n))
        for n in range(1, 7)
    )
    days = tuple(At(TODAY + timedelta(days=14 * n), 10**9 - n, 3 * 10**9) for n in range(6))
    stock = Stock(
        head(LONG), "salt", Kind.MASS, TODAY, date(2027, 3, 26), 10**9 - 3, days, due,
        TODAY + timedelta(days=70), TODAY + timedelta(days=71),
    )  # fmt: skip
    level_picture(stock, form="png")
    assert drawn.faults() == []
    assert "O06 order by Sat 6 Mar" in drawn.said()


def test_a_fortnight_over_the_limit(drawn: Drawn) -> None:
    days = tuple(LoadDay(TODAY + timedelta(days=n), 600, 30, over=330) for n in range(14))
    load = Load(head(LONG), TODAY, date(2027, 3, 26), 300, days, (date(2027, 3, 26),))
    load_picture(load, form="png", bare=True)
    assert drawn.faults() == []
    assert drawn.said().count("330 min over") == 14


# -- the laws of placing ----------------------------------------------------------------


@settings(max_examples=40, deadline=None)
@given(st.lists(st.tuples(st.floats(17, 192), st.floats(5, 60)), max_size=14), st.booleans())
def test_flags_never_touch(wanted: list[tuple[float, float]], close: bool) -> None:
    places = set_flags(sorted(wanted), 6, 254, close=close)
    for one, other in combinations(places, 2):
        assert one.row != other.row or one.end < other.start or other.end < one.start
    assert all(one.start >= 6 and one.end <= 254 for one in places)


@settings(max_examples=40, deadline=None)
@given(st.lists(st.tuples(st.floats(20, 90), st.floats(4, 8)), max_size=8))
def test_names_keep_their_order_and_their_distance(row: list[tuple[float, float]]) -> None:
    at, deep = [one for one, _ in sorted(row)], [one for _, one in sorted(row)]
    feet = apart(at, deep, 20, 70)
    for number in range(1, len(feet)):
        assert feet[number] >= feet[number - 1] + deep[number - 1] - 1e-9
    assert all(
        foot >= 19.999 and foot + high <= 90.001 for foot, high in zip(feet, deep, strict=True)
    )


def test_needs_are_grouped_and_counted() -> None:
    marks = [Mark(f"K{n}", 90 + n / 10, by=TODAY, on=TODAY) for n in range(20)]
    groups = together([*marks, Mark("K99", 95, by=TODAY)], 2.0)
    assert [len(group) for group in groups] == [20, 1]
    assert need_words(groups[0], "vol").startswith("90 to 91.9 vol needed: K0, K1 and 18 more")
    assert need_words(groups[1], "vol") == "95 vol needed: K99"


def test_the_expected_line_is_broken_at_each_result() -> None:
    found = fade(checked(2), (FADES,))
    runs = stretches(found)
    assert len(runs) == 3
    for before, after, result in zip(runs, runs[1:], found.found, strict=False):
        assert before[-1][0] == after[0][0] == result.on.toordinal()
        assert after[0][1] == result.strength
    # within a piece nothing rises or drops by more than the law lets it
    assert all(a[1] >= b[1] > 0.98 * a[1] for run in runs for a, b in pairwise(run))
