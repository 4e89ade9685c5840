"""Ageing rules in the words of the bench."""

from __future__ import annotations

import pytest

from stockroom.keeping.rule_words import rule_in_words
from stockroom.keeping.rules import Law, Origin, Purpose, Rule, RuleKind
from stockroom.measure.periods import Period

DAYS = Period(28, "days")


@pytest.mark.parametrize(
    ("rule", "said"),
    [
        (Rule(RuleKind.LIFE, DAYS), "life: 28 days from made"),
        (Rule(RuleKind.SAME_DAY), "same day"),
        (
            Rule(RuleKind.RECHECK, DAYS, purpose=Purpose.EXACT),
            "recheck: 28 days from made, for exact use",
        ),
        (
            Rule(RuleKind.LIFE, DAYS, above=0.06, upto=0.5),
            "life: 28 days from made, above 0.06 mol/dm³ up to 0.5 mol/dm³",
        ),
        (
            Rule(RuleKind.TEST, Period(6, "months"), Origin.OPENED, safety=True),
            "test or discard: 6 months from opened, a safety date",
        ),
        (
            Rule(RuleKind.LIFE, DAYS, at_c=18, factor_per_10c=3.5),
            "life: 28 days from made at 18 °C, × 3.5 faster per 10 °C",
        ),
        (
            Rule(RuleKind.FADES, law=Law(1, 0.01, 20, None, 60)),
            "fades: order 1, 0.01 a day at 20 °C, Ea 60 kJ/mol from made",
        ),
        (
            Rule(RuleKind.FADES, law=Law(2, 0, named="hypochlorite")),
            "fades: by the hypochlorite law from made",
        ),
        (
            Rule(RuleKind.LIFE, DAYS, warmer_than=8, colder_than=25),
            "life: 28 days from made, warmer than 8 °C and at 25 °C or colder",
        ),
    ],
)
def test_a_rule_says_what_it_means(rule: Rule, said: str) -> None:
    assert rule_in_words(rule, "mol/dm3") == said


def test_a_band_can_be_told_in_the_unit_of_the_label() -> None:
    rule = Rule(RuleKind.RECHECK, Period(90, "days"), Origin.OPENED, above=4.461497)
    told = rule_in_words(rule, "mol/dm3", ("vol", 11.207))
    assert told == "recheck: 90 days from opened, above 50 vol"
