"""Designs of steps in words, and the balance's or the glass's share in them."""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.chemistry.glassware import Ware
from stockroom.chemistry.steps import Design, Step
from stockroom.chemistry.weighing import Scale, least_weighable, relative_error
from stockroom.measure.formats import format_number
from stockroom.service.bench import cm3, grams


def weighable(mass: float, scale: Scale, closeness: float) -> bool:
    """Does a balance weigh it closely enough, by every rule that was asked for?"""
    # a float's last bits must not refuse what is exactly enough
    return mass >= _least(scale, closeness) * (1 - 1e-9)


def weighable_words(mass: float, scale: Scale, closeness: float) -> str:
    """What a balance makes of a mass: how much of it one step is, and the least it weighs."""
    error = f"±{per_cent(relative_error(scale.step, mass))}"
    if weighable(mass, scale, closeness):
        return f"one step of {scale.name}, {scale.step:g} g, is {error} of it"
    least = f"wanted ±{per_cent(closeness)}; the least is {grams(_least(scale, closeness))}"
    return f"too little for {scale.name} ({scale.step:g} g): one step is {error}, {least}"


def measurable_words(found: Design) -> str:
    """A liquid that is measured in one step, and how near that comes."""
    return f"{_taken(found.steps[0])}: within ±{per_cent(found.error)}"


def _least(scale: Scale, closeness: float) -> float:
    return max(least_weighable(scale.step, closeness), scale.least)


def usp_words(scale: Scale, repeatability: float | None) -> str:
    """The least mass by the pharmacopoeia's rule, and what it was worked out from."""
    found = f"s {format_number(repeatability)} g" if repeatability else "s not given"
    return (
        f"by USP <41> (2·s/m ≤ 0.10 %, s at least 0.41 of a step; {found}) "
        f"the least on {scale.name} is {grams(scale.least)}"
    )


def offers(designs: Sequence[Design]) -> tuple[str, ...]:
    """Each design on a line, the best first: "either 0.5 g …", "or …"."""
    return tuple(
        f"{'or' if number else 'either'} {in_words(design)}"
        for number, design in enumerate(designs)
    )


def in_words(design: Design) -> str:
    """The steps of a design in order, then how near they come and what is left over."""
    first, *rest = design.steps
    said = [f"{_taken(first)} made up to {_volume(first)}"]
    said += [f"and {_taken(each, 'of that')} to {_volume(each)}" for each in rest]
    over = f", {cm3(design.poured)} over" if design.poured > 0.05 else ""
    return f"{', '.join(said)}: within ±{per_cent(design.error)}{over}"


def per_cent(fraction: float) -> str:
    """A fraction as a per cent to two figures."""
    return f"{format_number(100 * fraction, 2)} %"


def _taken(step: Step, what: str = "") -> str:
    if isinstance(step.tool, Scale) or (step.tool is None and not what):
        by = f" ({step.tool.name})" if step.tool and not step.tool.name.startswith("the ") else ""
        return f"{grams(step.amount)}{by}"
    often = f"{step.fills} × " if step.fills > 1 else ""
    measured = f"{often}{cm3(step.amount / step.fills)} {what}".rstrip()
    return f"{measured} ({step.tool.words})" if isinstance(step.tool, Ware) else measured


def _volume(step: Step) -> str:
    made_up = f"{cm3(step.volume)} ({step.vessel.words})" if step.vessel else cm3(step.volume)
    return f"{made_up}, {step.times} times and mixed" if step.times > 1 else made_up
