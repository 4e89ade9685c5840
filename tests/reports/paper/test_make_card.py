"""The make card: its steps in order, each caution at its step, and a page whatever it holds."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta
from functools import cache
from pathlib import Path

import paper_reading as paper
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Draw, Make, Plan
from stockroom.planning.facts import Facts
from stockroom.reports.paper.card import Card, Cards, cards_lines, cards_of
from stockroom.reports.paper.card_steps import Amounts, Care, Step, parted, steps_of
from stockroom.reports.paper.card_text import CARD, cards_text
from stockroom.reports.paper.head import since
from stockroom.reports.paper.label import Labels, things_of
from stockroom.reports.paper.label_grid import FULL
from stockroom.reports.paper.label_of import batch_label
from stockroom.reports.paper.left_over import TOO_LITTLE, collected
from stockroom.reports.paper.make_number import number_line
from stockroom.reports.paper.week_makes import Makes
from stockroom.reports.typesetting import typeset
from stockroom.reports.words import day_heading, measured
from stockroom.safety.clp import Classification
from stockroom.safety.hazards import Hazards
from stockroom.service.cards import hazards_for
from stockroom.service.sheets import known_and_planned

BY_HAND = Amounts(weighed=("1 g of salt",), measured=(), filled=(), volume="to 100 cm³ in all")


def make(steps: str = "", cautions: tuple[str, ...] = (), **more: object) -> Make:
    day = date(2027, 1, 25)
    plain = Make(
        id="M01", line="salt 1 mol/dm3", item="salt", strength="1 mol/dm3", volume=100_000,
        needed=100_000, earliest=day, latest=day, on=day, ready=day, bookings=(),
        sources=(Draw(1_000_000, Kind.MASS, "B01", "salt", "salt"),), fresh=False, minutes=10,
        steps=steps, cautions=cautions,
    )  # fmt: skip
    return replace(plain, **more)  # type: ignore[arg-type]


def steps(steps: str = "", *cautions: str, **more: object) -> list[Step]:
    return steps_of(make(steps, cautions, **more), None, BY_HAND, Care())


def at(found: list[Step], caution: str) -> list[str]:
    return [each.words for each in found if caution in each.cautions]


@pytest.fixture(scope="session")
def planned(practice: Path) -> tuple[Facts, Plan, Cards]:
    known, plan = known_and_planned(practice, as_at=date(2027, 1, 4))
    return known, plan, cards_of(known, plan, plan.makes, hazards_for(practice, plan, plan.makes))


def of(sheet: Cards, day: str, line: str) -> Card:
    when = day_heading(date.fromisoformat(day))
    return next(c for c in sheet.cards if when in c.when and c.key.startswith(f"{line} for "))


# -- the steps -------------------------------------------------------------------------


def test_a_method_is_parted_into_acts_and_no_word_of_it_is_lost(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    for one in planned[1].makes:
        acts = parted(one.steps)
        left = one.steps
        for act in acts:
            assert act in left
            left = left.replace(act, "", 1)
        # what joined two acts is all that may be gone
        assert set(left.replace(",", " ").split()) <= {"and", "then"}


def test_every_caution_stands_at_a_step_and_the_volume_once(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    _, plan, sheet = planned
    for one, card in zip(plan.makes, sheet.cards, strict=True):
        said = [caution for step in card.steps for caution in step.cautions]
        assert {c.replace("cm3", "cm³") for c in one.cautions} <= set(said)
        details = [detail for step in card.steps for detail in step.details]
        assert sum(detail.endswith("in all") and "cm³" in detail for detail in details) == 1
        assert card.steps[0].words.startswith("Wear goggles")


def test_acid_goes_into_water_then_cools_and_only_then_is_made_up(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    card = of(planned[2], "2027-03-17", "sulfuric acid 2.00 mol/dm3")
    words = [step.words for step in card.steps]
    order = ("Measure 47.9", "Stand a beaker", "Add the acid", "Leave to cool", "Make up to", "St")
    assert [each[: len(start)] for each, start in zip(words[1:], order, strict=False)] == list(
        order
    )
    found = list(card.steps)
    assert at(found, "Acid into water, slowly and stirring, never the reverse") == [words[3]]
    assert at(found, "It grows hot: let it cool before making up to the mark") == [words[4]]
    assert card.steps[5].details == ("to 440\u00a0cm³ in all",)


def test_work_of_two_days_has_each_day_at_its_first_step(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    card = of(planned[2], "2027-01-29", "potassium permanganate 0.0200 mol/dm3")
    days = {step.words: step.day.replace("\u00a0", " ") for step in card.steps if step.day}
    assert days == {
        "Wear goggles and gloves.": "Fri 2027-01-29",
        "Filter through glass into amber glass.": "Mon 2027-02-01",
    }


def test_a_house_without_words_still_has_every_step() -> None:
    words = [step.words for step in steps()]
    assert words == [
        "Wear goggles.",
        "Weigh 1 g of salt.",
        "Add it to most of the water, stirring, until it is all taken up.",
        "Make up to the mark.",
        "Stopper, turn over and mix well.",
        "Label it at once: name, strength, made, initials.",
        "Rinse the glass and clear away.",
    ]


@settings(max_examples=30)
@given(
    st.lists(
        st.sampled_from(["Weigh it", "add water", "; ", ". ", ", and ", "filter", "!", "cool"])
    ),
    st.lists(
        st.sampled_from(["into water", "filter", "vented", "poured back, dark", "?"]), max_size=3
    ),
)
def test_whatever_the_house_wrote_no_caution_and_no_act_is_lost(
    words: list[str], cautions: list[str]
) -> None:
    text = "".join(words)
    found = steps(text, *dict.fromkeys(cautions), ready=date(2027, 1, 26))
    said = " ".join(step.words for step in found).lower()
    assert all(act.strip(" ;,.").lower() in said for act in parted(text))
    assert {c for step in found for c in step.cautions} == set(cautions)
    assert sum(bool(step.day) for step in found) == 2


def test_shaking_before_the_mark_is_no_mixing_after_it() -> None:
    words = [step.words for step in steps("Shake with half of the water and make up.")]
    assert words.index("Stopper, turn over and mix well.") == words.index("Make up.") + 1


def test_a_caution_nobody_can_place_is_read_first() -> None:
    assert at(steps("Dissolve in water.", "Ask Joan."), "Ask Joan.") == ["Wear goggles."]


def test_what_is_left_to_another_day_without_a_word_is_said() -> None:
    found = steps("Dissolve in water and make up. Filter.", ready=date(2027, 1, 26))
    words = [step.words.replace("\u00a0", " ") for step in found]
    assert words.index("Leave to stand, until Tue 2027-01-26.") == words.index("Filter.") - 1
    assert next(step for step in found if step.words == "Filter.").day


def test_several_vessels_are_mixed_after_each_is_made_up() -> None:
    words = [step.words for step in steps("Dissolve in water and make up.", vessels=3)]
    assert words.index("Mix all 3 vessels together.") == words.index("Make up.") + 2


# -- the amounts ------------------------------------------------------------------------


def test_the_habit_is_caught_where_the_bottle_is_not_what_its_label_says(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    [peroxide] = of(planned[2], "2027-01-26", "hydrogen peroxide 0.100 mol/dm3").takes
    assert peroxide.habit.replace("\u00a0", " ") == "not 5.92 cm³, the label's 100 vol"
    assert "found 91" in peroxide.known
    [acid] = of(planned[2], "2027-01-13", "hydrochloric acid 1.00 mol/dm3").takes
    assert acid.habit == ""
    assert acid.known.endswith("nominal, not checked")


def test_the_form_in_the_bottle_and_what_is_made_first_are_named(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    solid, acid = of(planned[2], "2027-02-01", "ammonium iron(II) sulfate 0.100 mol/dm3").takes
    assert (solid.form, solid.bottle, solid.tool) == ("hexahydrate", "B11", "BAL1")
    assert acid.origin.startswith("M20, made first")
    assert acid.filled


def test_every_liquid_measured_has_the_glass_the_plan_reckons_with(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    drawn = [t for c in planned[2].cards for t in c.takes if not t.weighed and not t.filled]
    assert drawn
    assert all(each.tool for each in drawn)


def test_hazards_that_nobody_entered_are_to_be_looked_up(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    known, plan, _ = planned
    [card] = cards_of(known, plan, plan.makes[:1], {}).cards
    assert {danger.statements for danger in card.dangers} == {
        (("", "Hazard text not entered: look it up."),)
    }


def test_a_changed_caution_is_marked_at_its_step_and_nowhere_else(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    known, plan, _ = planned
    one = plan.makes[13]
    before, after = (
        cards_lines(cards_of(known, plan, [each], {}))
        for each in (one, replace(one, cautions=(*one.cautions, "Ask Joan.")))
    )
    changed = [key for key, said in after.items() if before.get(key) != said]
    assert [key.rpartition(", ")[2] for key in changed] == ["step 1"]
    assert after[changed[0]].endswith("Ask Joan.")


def test_a_make_moved_or_numbered_anew_keeps_its_keys(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    known, plan, _ = planned
    one = plan.makes[13]
    before, anew, moved = (
        cards_lines(cards_of(known, plan, [each], {}))
        for each in (one, replace(one, id="M99"), replace(one, on=one.on - timedelta(1)))
    )
    # which number it had is kept in a key of its own that says nothing
    said = {key: words for key, words in before.items() if words}
    assert {key: words for key, words in anew.items() if words} == said
    assert since("0001", before, anew, plan.as_at).changes == ()
    first = next(iter(said))
    assert moved[first] != before[first]


def test_card_and_label_name_every_make_alike(planned: tuple[Facts, Plan, Cards]) -> None:
    """Else a number would be told as another make's that is still the same one's."""
    known, plan, sheet = planned
    for one, card in zip(plan.makes, sheet.cards, strict=True):
        label = batch_label(one, known.lines[one.line], Hazards("", "", Classification()), None)
        ((number, thing),) = things_of(Labels(sheet.head, FULL, None, (label,))).items()
        assert number_line(number, thing) == number_line(card.number, card.name)


@pytest.mark.parametrize("kept", [True, False])
def test_card_and_week_sheet_say_the_same_of_what_is_over(
    planned: tuple[Facts, Plan, Cards], kept: bool
) -> None:
    known, plan, _ = planned
    words = set()
    for heel in (0, TOO_LITTLE - 1, TOO_LITTLE, 324_000):
        makes = [replace(one, heel=heel, heel_kept=kept) for one in plan.makes]
        find, days = Makes(known, replace(plan, makes=tuple(makes))), {one.on for one in makes}
        jobs = [job for on in days for job in (*find.started(on), *find.of_day(on))]
        begun = {job.ref: job for job in jobs if " finish " not in job.key}
        for one, card in zip(makes, cards_of(known, plan, makes, {}).cards, strict=True):
            assert card.over == next((w for w in begun[one.id].more if " over: " in w), "")
            assert bool(card.over) == (heel >= TOO_LITTLE)
            words.add(card.over.partition(" over: ")[2])
    assert words - {""} == ({"label it and keep it"} if kept else {"collect it", "pour away"})


def test_what_the_list_collects_is_never_poured_away(planned: tuple[Facts, Plan, Cards]) -> None:
    known, plan, _ = planned
    apart = {one.item for one in plan.makes if collected(one.cautions, known.lines[one.line])}
    # metals and halogens, and what the list gives a container of its own
    assert {"copper(II) sulfate", "silver nitrate", "potassium permanganate"} <= apart
    assert {"bromine water", "iodine in iodide"} <= apart
    assert not apart & {"ascorbic acid", "starch", "hydrogen peroxide", "hydrochloric acid"}
    # the house may collect what the list does not, and says nothing against the list
    acid = next(one for one in plan.makes if one.item == "ascorbic acid")
    silver = next(one for one in plan.makes if one.item == "silver nitrate")
    said = replace(acid, cautions=("Collect it: the drain is being mended.",))
    assert collected(said.cautions, known.lines[acid.line])
    assert collected(("The residues stain.",), known.lines[silver.line])


@pytest.mark.parametrize(
    ("micro", "kind", "said"),
    [
        (6_608, Kind.VOLUME, "6.61 cm³"),
        (9_996, Kind.VOLUME, "10 cm³"),
        (20_710, Kind.VOLUME, "20.7 cm³"),
        (26_400, Kind.VOLUME, "26.4 cm³"),
        (99_960, Kind.VOLUME, "100 cm³"),
        (432_200, Kind.VOLUME, "432 cm³"),
        (12, Kind.VOLUME, "0.012 cm³"),
        (0, Kind.VOLUME, "0 cm³"),
        (35_330_000, Kind.MASS, "35.33 g"),
    ],
)
def test_an_amount_is_one_a_person_can_read_off(micro: int, kind: Kind, said: str) -> None:
    assert measured(micro, kind).replace("\u00a0", " ") == said


# -- on paper ----------------------------------------------------------------------------

LONG = "Stir it with the long glass rod, slowly at first and then not so slowly, " * 3


@cache
def _cautions(count: int) -> tuple[str, ...]:
    tail = "which is said at length, for the sake of whoever has never done it before. " * 2
    return tuple(f"Caution {number} of gloves and skin, {tail}"[:200] for number in range(count))


def _printed(planned: tuple[Facts, Plan, Cards], size: str, **more: object) -> bytes:
    known, plan, _ = planned
    one = replace(plan.makes[20], **more)  # type: ignore[arg-type]
    data = CARD.data(cards_of(known, plan, [one], {}))
    [pdf] = typeset("card", data, paper=size)
    assert paper.overlapping(pdf) == []
    assert paper.outside(pdf, 15) == []
    return pdf


@pytest.mark.parametrize("size", ["A4", "Letter"])
def test_twelve_cautions_and_a_long_name_stay_on_one_side(
    planned: tuple[Facts, Plan, Cards], size: str
) -> None:
    pdf = _printed(planned, size, item=f"{LONG[:120]} hexahydrate", cautions=_cautions(12))
    [words] = paper.page_words(pdf)
    assert all(f"Caution {number} of" in words for number in range(12))
    assert "over →" not in words
    assert "bottle number given" in words


def test_what_one_side_cannot_hold_goes_on_overleaf_and_says_so(
    planned: tuple[Facts, Plan, Cards],
) -> None:
    steps = "Weigh the solid. " + f"{LONG}. " * 12 + "X" * 90 + ". Make up."
    pages = paper.page_words(_printed(planned, "A4", steps=steps, cautions=_cautions(12)))
    assert len(pages) == 2
    assert "over →" in pages[0]
    assert "M21 ammonium iron(II) sulfate" in pages[1]
    assert "bottle number given" in pages[1]


@pytest.mark.parametrize("size", ["A4", "Letter"])
def test_every_card_of_the_term_keeps_to_its_page(
    planned: tuple[Facts, Plan, Cards], size: str
) -> None:
    sheet = planned[2]
    heavy = sorted(sheet.cards, key=lambda card: len(card.takes) * 9 + len(card.steps))[-6:]
    [pdf] = typeset("card", CARD.data(replace(sheet, cards=tuple(heavy))), paper=size)
    assert len(paper.page_words(pdf)) == len(heavy)
    assert paper.overlapping(pdf) == []


@pytest.mark.parametrize("width", [40, 80])
def test_the_text_keeps_to_its_width(planned: tuple[Facts, Plan, Cards], width: int) -> None:
    text = cards_text(planned[2], width)
    assert [line for line in text.splitlines() if len(line) > width] == []
