"""The API as its own description has it: what anybody may send is answered as described.

Schemathesis makes requests up from OpenAPI, always the same ones. Left to itself it never hits on
a bottle's number, so a name, a day or an amount that means something is put in. A fault of the
program, or a status, a kind of content or a body that is not described, fails.
"""

from __future__ import annotations

import shutil
from collections import Counter
from collections.abc import Iterator
from datetime import date
from pathlib import Path
from typing import Any

import pytest
import schemathesis
from hypothesis import HealthCheck, Phase, given, settings
from hypothesis import strategies as st
from schemathesis.checks import not_a_server_error
from schemathesis.generation import GenerationMode
from schemathesis.specs.openapi.checks import (
    content_type_conformance,
    response_headers_conformance,
    response_schema_conformance,
    status_code_conformance,
)
from windows import KEY

from stockroom.service.kept import answers_kept
from stockroom.web.app import house_app
from stockroom.web.house import House

pytestmark = pytest.mark.file

CHECKS = [
    not_a_server_error,
    status_code_conformance,
    content_type_conformance,
    response_headers_conformance,
    response_schema_conformance,
]
EXAMPLES = 4
"""Requests made up for an operation, of each kind: each takes a fraction of a second."""

DAYS = ["2027-01-25", "2027-02-10", "2027-03-23", "2026-11-02", "0001-01-01", "9999-12-31", ""]
AMOUNTS = ["1 cm3", "100 cm3", "2 g", "1 item", "a third left", "0 g", "999999999999 kg", "1e400 g"]
STRENGTHS = ["0.1 mol/dm3", "80 vol", "12 % w/v", "0 mol/dm3", "1e300 mol/dm3", "-1 g/dm3"]
NAMES = ["S13", "b01", "S02", "B36", "K11", "K08", "R01", "M14", "O01", "hypo", "starch", "A1", ""]
LINES = ["sodium chloride", "starch 0.5 % w/v", "sodium thiosulfate 0.100 mol/dm3", "departments"]
SUPPOSED = [
    "K08=11",
    "K08=99999999999",
    "K13=2027-02-09",
    "K13=14:00",
    "K13=,",
    "R01,2027-02-11,12",
]
NUMBERS = ["0", "1", "-1", "90071992547409931", "1.5", "1e9", "08:15", "25:99"]
NAMED, ASKED = [*LINES, *NAMES], [*SUPPOSED, *NAMES]
MEANT = (*DAYS, *AMOUNTS, *STRENGTHS, *NAMES, *LINES, *SUPPOSED, *NUMBERS)

BY_NAME: dict[str, list[str]] = {
    **dict.fromkeys(("as_at", "on", "from", "to", "of", "known_on", "since", "expected"), DAYS),
    **dict.fromkeys(("bottle", "booking", "recipe", "first", "ref", "instead", "place"), NAMES),
    **dict.fromkeys(("amount", "volume", "size", "opened", "gross", "tare"), AMOUNTS),
    **dict.fromkeys(("line", "what", "item"), NAMED),
    **dict.fromkeys(("strength", "below", "uncertainty"), STRENGTHS),
    **dict.fromkeys(("groups", "shift", "cancel", "book", "without"), ASKED),
    "by": ["T1"],
}
"""What means something, by the name of the place; anything of `MEANT` elsewhere."""


@pytest.fixture(scope="module")
def described(
    college_file: Path, tmp_path_factory: pytest.TempPathFactory
) -> Iterator[schemathesis.schemas.BaseSchema]:
    """The API over a copy of the practice store, as it describes itself."""
    store = tmp_path_factory.mktemp("schema") / "own.sqlite"
    shutil.copy(college_file, store)
    # the name schemathesis calls an application by
    app = house_app(House(store, KEY, date(2027, 1, 25), names=("testserver", "localhost")))
    with answers_kept():
        yield schemathesis.openapi.from_asgi("/api/openapi.json", app)


def sensible(draw: Any, case: Any) -> None:
    """Put something that means something into most places, and leave some out."""
    for places in (case.path_parameters, case.query, case.body):
        if not isinstance(places, dict):
            continue
        for name, value in list(places.items()):
            pool = st.sampled_from(BY_NAME.get(name, MEANT))
            does = draw(st.sampled_from(["put in", "put in", "put in", "leave out", "keep"]))
            if does == "put in":
                word = draw(pool)
                places[name] = [word] if isinstance(value, list) else word or value
            elif does == "leave out" and places is not case.path_parameters:
                del places[name]
    if isinstance(case.body, dict):
        case.body["by"] = "T1"


def answered(operation: Any, mode: GenerationMode, *, helped: bool, examples: int) -> Counter[int]:
    """Send so many made-up requests; how often each status came. Raises: what a check found."""
    statuses: Counter[int] = Counter()

    @settings(
        max_examples=examples,
        derandomize=True,
        deadline=None,
        database=None,
        phases=[Phase.generate],
        suppress_health_check=list(HealthCheck),
    )
    @given(case=operation.as_strategy(generation_mode=mode), data=st.data())
    def holds(case: Any, data: Any) -> None:
        if helped:
            sensible(data.draw, case)
        came = case.call()
        statuses[came.status_code] += 1
        case.validate_response(came, checks=CHECKS)

    holds()
    return statuses


@pytest.mark.parametrize("kind", ["as described", "sensible", "as not described"])
@pytest.mark.parametrize("method", ["get", "post"])
def test_whatever_is_sent_is_answered_as_described(described: Any, method: str, kind: str) -> None:
    mode = GenerationMode.NEGATIVE if kind == "as not described" else GenerationMode.POSITIVE
    statuses: Counter[int] = Counter()
    for found in described.get_all_operations():
        operation = found.ok()
        if operation.method == method:
            statuses += answered(operation, mode, helped=kind == "sensible", examples=EXAMPLES)
    assert statuses.total() > 50
    assert kind != "sensible" or statuses[200] > 10
