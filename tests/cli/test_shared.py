from __future__ import annotations

import shlex

import pytest

from stockroom.cli.commands import NAMES
from stockroom.cli.main import _wanted, program, value_options
from stockroom.cli.shared import SEVERAL, Shared, pull
from stockroom.errors import BadInput

OPTIONS = {"draw": frozenset({"--note", "--for"}), "plan": frozenset({"--from"})}


def pulled(line: str) -> tuple[Shared, list[str]]:
    return pull(shlex.split(line), OPTIONS)


@pytest.mark.parametrize(
    "line",
    [
        "--store a.sqlite --as-at 2027-01-04 --json plan --from 2027-01-25",
        "plan --from 2027-01-25 --store a.sqlite --as-at 2027-01-04 --json",
        "--json plan --store=a.sqlite --from 2027-01-25 --as-at=2027-01-04",
    ],
)
def test_shared_options_may_stand_anywhere(line: str) -> None:
    shared, left = pulled(line)
    assert shared == Shared(store="a.sqlite", as_at="2027-01-04", json=True)
    assert left == ["plan", "--from", "2027-01-25"]


@pytest.mark.parametrize("value", ["--json", "--by", "--store=x"])
def test_the_value_of_an_option_is_never_taken_for_a_shared_one(value: str) -> None:
    shared, left = pulled(f"draw S05 200cm3 --note {value}")
    assert shared == Shared()
    assert left == ["draw", "S05", "200cm3", "--note", value]


def test_only_the_options_of_the_command_named_take_values() -> None:
    assert pulled("plan --note --json")[0].json


def test_a_later_word_does_not_name_another_command() -> None:
    shared, _ = pulled("draw plan --from --json")
    assert shared.json


def test_nothing_after_two_dashes_is_touched() -> None:
    shared, left = pulled("draw -- S05 --json")
    assert (shared.json, left) == (False, ["draw", "--", "S05", "--json"])


@pytest.mark.parametrize("line", ["plan --store", "plan --as-at", "plan --by --json", "--store="])
def test_a_missing_value_is_asked_for(line: str) -> None:
    with pytest.raises(BadInput, match="after it"):
        pulled(line)


def test_two_different_stores_are_refused_and_both_quoted() -> None:
    with pytest.raises(BadInput, match=r"'a'.*'b'"):
        pulled("plan --store a --store b")


def test_the_same_store_twice_is_no_trouble() -> None:
    assert pulled("--store a plan --store a")[0].store == "a"


def test_an_amount_below_zero_stays_one_word() -> None:
    assert pulled("draw S05 '-5 cm3'")[1] == ["draw", "S05", " -5 cm3"]


def test_initials_come_from_the_line_before_the_environment(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.setenv("STOCKROOM_BY", "T2")
    assert Shared(by="T1").initials == "T1"
    assert Shared().initials == "T2"


def test_the_value_options_are_read_off_the_commands_themselves() -> None:
    options = value_options(program())
    assert {"--for", "--on"} <= options["draw"]
    assert "--sure" not in options["found"]
    assert not {"--good", "--bad"} & options["look"]


@pytest.mark.parametrize(
    "line", ["weigh --of HCl --of NaOH", "weigh --of=HCl --of NaOH", "weigh --of HCl --of=NaOH"]
)
def test_a_second_value_of_an_option_is_refused_and_both_are_quoted(line: str) -> None:
    with pytest.raises(BadInput, match="--of is given twice: 'HCl' and 'NaOH'"):
        pull(shlex.split(line), value_options(program()))


@pytest.mark.parametrize(
    "line", ["weigh --of HCl --of HCl", "titrate --dilution a --dilution b", "x -- --of a --of b"]
)
def test_the_same_value_and_an_option_of_several_pass(line: str) -> None:
    words = shlex.split(line)
    assert pull(words, value_options(program()))[1] == words


def test_the_options_that_take_several_are_all_named() -> None:
    commands = vars(program())["commands"]
    found = {
        name: frozenset(o for param in each.params if _again(param) for o in param.opts)
        for name, each in commands.items()
    }
    assert {name: options for name, options in found.items() if options} == SEVERAL


def _again(param: object) -> bool:
    option = getattr(param, "param_type_name", "") == "option"
    return option and bool(getattr(param, "multiple", False))


@pytest.mark.parametrize(
    ("line", "built"),
    [
        ("draw S13 100cm3", {"draw"}),
        ("--store draw --as-at 2027-01-04 plan", {"draw", "plan"}),
        ("--json --by=T1 plan", {"plan"}),
        ("why plan", {"why", "plan"}),
    ],
)
def test_only_the_commands_a_line_can_mean_are_built(line: str, built: set[str]) -> None:
    words = shlex.split(line)
    front = program(_wanted(words))
    assert set(vars(front)["commands"]) == built
    assert pull(words, value_options(front)) == pull(words, value_options(program()))


@pytest.mark.parametrize("line", ["", "--help", "--help draw", "drwa S13", "--version", "-- draw"])
def test_a_line_that_begins_with_no_command_gets_them_all(line: str) -> None:
    assert _wanted(shlex.split(line)) == NAMES
