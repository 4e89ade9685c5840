from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

PEROXIDE = ("--of", "hydrogen peroxide")

# Every value worked out by hand
SUMS = [
    (("strength", "20 vol", *PEROXIDE, "--to", "mol/dm3"), 1.785),
    (("strength", "20 vol", *PEROXIDE, "--to", "% w/v"), 6.07),
    (("strength", "91 vol", *PEROXIDE, "--to", "mol/dm3"), 8.12),
    (("strength", "36 % w/w", "--of", "HCl", "--to", "M", "--density", "1.18"), 11.65),
    (("strength", "98 % w/w", "--of", "sulfuric acid", "--to", "M", "--density", "1.84"), 18.4),
]


@pytest.mark.parametrize(("words", "value"), SUMS)
def test_bench_sums_agree_with_the_trade_side(
    stockroom: Stockroom, words: tuple[str, ...], value: float
) -> None:
    assert stockroom(*words, "--json").json["value"] == pytest.approx(value, rel=2e-3)


def test_the_answer_stands_on_the_first_line(stockroom: Stockroom) -> None:
    first = stockroom("strength", "100 vol", *PEROXIDE, "--to", "mol/dm3").out.splitlines()[0]
    assert first == "100 vol hydrogen peroxide is 8.923 mol/dm³"
