"""A titration's answer with the figures behind it, and the list of reactions held."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any, Protocol

from stockroom.chemistry.reactions import TITRATIONS, Titration
from stockroom.chemistry.uncertainty import Budget
from stockroom.reports.bench_text import bench_text
from stockroom.reports.words import rounded


class _Shown(Protocol):
    @property
    def value(self) -> float: ...
    @property
    def uncertainty(self) -> float: ...
    @property
    def unit(self) -> str: ...


class _Reagent(Protocol):
    @property
    def name(self) -> str: ...
    @property
    def formula(self) -> str: ...
    @property
    def grams_per_mole(self) -> float: ...


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
    @property
    def weighed(self) -> _Reagent | None: ...
    @property
    def assay(self) -> float: ...
    @property
    def also(self) -> Sequence[_Shown]: ...
    @property
    def repeatability(self) -> float | None: ...


class _Done(Protocol):
    @property
    def text(self) -> str: ...
    @property
    def bottle(self) -> str: ...
    @property
    def entry(self) -> int | None: ...
    @property
    def practice(self) -> bool: ...
    @property
    def details(self) -> tuple[str, ...]: ...


class _Written(Protocol):
    @property
    def done(self) -> _Done: ...
    @property
    def found(self) -> _Titrated: ...
    @property
    def shown(self) -> _Shown: ...
    @property
    def factor(self) -> float | None: ...


def titrated_text(found: _Titrated, width: int = 100) -> str:
    """The strength first, then the caution, how it comes about, and the house line."""
    cautions = (found.reaction.caution,)
    return bench_text(found.text, found.details, cautions, practice=found.practice, width=width)


def written_text(written: _Written, width: int = 100) -> str:
    """What was written to the bottle, the caution, how it comes about, and the house line."""
    done = written.done
    # the caution stands among the details of what is done, marked as everywhere
    told = [each for each in done.details if not each.startswith("! ")]
    cautions = [each.removeprefix("! ") for each in done.details if each.startswith("! ")]
    return bench_text(done.text, told, cautions, practice=done.practice, width=width)


def titrated_json(found: _Titrated) -> dict[str, Any]:
    """The same as plain values; `uncertainty` is one standard uncertainty, in `unit`.

    `also` is the result in other units, `standard` what was weighed; `repeatability` is
    the titres' relative standard deviation, a fraction.
    """
    return {
        "practice": found.practice,
        "reaction": found.reaction.name,
        "equation": found.reaction.equation,
        "item": found.substance,
        "value": rounded(found.budget.value, 6),
        "uncertainty": rounded(found.budget.standard, 3),
        "unit": "mol/dm3",
        "also": [_shown_json(each) for each in found.also],
        "standard": _standard_json(found),
        "repeatability": found.repeatability and rounded(found.repeatability, 3),
        "budget": [
            {"from": name, "uncertainty": rounded(share, 3)}
            for name, share in found.budget.components
        ],
        "text": found.text,
        "details": list(found.details),
        "cautions": [found.reaction.caution],
    }


def written_json(written: _Written) -> dict[str, Any]:
    """A titration written to a bottle: `factor` is found over nominal, `in_bottle` its own unit."""
    done = written.done
    return titrated_json(written.found) | {
        "text": done.text,
        "bottle": done.bottle or None,
        "entry": done.entry,
        "practice": done.practice,
        "details": list(done.details),
        "factor": written.factor and rounded(written.factor, 4),
        "in_bottle": _shown_json(written.shown),
    }


def _shown_json(shown: _Shown) -> dict[str, Any]:
    return {
        "value": rounded(shown.value, 6),
        "uncertainty": rounded(shown.uncertainty, 3),
        "unit": shown.unit,
    }


def _standard_json(found: _Titrated) -> dict[str, Any] | None:
    if found.weighed is None:
        return None
    return {
        "name": found.weighed.name,
        "formula": found.weighed.formula or None,
        "g_per_mol": rounded(found.weighed.grams_per_mole, 6),
        "assay_percent": rounded(found.assay * 100, 6),
    }


def reactions_text() -> str:
    """Every titration held, by kind: what is in the burette, on what is in the flask."""
    lines = ["Titrations held: what is in the burette, on what is in the flask (or both ways)"]
    for kind in dict.fromkeys(row.kind for row in TITRATIONS):
        lines.append(f"{kind}")
        lines += [f"  {line}" for line in _listed([row for row in TITRATIONS if row.kind == kind])]
    return "\n".join(lines)


def _listed(rows: Sequence[Titration]) -> Iterator[str]:
    """A line for each; the other way round is told on the same one."""
    told: set[tuple[str, str]] = set()
    sides = {(row.titrant, row.titrand) for row in rows}
    for row in rows:
        if (row.titrand, row.titrant) in told:
            continue
        told.add((row.titrant, row.titrand))
        turned = not row.end_point and (row.titrand, row.titrant) in sides
        yield f"{row.name}{' (both ways)' if turned else ''}: {row.equation}"


def reactions_json() -> dict[str, Any]:
    """The same as plain values; `per_titrant` is mol in the flask for one mol from the burette."""
    return {
        "reactions": [
            {
                "name": row.name,
                "kind": row.kind,
                "equation": row.equation,
                "per_titrant": row.per_titrant,
            }
            for row in TITRATIONS
        ]
    }
