"""The fade of a bottle: its points are the law's, its band the fit's, odd bottles are told of."""

from __future__ import annotations

import warnings
from dataclasses import replace
from datetime import timedelta

import pytest
from fading_bottles import FADES, FOUND, MADE, checked, fade
from houses import MONDAY

from stockroom.errors import NotAllowed
from stockroom.keeping.course import Mark
from stockroom.keeping.fits import reach_of
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Rule
from stockroom.keeping.strength import strengths_on
from stockroom.reports.pictures.fade_words import fade_picture, fade_text


def test_the_points_are_what_the_law_says() -> None:
    record = checked(2)
    found = fade(record)
    for point in found.curve:
        assert point.expected == strengths_on(record, (FADES,), point.on).expected
        assert (point.low, point.high) == (None, None)
    assert [one.strength for one in found.found] == [c for _, c in FOUND[:2]]
    assert found.no_band == "no band: fewer than three checks"
    assert MONDAY in [point.on for point in found.curve]


def test_the_band_is_the_fit_s_and_holds_its_line() -> None:
    found = fade(checked(4, 0.0005))
    assert found.no_band == ""
    banded = [p for p in found.curve if p.low is not None and p.high is not None]
    assert len(banded) == len(found.curve)
    widths = {p.on: (p.high or 0) / (p.low or 1) for p in banded}
    middle = MADE + timedelta(days=40)
    assert widths[found.curve[-1].on] > min(widths.values()) > 1
    nearest = min(widths, key=lambda on: widths[on])
    assert abs((nearest - middle).days) < 8
    # two-sided: wider than the one-sided limit the plan goes by
    assert reach_of(2, two_sided=True) > reach_of(2)
    assert "95 % sure" in fade_text(found, 100)


def test_checks_that_rise_give_no_band_and_the_reason() -> None:
    rising = replace(
        checked(0),
        checks=tuple(
            Check(MADE + timedelta(days=n), CheckKind.FOUND, strength=c)
            for n, c in ((10, 0.0900), (30, 0.0951), (50, 0.0989), (70, 0.104))
        ),
    )
    assert fade(rising).no_band.startswith("no band: S01: stronger from check to check")


@pytest.mark.parametrize(
    ("record", "rules", "said"),
    [
        (checked(1), (), "its strength is taken to stay"),
        (Record(nominal=0.1), (FADES,), "not made yet, so as strong as its label"),
        (Record(nominal=0.1), (), "its strength is taken to stay"),
    ],
    ids=["no law", "not made", "no date"],
)
def test_what_does_not_fade_is_told_in_words(
    record: Record, rules: tuple[Rule, ...], said: str
) -> None:
    found = fade(record, rules)
    assert said in found.head.about
    assert fade_picture(found)


def test_a_bottle_of_no_known_strength_is_refused() -> None:
    with pytest.raises(NotAllowed, match="nothing to draw"):
        fade(Record(made=MADE))


def test_the_day_it_is_too_weak_for_a_booking_is_told() -> None:
    found = fade(checked(4), (FADES,), Mark("K01", 0.08, by=MONDAY + timedelta(days=60)))
    assert "TOO WEAK for K01" in found.head.about
    assert "TOO WEAK by then" in fade_text(found, 80)
    assert all(len(line) <= 80 for line in fade_text(found, 80).splitlines())


def test_hideous_names_are_drawn_and_quiet() -> None:
    found = fade(checked(4, 0.0005))
    house_name = "W" * 150 + " $x_2$ <&> \u03a9 \u6f22"
    head = replace(found.head, house=house_name, title="Strength of " + "nitr" * 50)
    marks = tuple(Mark(f"K{n:03}", 0.07 + n / 2000, by=MONDAY) for n in range(20))
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        drawn = fade_picture(replace(found, head=head, wanted=marks))
    assert drawn == fade_picture(replace(found, head=head, wanted=marks))
