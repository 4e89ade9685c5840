"""Several batches read as one line or not: the tests, the lives, and the published figures."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from stability_examples import TABLE_IV, TABLE_VI, TABLE_VIII, batch, batches

from stockroom.errors import MissingFigure
from stockroom.keeping.fits import fit_line
from stockroom.keeping.pooling import LEVEL, Batch, Model, lives, p_of, pool, worst

# at least so much, one-sided 95 %: published and recomputed (a+b) unless marked (b); LeBlond
# 2011 figures 4, 6, 7 and tables V, VII, IX; JMP 12.0.1; the R package expirest 0.1.7
PUBLISHED = [
    ("IV", 95.0, Model.COMMON, 25.995763),
    ("IV", 95.0, Model.INTERCEPTS, 24.566877),  # (b)
    ("IV", 95.0, Model.POOLED, 23.470385),  # (b)
    ("IV", 95.0, Model.OWN, 23.148042),  # (b)
    ("IV", 94.95, Model.COMMON, 26.224098),
    ("IV", 94.95, Model.INTERCEPTS, 24.800303),
    ("IV", 94.95, Model.POOLED, 23.667246),
    ("IV", 94.95, Model.OWN, 23.341843),
    ("VI", 95.0, Model.INTERCEPTS, 23.397266),
    ("VIII", 95.0, Model.POOLED, 15.606131),
    ("VIII", 95.0, Model.OWN, 15.844878),
]
TABLES = {"IV": TABLE_IV, "VI": TABLE_VI, "VIII": TABLE_VIII}


@pytest.mark.parametrize(("table", "lowest", "model", "months"), PUBLISHED)
def test_the_life_is_the_published_one(
    table: str, lowest: float, model: Model, months: float
) -> None:
    found = lives(pool(TABLES[table]).fits(model), lowest=lowest)
    assert worst(found)[1] == pytest.approx(months, abs=1e-5)


@pytest.mark.parametrize(
    ("table", "model", "decides"),
    [
        ("IV", Model.COMMON, "b2"),
        ("VI", Model.INTERCEPTS, "b5"),
        ("VIII", Model.POOLED, "b8"),
    ],
)
def test_the_tests_choose_as_published(table: str, model: Model, decides: str) -> None:
    # LeBlond 2011, the model each table was made to show (a+b)
    pooled = pool(TABLES[table])
    assert pooled.model is model
    assert worst(lives(pooled.fits(), lowest=95))[0] == decides


@pytest.mark.parametrize(
    ("table", "slopes", "p", "intercepts"),
    # F ratios printed to three decimals, recomputed to six (a+b)
    [
        ("IV", 0.228685, 0.797, 0.435993),
        ("VI", 0.183109, 0.834, 21.738021),
        ("VIII", 1.955419, 0.170, 72.124216),
    ],
)
def test_the_ratios_are_the_published_ones(
    table: str, slopes: float, p: float, intercepts: float
) -> None:
    pooled = pool(TABLES[table])
    assert pooled.slopes
    assert pooled.intercepts
    assert pooled.slopes.f == pytest.approx(slopes, abs=1e-5)
    assert pooled.slopes.p == pytest.approx(p, abs=5e-4)
    assert pooled.intercepts.f == pytest.approx(intercepts, abs=1e-5)


def test_the_other_denominator_gives_the_figure_others_print() -> None:
    # the bracketed figure of the same study (b): mean square about one slope beneath
    tests = pool(TABLE_IV)
    assert tests.intercepts
    assert tests.intercepts.nested == pytest.approx(0.462413, abs=1e-5)
    assert tests.intercepts.p == pytest.approx(0.651, abs=5e-4)


def test_the_common_line_is_the_published_one() -> None:
    # LeBlond 2011 table V (a+b)
    line = pool(TABLE_IV).fits()["b2"]
    assert (line.start, line.slope) == pytest.approx((100.566879, -0.192994), abs=1e-5)
    ratio = line.slope**2 / (line.scatter**2 * line.v_slope)
    assert ratio == pytest.approx(129.051, abs=5e-3)


def test_the_lines_with_one_slope_are_the_published_ones() -> None:
    # LeBlond 2011 table VII (a+b)
    found = pool(TABLE_VI).fits()
    starts = [found[name].start for name in ("b3", "b4", "b5")]
    assert starts == pytest.approx([102.175653, 104.255189, 100.820022], abs=1e-5)
    assert {round(line.slope, 6) for line in found.values()} == {-0.213121}


@pytest.mark.parametrize(("f", "p"), [(2.72, 0.048), (1.83, 0.150)])
def test_chances_of_a_study_whose_results_are_not_to_be_had(f: float, p: float) -> None:
    # Minitab 20, five batches and forty results (a): the life itself cannot be reproduced
    assert p_of(f, 4, 30) == pytest.approx(p, abs=1e-3)


def test_degrees_of_freedom_go_with_the_model() -> None:
    pooled = pool(TABLE_IV)
    found = [pooled.fits(model)["b2"].df for model in Model]
    # N - 2, N - (k + 1), N - 2k and n - 2 of 31 results in 3 batches, 10 of them in b2
    assert found == [29, 27, 25, 8]


def test_the_name_of_a_model_says_whose_scatter() -> None:
    assert ("one scatter" in Model.POOLED, "own scatter" in Model.OWN) == (True, True)


def test_one_batch_needs_no_test() -> None:
    alone = pool([batch("b4")])
    assert (alone.slopes, alone.intercepts) == (None, None)
    assert alone.fits()["b4"] == fit_line(batch("b4").times, batch("b4").values)


def test_two_results_a_batch_leave_nothing_to_compare_by() -> None:
    pairs = [Batch("S1", (0.0, 9.0), (1.0, 0.9)), Batch("S2", (0.0, 9.0), (1.0, 0.8))]
    with pytest.raises(MissingFigure, match="4 results of 2 batches"):
        pool(pairs)


def test_a_batch_of_two_results_has_no_scatter_of_its_own() -> None:
    few = pool([batch("b4"), Batch("S2", (0.0, 12.0), (104.0, 101.0))])
    assert few.fits(Model.POOLED)["S2"].df == 6
    with pytest.raises(MissingFigure, match="S2 has 2 results"):
        few.fits(Model.OWN)


def test_results_without_scatter_are_refused() -> None:
    exact = [Batch(name, (0.0, 1.0, 2.0), (3.0, 2.0, 1.0)) for name in ("S1", "S2")]
    with pytest.raises(MissingFigure, match="exactly"):
        pool(exact)


def test_a_batch_of_one_time_is_refused() -> None:
    with pytest.raises(MissingFigure, match="all at 4"):
        pool([batch("b4"), Batch("S2", (4.0, 4.0), (1.0, 2.0))])


# -- always -----------------------------------------------------------------------------


@given(st.permutations(TABLE_VI))
def test_the_order_of_the_batches_does_not_matter(shuffled: list[Batch]) -> None:
    name, life = worst(lives(pool(shuffled).fits(), lowest=95))
    assert name == "b5"
    assert life == pytest.approx(23.397266, abs=1e-5)


@given(st.sampled_from("b2 b3 b4 b5 b7 b8".split()), st.integers(2, 4))
def test_the_same_batch_again_is_one_line(name: str, times: int) -> None:
    one = batch(name)
    alike = pool([Batch(f"S{n}", one.times, one.values) for n in range(times)])
    assert alike.model is Model.COMMON
    assert alike.slopes
    assert alike.slopes.p == pytest.approx(1.0)


@given(st.floats(-3, 3))
def test_a_batch_that_only_starts_elsewhere_shares_the_slope(up: float) -> None:
    one = batch("b7")
    moved = Batch("S2", one.times, tuple(value + up for value in one.values))
    pooled = pool([one, moved])
    assert pooled.slopes
    assert pooled.slopes.alike
    assert pooled.intercepts
    assert (pooled.model is Model.COMMON) is (pooled.intercepts.p >= LEVEL)


@given(st.sets(st.sampled_from("b2 b3 b4 b5 b7 b8".split()), min_size=2), st.floats(80, 96))
def test_separate_lines_live_no_longer_than_their_worst(names: set[str], lowest: float) -> None:
    found = lives(pool(batches(" ".join(sorted(names)))).fits(Model.OWN), lowest=lowest)
    alone = {name: lives(pool([batch(name)]).fits(), lowest=lowest)[name] for name in names}
    assert worst(found)[1] == pytest.approx(min(alone.values()))
