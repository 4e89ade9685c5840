"""A titration's answer with the figures behind it, and the list of reactions held."""

from __future__ import annotations

from typing import Any, Protocol

from stockroom.chemistry.reactions import TITRATIONS, Titration
from stockroom.chemistry.uncertainty import Budget
from stockroom.reports.bench_text import bench_text
from stockroom.reports.words import rounded
from stockroom.safety.cautions import HOUSE_LINE


class _Titrated(Protocol):
    @property
    def reaction(self) -> Titration: ...
    @property
    def substance(self) -> str: ...
    @property
    def budget(self) -> Budget: ...
    @property
    def details(self) -> tuple[str, ...]: ...
    @property
    def practice(self) -> bool: ...
    @property
    def text(self) -> str: ...


def titrated_text(found: _Titrated, width: int = 100) -> str:
    """The strength first, then how it comes about, then the caution and the house line."""
    told = (*found.details, f"! {found.reaction.caution}", HOUSE_LINE)
    return bench_text(found.text, told, practice=found.practice, width=width)


def titrated_json(found: _Titrated) -> dict[str, Any]:
    """The same as plain values; `uncertainty` is one standard uncertainty, in `unit`."""
    return {
        "practice": found.practice,
        "reaction": found.reaction.name,
        "equation": found.reaction.equation,
        "item": found.substance,
        "value": rounded(found.budget.value, 6),
        "uncertainty": rounded(found.budget.standard, 3),
        "unit": "mol/dm3",
        "budget": [
            {"from": name, "uncertainty": rounded(share, 3)}
            for name, share in found.budget.components
        ],
        "text": found.text,
        "details": list(found.details),
        "cautions": [found.reaction.caution],
    }


def reactions_text() -> str:
    """Every titration held, by kind: what is in the burette, on what is in the flask."""
    lines = ["Titrations held: what is in the burette, on what is in the flask"]
    for kind in dict.fromkeys(each.kind for each in TITRATIONS):
        lines.append(f"{kind}")
        lines += [f"  {each.name}: {each.equation}" for each in TITRATIONS if each.kind == kind]
    return "\n".join(lines)


def reactions_json() -> dict[str, Any]:
    """The same as plain values; `per_titrant` is mol in the flask for one mol from the burette."""
    return {
        "reactions": [
            {
                "name": each.name,
                "kind": each.kind,
                "equation": each.equation,
                "per_titrant": each.per_titrant,
            }
            for each in TITRATIONS
        ]
    }
