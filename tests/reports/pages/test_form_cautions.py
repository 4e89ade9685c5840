"""The caution above a form is the one the list of cautions has."""

from __future__ import annotations

import pytest

from stockroom.findings import DO_NOT_TOUCH
from stockroom.reports.pages.form_cautions import form_caution
from stockroom.safety.cautions import CAUTIONS


@pytest.mark.parametrize(
    ("form", "said"),
    [
        ("open", DO_NOT_TOUCH),
        ("tested", "crystals"),
        ("discard", "local limits decide what may go down a sink"),
        ("discard", "never one that held solvent"),
        ("unknown", "never find out by trial"),
        ("name-unknown", "what has no label is unknown"),
    ],
)
def test_work_that_can_hurt_has_its_caution_above_it(form: str, said: str) -> None:
    assert said in form_caution(form)


def test_the_words_of_a_discard_are_those_of_the_list() -> None:
    texts = [each.text for each in CAUTIONS if each.text in form_caution("discard")]
    assert len(texts) == 2


@pytest.mark.parametrize("form", ["draw", "count", "book", "", "no form"])
def test_the_rest_needs_no_word(form: str) -> None:
    assert form_caution(form) == ""
