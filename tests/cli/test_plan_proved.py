"""`plan --exact`: how near the best one family's makes are, proved or open."""

from __future__ import annotations

import builtins
from pathlib import Path
from typing import Any

import pytest
from conftest import Stockroom

DAY = ("--as-at", "2027-01-04")


def test_a_family_is_proved(stockroom: Stockroom, practice: Path) -> None:
    answer = stockroom("plan", "--exact", "ammonium iron(II) sulfate", *DAY, store=practice)
    assert answer.code == 0
    assert answer.out.startswith("PRACTICE\n2 lines made together: ammonium iron(II) sulfate")
    assert "sulfuric acid 0.500 mol/dm³" in answer.out
    assert "no way of making these costs less than" in answer.out
    assert "(open gap 0 %)" in answer.out


def test_a_stock_in_a_bottle_stands_for_all_that_is_made_of_its_substance(
    stockroom: Stockroom, practice: Path
) -> None:
    # S01 is 1.00 mol/dm³, and three dilutions are made of it
    words = ("plan", "--exact", "sodium thiosulfate 1.00 mol/dm3", "--json", *DAY)
    lines = stockroom(*words, store=practice).json["lines"]
    assert len(lines) >= 2
    assert all(line.startswith("sodium thiosulfate") for line in lines)


def test_what_the_plan_does_not_make_is_refused(stockroom: Stockroom, practice: Path) -> None:
    answer = stockroom("plan", "--exact", "ethanol", *DAY, store=practice)
    assert answer.code == 1
    assert "The plan makes no ethanol" in answer.err


def test_the_proof_as_data(stockroom: Stockroom, practice: Path) -> None:
    answer = stockroom("plan", "--exact", "starch", "--json", *DAY, store=practice).json
    assert answer["practice"] is True
    assert answer["proved"] is True
    assert answer["gap"] == 0
    assert answer["bound"] == answer["total"] > 0


def test_what_is_not_made_gets_the_nearest_that_is(stockroom: Stockroom, practice: Path) -> None:
    answer = stockroom("plan", "--exact", "strach", *DAY, store=practice)
    assert answer.code == 2
    assert "'strach'" in answer.err or '"strach"' in answer.err
    assert "starch" in answer.err


@pytest.mark.parametrize("seconds", ["0", "-5", "1e9"])
def test_a_time_that_is_none_is_refused(stockroom: Stockroom, practice: Path, seconds: str) -> None:
    words = ("plan", "--exact", "starch", f"--seconds={seconds}", *DAY)
    answer = stockroom(*words, store=practice)
    assert answer.code == 2
    assert f"--seconds {float(seconds):g}" in answer.err


def test_without_the_solver_it_says_what_to_install(
    stockroom: Stockroom, practice: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    real = builtins.__import__

    def without(name: str, *args: Any, **more: Any) -> Any:
        if name == "highspy":
            raise ImportError(name)
        return real(name, *args, **more)

    monkeypatch.setattr(builtins, "__import__", without)
    answer = stockroom("plan", "--exact", "starch", *DAY, store=practice)
    assert answer.code == 1
    assert 'pip install "stockroom[exact]"' in answer.err


@pytest.mark.parametrize(
    ("words", "named"),
    [
        (("--exact", "starch", "--keep", "--by", "T1"), ("--exact", "--keep")),
        (("--exact", "starch", "--from", "2027-01-25"), ("--exact", "--from")),
        (("--exact", "starch", "--to", "2027-01-29"), ("--exact", "--to")),
        (
            ("--exact", "starch", "--from", "2027-01-25", "--to", "2027-01-29"),
            ("--exact", "--from and --to"),
        ),
        (("--seconds", "10"), ("--seconds 10", "--exact")),
        (("--seconds", "30"), ("--seconds 30", "--exact")),
    ],
    ids=lambda value: " ".join(value),
)
def test_what_does_not_go_together_is_refused_and_not_dropped(
    stockroom: Stockroom, practice: Path, words: tuple[str, ...], named: tuple[str, ...]
) -> None:
    answer = stockroom("plan", *words, *DAY, store=practice)
    assert (answer.code, answer.out) == (2, "")
    assert all(word in answer.err for word in named)
