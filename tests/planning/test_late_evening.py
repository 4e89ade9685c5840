"""Sessions that run past midnight are told, not stumbled over."""

from __future__ import annotations

from houses import booking, cm3, made_bottle, planned, recipe, solution, wants

DYE = solution(0.5, "dye")


def test_a_session_past_midnight_says_the_day_after() -> None:
    plan = planned(
        [DYE],
        recipes=[recipe(wants(DYE, cm3(10)), never_kept="Poured away at once.")],
        bookings=[booking("K1", "01-19", minute=22 * 60 + 30)],
        bottles=[made_bottle("S1", DYE, cm3(500))],
    )
    told = [note.text for note in plan.notes if note.subject == "K1"]
    assert any("22:30 to 00:10 the day after" in text for text in told)
    assert any("destroy by 00:40 the day after" in text for text in told)
