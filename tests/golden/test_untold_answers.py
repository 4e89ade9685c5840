"""More of the college's traps: the answers that follow from its data and the trade's rules."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from scenario import (
    FIRST_DAY,
    drawn_from,
    make_for,
    makes_of,
    need,
    order,
    past,
    sources,
)

from stockroom.keeping.verdict import Condition
from stockroom.planning.decisions import Outcome, Plan
from stockroom.service.plan import past_on


def notes(plan: Plan, subject: str) -> str:
    return " / ".join(note.text for note in plan.notes if note.subject == subject)


# -- the shelf -----------------------------------------------------------------------


def test_silver_is_too_close_to_call(term: Plan) -> None:
    """S13 holds 130; K02 takes 33, K16 48, K27 48: 129 of 130, so K27 gets a fresh make."""
    assert drawn_from(need(term, "K16", "silver nitrate")) == {"S13": 48}
    last = need(term, "K27", "silver nitrate")
    assert last.outcome is Outcome.MAKE
    assert any("129 cm³ of 130 cm³ in S13: too close to call" in r for r in last.reasons)


def test_silver_is_never_made_under_a_quarter_litre_and_the_heel_is_kept(term: Plan) -> None:
    [batch] = makes_of(term, "silver nitrate 0.100 mol/dm3")
    assert (batch.volume, batch.heel, batch.heel_kept) == (250_000, 202_000, True)
    assert sources(batch)["B18"] == pytest.approx(4.25, abs=0.01)


def test_that_batch_takes_silver_below_its_level_and_outreach_over_its_money(term: Plan) -> None:
    """7.8 − 4.25 g is under 5 g on 23 March; 25 g cost £46.00, outreach has £45 left."""
    silver = order(term, "silver nitrate")
    assert silver is not None
    assert (silver.need_by, silver.order_by) == (date(2027, 3, 23), date(2027, 3, 4))
    assert silver.shares == (("OU", 4600),)
    assert "£8.60 over" in notes(term, "OU")


def test_sulfuric_acid_is_too_close_so_more_is_made(term: Plan) -> None:
    """S04 holds 3 100 and the term takes 3 075: 25 left is under 3 %, so 2.00 is made again."""
    [fresh] = makes_of(term, "sulfuric acid 2.00 mol/dm3")
    assert fresh.bookings == ("K25",)
    assert "B13" in sources(fresh)


def test_stocks_below_their_level_are_told_on_the_day_of_a_booking(term: Plan) -> None:
    """S04 passes 1 000 with K21's acid on 4 March; B35 has no date, so potassium chloride is 0."""
    told = {level.line: (level.on, level.left) for level in term.levels}
    assert told["sulfuric acid 2.00 mol/dm3"][0] == date(2027, 3, 4)
    assert told["potassium chloride"] == (FIRST_DAY, 0)


def test_strontium_serves_one_class_whole_and_never_two_in_part(term: Plan) -> None:
    """S24d holds 70: K01 takes 55, K29 6; K03's 49.5 is made whole, from B32."""
    assert drawn_from(need(term, "K01", "strontium")) == {"S24d": 55}
    assert drawn_from(need(term, "K29", "strontium")) == {"S24d": 6}
    made = make_for(term, "strontium chloride 0.500 mol/dm3", "K03")
    assert made.volume == 50_000
    assert "B32" in sources(made)


def test_sodium_carbonate_is_not_enough_for_both(term: Plan) -> None:
    """S18 holds 800: K19 takes 550; K20's 495 is made, not pieced together."""
    assert drawn_from(need(term, "K19", "sodium carbonate")) == {"S18": 550}
    assert need(term, "K20", "sodium carbonate").outcome is Outcome.MAKE
    assert make_for(term, "sodium carbonate 0.500 mol/dm3", "K20").volume == 495_000


def test_sodium_hydroxide_lapses_between_two_shows(term: Plan) -> None:
    """S06 is good until 9 March: K16 has it, K27 on the 23rd does not."""
    assert drawn_from(need(term, "K16", "sodium hydroxide")) == {"S06": 12}
    assert need(term, "K27", "sodium hydroxide").outcome is Outcome.MAKE


def test_weak_iodine_is_good_enough_for_a_rough_line(term: Plan) -> None:
    """S10 found 0.0478: 99 cm³ of 0.0100 takes 20.7 cm³ of it, not 19.8."""
    made = make_for(term, "iodine in iodide 0.0100 mol/dm3", "K10")
    assert sources(made) == {"S10": pytest.approx(20.71, abs=0.01)}


def test_overdue_bromine_is_used_and_its_titration_asked_for(term: Plan) -> None:
    """B27's recheck fell due in December; K17 takes 11 cm³ by its label, once titrated."""
    assert sources(make_for(term, "bromine water 0.020 mol/dm3", "K17")) == {"B27": 11.0}
    [titration] = [c for c in term.checks if c.subject == "B27"]
    assert titration.by == date(2027, 2, 22)


def test_ammonia_inherits_doubt(term: Plan) -> None:
    """S20 was diluted from B16 six days after B16's recheck fell due: used, and said."""
    assert drawn_from(need(term, "K16", "ammonia")) == {"S20": 24}
    [doubt] = [g.text for g in term.guesses if g.subject == "S20" and "B16" in g.text]
    assert "6 d after its recheck" in doubt


def test_returned_plating_liquor_is_used_for_nothing(term: Plan) -> None:
    used = {d.bottle for a in term.needs for d in a.draws}
    used |= {s.bottle for m in term.makes for s in m.sources}
    assert not used & {"S16", "B36", "B28", "B35", "S12"}


