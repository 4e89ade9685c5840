"""The caution that stands above a form where the work can hurt, in the words of `safety/`."""

from __future__ import annotations

from stockroom.safety.cautions import CAUTIONS, PAST_TESTING, Step

_TO_BEGIN = (15, Step.BEGIN)
_TO_CLEAR = ((13, Step.WASTE), (8, Step.WASTE))


def form_caution(form: str) -> str:
    """What is said before the event of that name is done; "" where it needs no word."""
    if form in ("open", "tested"):
        # the form is for any bottle, so the words say which are meant
        return f"Of what makes peroxides: {_small(PAST_TESTING.text.partition('. ')[2])}"
    if form == "discard":
        return " ".join(_text(number, step) for number, step in _TO_CLEAR)
    if form == "destroyed":
        return f"Tick it only once nothing of it stands. {_text(6, Step.MIX)}"
    if form in ("unknown", "name-unknown"):
        return _text(*_TO_BEGIN)
    return ""


def _text(number: int, step: Step) -> str:
    return next(each.text for each in CAUTIONS if (each.number, each.step) == (number, step))


def _small(text: str) -> str:
    return text[:1].lower() + text[1:]
