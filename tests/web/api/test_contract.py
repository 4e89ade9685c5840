"""What OpenAPI tells of the answers is all of what they hold, and nothing else."""

from __future__ import annotations

import copy
from typing import TYPE_CHECKING, Any

import jsonschema_rs
import pytest
from api_questions import QUESTIONS

if TYPE_CHECKING:
    from windows import Window

DESIGN = {
    "plan": "as_at period needs makes past usage orders short guesses",
    "needs": "booking recipe on item strength amount unit outcome from make reasons",
    "makes": "id item strength volume unit earliest latest on ready for sources cautions reasons",
    "past": "bottle item condition good_until decided_by",
    "usage": "item form amount unit",
    "orders": "item pack packs need_by order_by late_by_open_days cost shares reasons",
    "short": "booking item amount unit reason",
}
"""The keys the design fixes, of the plan and of each of its lists."""


def closed(schema: Any) -> Any:
    """The schema with no key allowed that it does not name."""
    if isinstance(schema, list):
        return [closed(each) for each in schema]
    if not isinstance(schema, dict):
        return schema
    found = {key: closed(each) for key, each in schema.items()}
    if "properties" in found:
        found.setdefault("additionalProperties", False)
    return found


def answers(described: dict[str, Any], path: str) -> Any:
    """The schema of what a question is answered with."""
    told = described["paths"][path]["get"]["responses"]["200"]["content"]["application/json"]
    return {**told["schema"], "components": described["components"]}


def template_of(described: dict[str, Any], question: str) -> str:
    """The path of a question as OpenAPI writes it."""
    first, _, rest = question.partition("/")
    named = [path for path in described["paths"] if path.startswith(f"/api/{first}/{{")]
    return named[0] if rest else f"/api/{first}"


def test_every_key_of_every_answer_is_described(window: Window) -> None:
    described = window.api("/api/openapi.json")
    window.enter("lost", bottle="S03")
    shut = closed(copy.deepcopy(described))
    for question, asked, _ in QUESTIONS:
        if question == "changed":
            continue
        schema = answers(shut, template_of(described, question))
        found = window.api(f"/api/{question}", **asked)
        jsonschema_rs.validator_for(schema, validate_formats=True).validate(found)


def test_a_key_left_out_of_the_description_is_noticed(onlooker: Window) -> None:
    shut = closed(onlooker.api("/api/openapi.json"))
    del shut["components"]["schemas"]["Need"]["properties"]["outcome"]
    checker = jsonschema_rs.validator_for(answers(shut, "/api/plan"))
    with pytest.raises(jsonschema_rs.ValidationError):
        checker.validate(onlooker.api("/api/plan"))


@pytest.mark.parametrize("part", DESIGN)
def test_the_keys_of_the_design_are_required(onlooker: Window, part: str) -> None:
    schemas = onlooker.api("/api/openapi.json")["components"]["schemas"]
    plan = schemas["PlanAnswer"]
    if part != "plan":
        plan = schemas[plan["properties"][part]["items"]["$ref"].rpartition("/")[2]]
    assert set(DESIGN[part].split()) <= set(plan["required"])
