from __future__ import annotations

from contextlib import suppress
from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount, StockroomError
from stockroom.measure.amounts import PER_UNIT, Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.measure.parsing import parse_amount, parse_strength, parse_strength_range
from stockroom.measure.units import EVERYDAY, factor

READ = [
    ("500 cm3", Amount.cm3(500)),
    ("500 cm³", Amount.cm3(500)),
    ("500cm^3", Amount.cm3(500)),
    ("0.5 L", Amount.cm3(500)),
    ("1.2 dm3", Amount.cm3(1200)),
    ("250 mL", Amount.cm3(250)),
    ("2 cl", Amount.cm3(20)),
    ("35 µL", Amount.cm3(0.035)),
    ("35 μL", Amount.cm3(0.035)),
    ("35ul", Amount.cm3(0.035)),
    ("5 litres", Amount.cm3(5000)),
    ("1 350 cm3", Amount.cm3(1350)),
    ("1\u2009350 cm3", Amount.cm3(1350)),
    ("1\u202f350\u00a0cm3", Amount.cm3(1350)),
    ("5 g", Amount.grams(5)),
    ("620mg", Amount.grams(0.62)),
    ("1 kg", Amount.grams(1000)),
    ("1 Kg", Amount.grams(1000)),
    ("40 µg", Amount.grams(0.00004)),
    ("7,8 g", Amount.grams(7.8)),
    ("0,05 g", Amount.grams(0.05)),
    ("0,125 g", Amount.grams(0.125)),
    ("1e-3 g", Amount.grams(0.001)),
    ("2 × 10³ cm³", Amount.cm3(2000)),
    ("5 x 10^-2 g", Amount.grams(0.05)),
    ("0 g", Amount.grams(0)),
    ("1000 kg", Amount.grams(1_000_000)),
    ("3 items", Amount.items(3)),
    ("1 item", Amount.items(1)),
    ("2 pieces", Amount.items(2)),
]


@pytest.mark.parametrize(("text", "amount"), READ)
def test_an_amount_is_read_as_meant(text: str, amount: Amount) -> None:
    assert parse_amount(text) == amount


REFUSED = [
    ("1,000 g", "One thousand or one?"),
    ("2,500 cm3", "Thousands?"),
    ("1,350.5 g", "cannot read the number"),
    ("1 35 g", "cannot read the number"),
    ("1.2.3 g", "cannot read the number"),
    ("500", "500 of what?"),
    ("", "how much?"),
    ("cm3", "how much?"),
    ("nan g", "how much?"),
    ("inf g", "how much?"),
    ("-5 g", "less than nothing"),
    ("−5 g", "less than nothing"),
    ("1001 kg", "more than 1000 kg"),
    ("1001 dm3", "more than 1000 kg"),
    ("1e99 g", "more than 1000 kg"),
    ("0.4 µg", "less than a microgram"),
    ("2 m", "length"),
    ("5 N", "normality"),
    ("25 degC", "temperature"),
    ("25 °C", "temperature"),
    ("30 min", "time"),
    ("2 mol", "amount of substance"),
    ("5 %", "strength"),
    ("2 M", "strength"),
    ("20 vol", "strength"),
    ("0.1 mol/dm3", "strength"),
    ("2 tablets", "do not know the unit"),
    ("5 g g", "do not know the unit"),
    ("500 ML", "Do you mean mL?"),
    ("5 G", "Do you mean g?"),
    ("1 pint", "no unit of this bench"),
    ("2 oz", "no unit of this bench"),
    ("3/4 bottle", "how big a bottle"),
    ("½ full", "how big a bottle"),
    (".5 g", 'Write "0.5 g"'),
    ("8 x 60 cm3", "do not know the unit"),
]


@pytest.mark.parametrize(("text", "says"), REFUSED)
def test_a_doubtful_amount_is_refused_with_its_reason(text: str, says: str) -> None:
    with pytest.raises(BadAmount) as caught:
        parse_amount(text)
    assert says in str(caught.value)


@pytest.mark.parametrize("text", [text for text, _ in REFUSED])
def test_a_refusal_quotes_what_was_typed_and_where(text: str) -> None:
    with pytest.raises(BadAmount) as caught:
        parse_amount(text, where="column left")
    assert f'column left "{text}"' in caught.value.message
    assert caught.value.hint


def test_another_kind_than_expected_is_refused() -> None:
    with pytest.raises(BadAmount, match=r'"5 g" is a mass; a volume is wanted'):
        parse_amount("5 g", expect=Kind.VOLUME)


def test_the_expected_kind_passes() -> None:
    assert parse_amount("5 g", expect=Kind.MASS) == Amount.grams(5)


def test_a_very_long_text_is_quoted_short() -> None:
    with pytest.raises(BadAmount) as caught:
        parse_amount("9" * 5000 + " g")
    assert len(str(caught.value)) < 200


@pytest.mark.parametrize("unit", sorted(EVERYDAY))
def test_the_table_of_everyday_units_agrees_with_pint(unit: str) -> None:
    import pint

    kind, micro = EVERYDAY[unit]
    base = "g" if kind is Kind.MASS else "cm**3"
    one = pint.UnitRegistry(non_int_type=Decimal).Quantity(Decimal(1), unit.replace("m3", "m**3"))
    assert one.to(base).magnitude * PER_UNIT[kind] == micro


@pytest.mark.parametrize(("unit", "micro"), [("dL", 10**5), ("cm**3", 10**3), ("ng", 0.001)])
def test_rarer_units_come_from_pint_exactly(unit: str, micro: float) -> None:
    assert factor(unit)[1] == Decimal(str(micro))


@given(st.text(max_size=20))
def test_any_text_gives_an_amount_or_a_refusal(text: str) -> None:
    for parse in (parse_amount, parse_strength, parse_strength_range):
        with suppress(StockroomError):
            assert parse(text) is not None


@given(st.sampled_from(list(Kind)), st.integers(0, 10**12))
def test_text_to_amount_to_text_is_stable(kind: Kind, millionths: int) -> None:
    micro = millionths * PER_UNIT[kind] // 1_000_000
    text = format_amount(Amount(kind, micro))
    assert format_amount(parse_amount(text, expect=kind)) == text


@given(st.sampled_from([Kind.MASS, Kind.VOLUME]), st.integers(0, 10**9))
def test_whole_thousandths_survive_the_round_trip(kind: Kind, thousandths: int) -> None:
    amount = Amount(kind, thousandths * PER_UNIT[kind] // 1000)
    assert parse_amount(format_amount(amount)) == amount


@pytest.mark.parametrize(
    ("text", "written"),
    [("½ L", '"0.5 L"'), ("1½ L", '"1.5 L"'), ("1/2 L", '"0.5 L"'), ("2 1/4 dm3", '"2.25 dm3"')],
)
def test_a_fraction_is_shown_with_a_point_instead(text: str, written: str) -> None:
    with pytest.raises(BadAmount) as caught:
        parse_amount(text)
    assert f'"{text}"' in caught.value.message
    assert written in caught.value.hint


def test_less_than_nothing_is_not_told_that_nothing_would_do() -> None:
    with pytest.raises(BadAmount) as caught:
        parse_amount("-10 cm3")
    assert caught.value.hint == "Write it without the minus sign."
