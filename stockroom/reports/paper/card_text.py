"""Make cards as text: what stands on the paper, at most as wide as asked."""

from __future__ import annotations

import textwrap

from stockroom.reports.paper.card import Card, Cards, cards_lines, danger_key, more_data, step_key
from stockroom.reports.paper.card_hazards import Danger
from stockroom.reports.paper.card_sources import Taken
from stockroom.reports.paper.card_steps import Step
from stockroom.reports.paper.head import foot_lines, head_lines, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.sheet import NARROWEST, page, section, wrap

_BLANK = "_" * 16


def cards_text(sheet: Cards, width: int) -> str:
    """The cards one under the other."""
    cards = [_card(sheet, card, width) for card in sheet.cards]
    if not cards:
        cards = ["Nothing to make up."]
    return page([head_lines(sheet.head, width), *cards, foot_lines(sheet.head, width)])


def _card(sheet: Cards, card: Card, width: int) -> str:
    fresh = " [fresh]" if card.fresh else ""
    first = f"{mark(sheet.head, card.key)}{card.number}{fresh}  {card.name}, {card.volume}"
    top = [wrap(first, width, hang=6), wrap(card.when, width, indent=6, hang=6)]
    top += [wrap(f"for {one}", width, indent=6, hang=8) for one in card.served]
    top += [wrap(card.good_until, width, indent=6)] if card.good_until else []
    top += [wrap(f"! {each}", width, indent=6, hang=8) for each in card.warnings]
    taken = [line for each in card.takes for line in _taken(each, width)]
    into = " ".join(filter(None, [card.volume, card.vessels]))
    taken.append(wrap(f"into {into}", width, indent=2, hang=8))
    steps = [
        line
        for n, step in enumerate(card.steps, 1)
        for line in _step(n, step, width, mark(sheet.head, step_key(card, n)))
    ]
    over = [wrap(card.over, width, indent=2)] if card.over else []
    dangers = [
        line
        for each in card.dangers
        for line in _danger(each, width, mark(sheet.head, danger_key(card, each)))
    ]
    blanks = [f"  {each:<22}{_BLANK}" for each in card.blanks]
    back = [line for each in card.type_back for line in _typed(each, width)]
    parts = (
        "\n".join(top),
        section("TAKE", taken),
        section("STEPS", steps),
        section("OVER", over),
        section("HAZARDS", dangers),
        section("FILL IN", blanks),
        section("THEN TYPE", back),
    )
    return page(parts)


def _typed(command: str, width: int) -> list[str]:
    # as it is typed: "cm3" stays so
    shown = textwrap.wrap(command, max(width - 4, NARROWEST), break_on_hyphens=False)
    return [f"{'    ' if number else '  '}{line}" for number, line in enumerate(shown)]


def _taken(each: Taken, width: int) -> list[str]:
    form = f" [{each.form.upper()}]" if each.form else ""
    often = f" ({each.each})" if each.each else ""
    fills = ", to the mark" if each.filled else ""
    lines = [wrap(f"{each.amount}{often} of {each.what}{form}{fills}", width, indent=2, hang=8)]
    where = f"{each.bottle}, {each.place}" if each.place else each.bottle or each.origin
    told = (where, each.known, each.habit.upper()[:3] + each.habit[3:], each.tool)
    return lines + [wrap(one, width, indent=6, hang=8) for one in told if one]


def _step(number: int, step: Step, width: int, sign: str) -> list[str]:
    lines = [f"  {step.day}".replace("\u00a0", " ")] if step.day else []
    lines.append(wrap(f"{sign} [ ] {number:>2}  {step.words}", width, hang=10))
    lines += [wrap(each, width, indent=10, hang=12) for each in step.details]
    return lines + [wrap(f"! {each}", width, indent=10, hang=12) for each in step.cautions]


def _danger(each: Danger, width: int, sign: str) -> list[str]:
    said = [f"{code} {words}".strip() for code, words in each.statements]
    marks = [" ".join(filter(None, [each.signal, *each.symbols]))]
    told = ". ".join(one.rstrip(".") for one in [*filter(None, marks), *said])
    out = "comes out: " if each.product else "goes in: "
    lines = [wrap(f"{sign} {out}{each.whose}", width, hang=4)]
    lines.append(wrap(f"{told}.", width, indent=4, hang=4))
    return lines + ([wrap(f"({each.basis})", width, indent=4, hang=4)] if each.basis else [])


CARD = Kind("card", cards_text, cards_lines, more_data)
