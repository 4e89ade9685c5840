"""What a titration found, written to a bottle: in the bottle's own unit, with its factor."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date

from stockroom.chemistry.strength import PER_MOLE, Concentration, express
from stockroom.chemistry.titration import FACTORS, factor
from stockroom.errors import BadAmount, MissingFigure, NotAllowed
from stockroom.measure.formats import format_number, format_strength
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.facts import Line
from stockroom.service.answers import Done
from stockroom.service.bench import conventions_of, counted_for, mass_for
from stockroom.service.bench_names import Stuff
from stockroom.service.titrate import Shown, Titrated, volumetric_repeatability
from stockroom.service.titrate_known import in_a_mole
from stockroom.service.titrate_stuff import Where
from stockroom.settings import StoreAt

NEW_LABEL = "Write a new label: the strength found, the day, your initials."

_WORDS = frozenset({StrengthUnit.PARTS, StrengthUnit.SATURATED, StrengthUnit.VV})
# labelled so, it is for titrating with
_VOLUMETRIC = frozenset({StrengthUnit.MOLAR, StrengthUnit.NORMAL})


@dataclass(frozen=True, slots=True)
class Written:
    """What was written: the answer, the strength in the bottle's unit, found over nominal."""

    done: Done
    found: Titrated
    shown: Shown
    factor: float | None


@dataclass(frozen=True, slots=True)
class _Labelled:
    """A bottle's line, its substance with its formula, and whether it was ever opened."""

    line: Line
    substance: Stuff
    unopened: bool
    label: Strength | None


def record(
    path: StoreAt,
    bottle: str,
    found: Titrated,
    *,
    sure: bool = False,
    on: date | None,
    today: date,
    by: str,
) -> Written:
    """Write what a titration found to a bottle: a dated strength with its uncertainty.

    Raises: BadInput when the bottle holds something else; NotAllowed when nobody opened
    it, and when it is more than 25 % from the label; all of them unless `sure`.
    """
    from stockroom.service import checks
    from stockroom.service.bottle_strength import substance_in

    where = Where(path, on or today)
    side = found.reaction.burette if found.standardised else found.reaction.flask
    per_mole = in_a_mole(substance_in(path, bottle), side, bottle, where, sure=sure)
    held = _labelled(path, bottle, on or today)
    _check_opened(bottle, held, sure=sure)
    molar, spread = (each / per_mole for each in (found.budget.value, found.budget.standard))
    strength = _in_its_unit(molar, held)
    # a strength is so many mol/dm³ whatever its unit, so its doubt scales as it does
    doubt = replace(strength, value=strength.value * spread / molar)
    note = f"{found.reaction.name}; {found.details[0]}"
    done = checks.found(
        path, bottle, _worded(strength, 5), spread=_worded(doubt, 2), note=note, sure=sure,
        on=on, today=today, by=by,
    )  # fmt: skip
    times = factor(molar, held.line.strength) if held.line.strength else None
    told = (*_factor_words(times, held, found), *_unit_words(strength, molar, held, found))
    marked = (*done.details, *told, f"! {found.reaction.caution}", *found.details, NEW_LABEL)
    shown = Shown(strength.value, doubt.value, str(strength.unit))
    return Written(replace(done, details=marked), found, shown, times)


def _labelled(path: StoreAt, number: str, on: date) -> _Labelled:
    from stockroom.store.reading import reading
    from stockroom.store.snapshot_bottles import bottle_of
    from stockroom.store.snapshot_lines import lines_of

    with reading(path) as reader:
        rows = reader.ask(
            "SELECT bottle.number, line.key, substance.formula FROM bottle"
            " JOIN line ON line.id = bottle.line_id"
            " LEFT JOIN substance ON substance.id = line.substance_id"
            " WHERE upper(bottle.number) = ?",
            number.strip().upper(),
        )
        line = lines_of(reader)[rows[0]["key"]]
        seen = bottle_of(reader, rows[0]["number"], on)
    record_of = seen.record if seen else None
    unopened = record_of is not None and not (
        record_of.made or record_of.opened or record_of.opened_guessed
    )
    formula = str(rows[0]["formula"] or "")
    stuff = Stuff(line.substance, line.substance, None, None, formula=formula)
    return _Labelled(line, stuff, unopened, _label_of(line))


def _label_of(line: Line) -> Strength | None:
    try:
        label = parse_strength(line.strength_text) if line.strength_text else None
    except BadAmount:
        return None
    return None if label is None or label.unit in _WORDS else label


def _check_opened(bottle: str, held: _Labelled, *, sure: bool) -> None:
    if sure or not held.unopened:
        return
    raise NotAllowed(
        f"{bottle} {held.line.key} was never opened, so what was titrated out of it?",
        f"Write that it was: stockroom open {bottle}. Or confirm with --sure.",
    )


def _in_its_unit(molar: float, held: _Labelled) -> Strength:
    """A strength as the bottle's label has it; in mol/dm³ where that cannot be worked out."""
    label = held.label
    plain = Strength(molar, StrengthUnit.MOLAR, "")
    if label is None or label.unit is StrengthUnit.MOLAR:
        return plain
    try:
        counted = counted_for(label, held.substance)
        value = express(
            Concentration(molar, PER_MOLE),
            label.unit,
            molar_mass=mass_for(label.unit, held.substance) or held.substance.molar_mass,
            density=held.line.density,
            reaction=counted.reaction,
            gas_volume=label.gas_volume,
            of=held.substance.name,
        )
    except (MissingFigure, BadAmount):
        return plain
    return replace(counted, value=value)


def _worded(strength: Strength, figures: int) -> Strength:
    # rounded in words alone: the ledger keeps the number whole
    return replace(strength, text=f"{format_number(strength.value, figures)} {strength.unit}")


def _factor_words(times: float | None, held: _Labelled, found: Titrated) -> tuple[str, ...]:
    if times is None:
        return ()
    said = f"factor {times:.3f}: found over the {held.line.strength_text} of the label"
    if held.label is None or held.label.unit not in _VOLUMETRIC:
        return (said,)
    # of a titrant the titration itself has said it already
    repeat = () if found.standardised else volumetric_repeatability(found.repeatability)
    least, most = FACTORS
    if least <= times <= most:
        return (said, *repeat)
    limits = f"{least:.2f} to {most:.2f}"
    outside = f"outside the {limits} that the British Pharmacopoeia allows a volumetric solution"
    return (f"{said}; {outside}", *repeat)


def _unit_words(
    strength: Strength, molar: float, held: _Labelled, found: Titrated
) -> tuple[str, ...]:
    if strength.unit is StrengthUnit.MOLAR:
        return ()
    # of peroxide the titration has said already how vol is counted
    told = " ".join(found.details)
    by = [each for each in conventions_of(strength, held.substance) if each not in told]
    shown = f"{format_number(strength.value)} {strength.unit} is {format_strength(molar, PER_MOLE)}"
    return ("; ".join((shown, *by)),)
