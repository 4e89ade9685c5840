"""How so much of a liquid is measured: with the glass of the house, or in steps where it is little.

`bench_weigh.py` and `bench_dilute.py` both pour; what the glass makes of it is said here.
"""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.chemistry.glassware import GlassKind, Ware, ware
from stockroom.chemistry.steps import Bench, Design, design
from stockroom.service.bench import Named, cm3
from stockroom.service.bench_steps import measurable_words, offers, per_cent
from stockroom.service.bench_tools import Tools

NO_WAY = "no way found in four steps with what is there: make more, or ask for less closeness"
NOTHING_TO_MEASURE_WITH = (
    "nothing entered to measure it with: stockroom add glassware glass=… kind=… size_cm3=…"
)
_LITTLE = 1.0  # cm³: below it a bench has no glass that is good to a few per cent
_USUAL = (
    *(("pipette", size) for size in (1.0, 2.0, 5.0, 10.0, 20.0, 25.0, 50.0)),
    *(("flask", size) for size in (50.0, 100.0, 250.0, 500.0, 1000.0, 2000.0)),
)


def measures(tools: Tools) -> bool:
    """Is any glass known that measures a volume out?"""
    return any(each.kind is not GlassKind.FLASK for each in tools.bench.glassware)


def measured(
    taken: float, cubic: float, closeness: float, tools: Tools
) -> tuple[tuple[str, ...], tuple[tuple[Named, ...], ...]]:
    """How `taken` cm³ for `cubic` cm³ are measured to a closeness: in words, and as amounts.

    Nothing where it is the house's own affair: no glass is entered, and it is not little.
    """
    if taken >= cubic:
        return (), ()
    if not measures(tools):
        return _by_usual_glass(taken, cubic, closeness) if taken < _LITTLE else ((), ())
    found = design(taken, cubic, closeness=closeness, bench=tools.bench, liquid=True)
    if found and as_asked(found[0], cubic):
        return (measurable_words(found[0]),), rows(found[:1])
    away = (*tools.glass_away, *tools.unknown)
    return (too_little(taken, cubic, closeness), *(offers(found) or (NO_WAY,)), *away), rows(found)


def as_asked(found: Design, cubic: float) -> bool:
    """Is it one step, in a vessel of that very volume? To the nearest mark, then."""
    return len(found.steps) == 1 and abs(found.steps[0].volume / cubic - 1) < 1e-6


def too_little(taken: float, cubic: float, closeness: float) -> str:
    """That so much cannot be measured at once."""
    return f"{cm3(taken)} cannot be measured to ±{per_cent(closeness)} into {cm3(cubic)}"


def rows(designs: Sequence[Design]) -> tuple[tuple[Named, ...], ...]:
    """Each design as amounts: so much of what, made up to so much, and so on."""
    return tuple(_row(each) for each in designs)


def _row(design_: Design) -> tuple[Named, ...]:
    found: list[Named] = []
    for number, step in enumerate(design_.steps):
        measured_by = isinstance(step.tool, Ware) or (number and step.tool is None)
        what = "take" if not number else "take of that"
        by = f", by {step.tool.name}" if step.tool else ""
        found.append(Named(f"{what}{by}", step.amount, "cm3" if measured_by else "g"))
        vessel = f", in {step.vessel.name}" if step.vessel else ""
        found.append(Named(f"make up to{vessel}", step.volume, "cm3"))
    return tuple(found)


def _by_usual_glass(
    taken: float, cubic: float, closeness: float
) -> tuple[tuple[str, ...], tuple[tuple[Named, ...], ...]]:
    bench = Bench(glassware=tuple(ware(kind, size, "B") for kind, size in _USUAL))
    found = design(taken, cubic, closeness=closeness, bench=bench, liquid=True, most=1)
    if not found:
        return (f"! {cm3(taken)} is too little to measure: dilute it in steps",), ()
    way = offers(found)[0].removeprefix("either ")
    return (f"! {cm3(taken)} is too little to measure; with usual glass: {way}",), rows(found)
