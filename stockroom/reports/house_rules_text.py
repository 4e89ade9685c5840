"""How a line keeps, rule by rule, with whose rule each is and what was changed."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any, Protocol

from stockroom.keeping.rule_words import rule_in_words
from stockroom.keeping.rules import Rule
from stockroom.reports.corrected import Corrected
from stockroom.reports.sheet import PRACTICE, wrap

HOUSE_RULE, STARTER = "house rule", "starter value"


class RuleChange(Corrected, Protocol):
    """One change of a line's rules."""

    @property
    def rule(self) -> str: ...


class Keeping(Protocol):
    """How a line keeps, as the house has it."""

    @property
    def line(self) -> str: ...
    @property
    def unit(self) -> str: ...
    @property
    def rules(self) -> Sequence[Rule]: ...
    @property
    def changes(self) -> Sequence[RuleChange]: ...
    @property
    def sources(self) -> Mapping[str, str]: ...
    @property
    def shown(self) -> tuple[str, float]: ...
    @property
    def practice(self) -> bool: ...


def rules_text(keeping: Keeping, width: int = 100) -> str:
    """The rules in use, each with whose it is and its source; then every change of them."""
    lines = [PRACTICE] if keeping.practice else []
    lines.append(keeping.line)
    if not keeping.rules:
        lines.append("  no ageing rule: it counts as good until somebody says otherwise")
    for rule in keeping.rules:
        lines.append(wrap(rule_in_words(rule, keeping.unit, keeping.shown), width, indent=2))
        lines.append(wrap(rule_owner(rule, keeping.sources), width, indent=4))
    if keeping.changes:
        lines.append("Changed")
    for change in keeping.changes:
        was, now = change.before or "not there", change.after or "withdrawn"
        lines.append(wrap(f"{change.on} {change.by}: {change.why}", width, indent=2))
        lines.append(wrap(f"was {was}; now {now}", width, indent=4))
    return "\n".join(lines)


def rules_json(keeping: Keeping) -> dict[str, Any]:
    """The same as plain values."""
    return {
        "practice": keeping.practice,
        "item": keeping.line,
        "rules": [
            {
                "rule": str(rule.kind),
                "text": rule_in_words(rule, keeping.unit),
                "whose": HOUSE_RULE if rule.house else STARTER,
                "source": rule.source,
            }
            for rule in keeping.rules
        ],
        "changes": [
            {
                "on": change.on,
                "by": change.by,
                "rule": change.rule,
                "before": change.before,
                "after": change.after,
                "why": change.why,
            }
            for change in keeping.changes
        ],
    }


def rule_owner(rule: Rule, sources: Mapping[str, str]) -> str:
    """Whose rule it is, with its source: "house rule", "starter value; Bench experience…"."""
    cited = sources.get(rule.source, rule.source)
    if rule.house:
        return HOUSE_RULE if rule.source in ("", HOUSE_RULE) else f"{HOUSE_RULE}; {cited}"
    return f"{STARTER}; {cited}" if cited else STARTER
