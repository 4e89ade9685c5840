"""Peroxide-formers get a safety date even where nobody wrote them a rule.

The class stands with the substance; the interval is the published one for that class,
without a stabiliser unless the class is only sold with one. A rule of the line itself,
from the same origin, comes first.
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.measure.periods import Period
from stockroom.planning.facts import Form
from stockroom.safety.peroxide_formers import CLASSES, TEST_OR_DISCARD, Interval, interval

# what a line may say instead: a test of its own, or a date that no test moves
_SAFETY_KINDS = (RuleKind.TEST, RuleKind.LIFE, RuleKind.NEVER)
# sold with an inhibitor in it; without one it would be a matter of hours
_INHIBITED = "C"


def with_former_rules(rules: Iterable[Rule], former: str, form: Form) -> tuple[Rule, ...]:
    """The rules of a line, and the published ones for its class where it has none of its own.

    `former` is the class of its substance, "" for none. A solution of a former is left
    out: what is diluted with water cannot be boiled dry unnoticed.
    """
    own = tuple(rules)
    if former not in CLASSES or form is Form.SOLUTION:
        return own
    said = {rule.origin for rule in own if rule.safety and rule.kind in _SAFETY_KINDS}
    added = {origin: rule for origin, rule in _published(former) if origin not in said}
    return (*own, *added.values())


def _published(former: str) -> Iterable[tuple[Origin, Rule]]:
    for opened in (True, False):
        found = interval(former, opened=opened, stabilised=former == _INHIBITED)
        origin = Origin(found.counted_from)
        yield origin, _rule(found, origin)


def _rule(found: Interval, origin: Origin) -> Rule:
    # what is to be discarded has no test that would give it longer
    kind = RuleKind.TEST if found.due == TEST_OR_DISCARD else RuleKind.LIFE
    return Rule(
        kind,
        Period(found.months, "months"),
        origin,
        safety=True,
        source=f"{found.source} ({_HOW[found.how]})",
    )


_HOW = {"a": "seen", "b": "worked out", "c": "from memory"}
