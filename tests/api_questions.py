"""The questions of the API, each with the command that asks the same."""

from __future__ import annotations

from typing import Any

WEEK4 = {"from": "2027-01-25", "to": "2027-01-29"}
IN_WEEK4 = ["--from", "2027-01-25", "--to", "2027-01-29"]

QUESTIONS: list[tuple[str, dict[str, Any], list[str]]] = [
    ("plan", {}, ["plan"]),
    ("plan", WEEK4, ["plan", *IN_WEEK4]),
    ("plan", {"cautious": "true", "as_at": "2027-01-25"}, ["plan", "--cautious"]),
    ("fresh", WEEK4, ["fresh", *IN_WEEK4]),
    ("past", {"on": "2027-02-10"}, ["past", "--on", "2027-02-10"]),
    ("usage", {}, ["usage"]),
    ("buying", {}, ["buying"]),
    ("on-order", {}, ["on-order"]),
    ("ready/K11", {}, ["ready", "K11"]),
    ("ready/2027-03-23", {}, ["ready", "2027-03-23"]),
    ("why", {"ref": "K15"}, ["why", "K15"]),
    ("why", {"ref": "K11", "instead": "S10"}, ["why", "K11", "--instead", "S10"]),
    ("shelf", {}, ["shelf"]),
    ("shelf", {"what": "hypo", "on": "2027-02-10"}, ["shelf", "hypo", "--on", "2027-02-10"]),
    ("shelf", {"known_on": "2026-12-01"}, ["shelf", "--known-on", "2026-12-01"]),
    ("diary/B06", {}, ["diary", "B06"]),
    ("fades/B01", {"below": ["80 vol", "60 vol"]},
     ["fades", "B01", "--below", "80 vol", "--below", "60 vol"]),
    ("hazards", {"what": "S06"}, ["hazards", "S06"]),
    ("hazards", {"what": "sodium hydroxide", "strength": "0.5 mol/dm3"},
     ["hazards", "sodium hydroxide", "0.5 mol/dm3"]),
    ("rule", {"line": "starch 0.5 % w/v"}, ["rule", "starch 0.5 % w/v"]),
    ("changed", {}, ["changed"]),
    ("what-if", {"groups": "K08=11", "shift": "K13=2027-02-09", "without": "S01"},
     ["what-if", "--groups", "K08=11", "--shift", "K13=2027-02-09", "--without", "S01"]),
    ("what-if", {"cancel": "K05", "book": "R01,2027-02-11,12"},
     ["what-if", "--cancel", "K05", "--book", "R01,2027-02-11,12"]),
    ("week", {"of": "2027-01-27"}, ["week", "2027-01-27"]),
    ("day", {}, ["day"]),
    ("day/2027-03-23", {}, ["day", "2027-03-23"]),
    ("day/k11", {}, ["day", "k11"]),
]  # fmt: skip
"""The question, its parameters, and the command that asks the same."""
