"""Every family of the college's makes is proved: no plan of them costs less."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.lots.families import families
from stockroom.planning.facts import Facts
from stockroom.planning.proof import proof_of
from stockroom.planning.settle import needs_of, settled
from stockroom.service.known import known_from
from stockroom.store.reading import reading


@pytest.fixture(scope="module", params=["2027-01-04", "2027-02-08"])
def known(request: pytest.FixtureRequest, practice: Path) -> Facts:
    with reading(practice) as reader:
        return known_from(reader, date.fromisoformat(request.param))


def test_every_family_is_proved(known: Facts) -> None:
    made = settled(known, needs_of(known))[1]
    problem = made.numbers.problem
    heads = [problem.sorts[family[0]].name for family in families(problem)]
    assert len(heads) >= 5
    open_gaps = {
        key: proof.gap
        for key in dict.fromkeys(heads)
        if not (proof := proof_of(made, frozenset({key}), 20)).proved
    }
    assert open_gaps == {}
