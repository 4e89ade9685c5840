"""What stands on the card of a make beside its amounts: its cautions, and its reasons."""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import per_cent_by_mass, say, say_strength
from stockroom.planning.facts import Facts, Form, Line
from stockroom.planning.making.batch import Batch, Source
from stockroom.planning.making.day_chosen import Load, day_reason
from stockroom.planning.making.how_good import how_good
from stockroom.planning.wants import Want
from stockroom.safety.cautions import MAKING, Goes, cautions_about
from stockroom.safety.formed import formed_of
from stockroom.safety.group_cautions import cautions_for


def cautions_of(batch: Batch) -> tuple[str, ...]:
    """The house's own words for the method; the general ones where it wrote none."""
    written = batch.method.cautions
    sources = [goes_of(source.line) for source in batch.sources]
    groups = [] if written else [(thing.kind, thing.solid) for thing in sources]
    vented = batch.line.vented_cap and not any("vented" in text.lower() for text in written)
    general = cautions_for(groups, vented=vented, never_kept=batch.line.never_kept)
    # what the substance itself asks for, unless the house has said as much
    things = [*sources, goes_of(batch.line), *formed_of(sources)]
    special = cautions_about(things, said=(*written, *general), steps=MAKING)
    return tuple(dict.fromkeys([*written, *general, *(each.text for each in special)]))


def goes_of(line: Line) -> Goes:
    """A line as the list of cautions asks of it."""
    # a neat liquid is as strong as it is sold; what is dissolved here is not
    strong = line.form is Form.LIQUID
    return Goes(
        line.substance,
        line.storage_group,
        line.form is Form.SOLID,
        strong,
        per_cent_by_mass(line),
    )


def reasons_of(
    facts: Facts, batch: Batch, load: Load, *, kept: bool, drawn: Sequence[str] = ()
) -> list[str]:
    """Why it is made so: for whom, from what and measured with what, how good, on which day.

    `drawn` is what was said of measuring its liquids; `kept`: its rest becomes stock.
    """
    # what an ingredient serves is a batch for many: their numbers alone, or the line runs over
    parts = [
        f"{item.wants[0].ref if len(item.wants) == 1 else _refs(item.wants)} "
        f"{say(item.volume, Kind.VOLUME)}"
        for item in batch.run.items
    ]
    words = [f"for {' + '.join(parts)}"]
    words += [_source_reason(source) for source in batch.sources]
    words += batch.reasons
    # in one line, since both tell of the same glass and five lines are all there is
    good = "; ".join(filter(None, [*drawn, how_good(facts, batch)]))
    words += [good] if good else []
    words.append(day_reason(facts, batch, load))
    if batch.heel and batch.heel > facts.house.batch_step:
        where = "kept as stock" if kept else "poured away by the usual route"
        words.append(f"{say(batch.heel, Kind.VOLUME)} over: {where}")
    return words


def _refs(wants: list[Want]) -> str:
    return "/".join(dict.fromkeys(want.need.booking.number for want in wants))


def _source_reason(source: Source) -> str:
    amount = say(source.amount, source.line.kind)
    if not source.bottle:
        return f"{amount} of {source.line.key}, " + (
            "made first" if source.batch else "to be bought"
        )
    if source.line.form is Form.SOLID or source.strength is None:
        return f"{amount} of {source.line.key} from {source.bottle}"
    expected = say_strength(source.line, source.strength)
    words = f"{amount} of {source.bottle} at {expected}"
    if source.line.strength and abs(source.strength / source.line.strength - 1) > 1e-3:
        by_label = round(source.amount * source.strength / source.line.strength)
        label, said = source.line.strength_text, say(by_label, source.line.kind)
        words += f" (the label's {label} would say {said})"
    return words