def test_limewater_is_made_because_nobody_looked(term: Plan) -> None:
    """S12 has no date; K04 is on Thursday 14 January and it stands 24 h: made on Tuesday."""
    made = make_for(term, "limewater saturated", "K04")
    assert (made.on, made.ready) == (date(2027, 1, 12), date(2027, 1, 13))
    assert sources(made) == {"B26": pytest.approx(1.32)}


def test_limewater_over_a_long_weekend_starts_on_friday(term: Plan) -> None:
    """K22 is on Tuesday 9 March, Monday is closed: started Friday 5 March."""
    assert make_for(term, "limewater saturated", "K22").on == date(2027, 3, 5)


# -- weighing ------------------------------------------------------------------------


@pytest.mark.parametrize("booking", ["K12", "K14"])
def test_ascorbic_acid_is_too_little_to_weigh_while_the_fine_balance_is_away(
    term: Plan, booking: str
) -> None:
    """0.176 g to 2 % wants a 0.001 g balance, away until 12 February: 0.50 g in 500 cm³."""
    made = make_for(term, "ascorbic acid 0.10 % w/v", booking)
    assert made.volume == 500_000
    assert not made.heel_kept
    assert any("too little to weigh to 2 % on BAL1" in r for r in made.reasons)


def test_dcpip_can_be_weighed_on_the_coarse_balance(term: Plan) -> None:
    """0.352 g on 0.01 g is 2.8 %, inside 10 %: one batch of 352 cm³ for both classes."""
    [made] = makes_of(term, "DCPIP 0.10 % w/v")
    assert (made.bookings, made.volume) == (("K12", "K14"), 352_000)


# -- buying --------------------------------------------------------------------------


def test_ascorbic_acid_past_its_printed_month_is_bought(term: Plan) -> None:
    """B22 ended with 2026; K12 is on 3 February: order by 18 January."""
    assert need(term, "K12", "ascorbic acid").outcome is Outcome.BUY
    bought = order(term, "ascorbic acid")
    assert bought is not None
    assert (bought.order_by, bought.packs, bought.pence) == (date(2027, 1, 18), 1, 960)


def test_amylase_lapses_before_the_second_class(term: Plan) -> None:
    """B24 ends with February: K10 has it; K23 on 10 March is bought, 15 open days ahead."""
    assert need(term, "K10", "amylase").outcome is Outcome.MAKE
    assert need(term, "K23", "amylase").outcome is Outcome.BUY
    bought = order(term, "amylase, bacterial")
    assert bought is not None
    assert bought.order_by == date(2027, 2, 5)


def test_biology_goes_over_by_one_pound_eighty(term: Plan) -> None:
    """Ascorbic acid £9.60 and amylase £17.20 against £25 left."""
    assert "£26.80 of £25.00 left: £1.80 over" in notes(term, "BI")


def test_iodide_crosses_its_level_on_the_bleach_practical(term: Plan) -> None:
    """96 g less 23.4, 12.0 and 29.2 is 31.5 on 4 March: the small pack will do."""
    iodide = order(term, "potassium iodide")
    assert iodide is not None
    assert (iodide.pack, iodide.packs, iodide.need_by) == ("250 g", 1, date(2027, 3, 4))
    assert any("31.458 g then left" in r for r in iodide.reasons)


def test_shares_add_up_to_the_penny(term: Plan) -> None:
    for bought in term.orders:
        assert sum(pence for _, pence in bought.shares) == bought.pence


def test_shop_goods_are_never_chemical_orders(term: Plan) -> None:
    assert not {o.line for o in term.orders} & {"orange juice", "lemon juice", "washing-up liquid"}
    assert "orange juice from a shop by 2027-02-02" in notes(term, "K12")


def test_only_six_things_are_ordered(term: Plan) -> None:
    assert [o.line for o in term.orders] == [
        "lithium chloride",
        "ammonium iron(II) sulfate hexahydrate",
        "ascorbic acid",
        "amylase, bacterial",
        "potassium iodide",
        "silver nitrate",
    ]


# -- safety and hours ----------------------------------------------------------------


def test_evening_shows_need_somebody_there(term: Plan) -> None:
    assert "outside staffed hours" in notes(term, "K15")
    assert "mix not before 18:00" in notes(term, "K16")


def test_bleach_in_the_acid_cupboard_and_under_the_warm_pipe(term: Plan) -> None:
    assert "chlorine" in notes(term, "B04")
    assert "28 °C" in notes(term, "B05a")
    assert "tight cap" in notes(term, "S19")


def test_household_bleach_will_have_faded(practice: Path, term: Plan) -> None:
    """4.5 % received 30 November at 28 °C is 3.8 % by 4 March: second order, × 3.5 per 10 °C."""
    [guess] = [g.text for g in term.guesses if g.subject == "B05a"]
    assert "3.84 % w/v" in guess


def test_cyclohexene_reaches_its_safety_date_in_term(practice: Path, term: Plan) -> None:
    """Opened 2 September, unstabilised: test or discard by 2 March; K17 is inside."""
    assert drawn_from(need(term, "K17", "cyclohexene")) == {"B29": 11}
    later = past(past_on(practice, as_at=FIRST_DAY, on=date(2027, 3, 3)), "B29")
    assert (later.condition, later.good_until) == (Condition.PAST, date(2027, 3, 2))
    assert "do not open or move" in notes(term, "B29")


def test_stand_bys_carry_no_spare(term: Plan) -> None:
    assert drawn_from(need(term, "K05", "sodium carbonate")) == {"B34": 25}
    assert need(term, "K17", "sodium thiosulfate").amount == 250_000
