"""The usual caution beside its step, worked out from what goes into a make.

Offered beside any caution the house wrote for the method itself. Marks: a = the fact was
read on a page (makers of peroxide, universities, a chemistry weekly), c = common practice,
no source. Local rules, the supplier's safety data sheet and the employer's risk
assessment come first.
"""

from __future__ import annotations

from collections.abc import Collection, Iterable
from dataclasses import dataclass, replace
from enum import StrEnum

from stockroom.findings import DO_NOT_TOUCH
from stockroom.safety.collected import HALOGENATED, METALS
from stockroom.safety.peroxide_formers import SIGNS, class_of

HOUSE_LINE = (
    "Local rules, the supplier's safety data sheet and your employer's risk assessment "
    "come first: where they differ from this page, they are right."
)

ESTIMATE = 'A number here is an estimate unless it says "found" and a day.'


class Step(StrEnum):
    """Where in the work a caution belongs."""

    BEGIN = "before you begin"
    OPEN = "opening the bottle"
    MIX = "mixing"
    KEEP = "keeping"
    LABEL = "labelling"
    USE = "at the bench"
    WASTE = "clearing away"


MAKING = frozenset({Step.OPEN, Step.MIX, Step.KEEP})
"""The steps of making up; the others belong to the class, the label and the waste."""


_GLACIAL = "ethanoic acid"

NEAT = 90.0
"""About the % w/w from which ethanoic acid freezes in a cold store and catches fire.

Common practice, no source.
"""


@dataclass(frozen=True, slots=True)
class Goes:
    """One thing that goes into the work: its substance, storage group and form.

    `strong` means concentrated as bought, where that changes what can happen; `percent`
    is by mass, where it is known; `former` its class of peroxide-former, if its name does
    not say it.
    """

    substance: str
    group: str = ""
    solid: bool = False
    strong: bool = False
    percent: float | None = None
    former: str = ""

    @property
    def neat(self) -> bool:
        """True when it is nearly pure: glacial, of ethanoic acid."""
        return self.strong if self.percent is None else self.percent >= NEAT

    @property
    def kind(self) -> str:
        """The group it is handled as: its storage group, unless it is too weak to burn."""
        return "organic acid" if self.substance == _GLACIAL and not self.neat else self.group


@dataclass(frozen=True, slots=True)
class Caution:
    """One caution: its number in the list below, its step, its words and its mark.

    It speaks of these groups and substances; `solid` None: in any form; `strong`: only
    of the concentrated. `key` has the words, parted by |, that tell it has been said already;
    `parts` the same for each thing it says, where some may have been said and others not.
    `also` are further steps it belongs to. `collects` says that it sends what is left into a
    container: of what is never kept, only once that is destroyed.
    """

    number: int
    step: Step
    text: str
    how: str
    key: str
    groups: frozenset[str] = frozenset()
    substances: frozenset[str] = frozenset()
    solid: bool | None = None
    strong: bool = False
    neat: bool = False
    also: frozenset[Step] = frozenset()
    parts: tuple[tuple[str, str], ...] = ()
    collects: bool = False

    def speaks_of(self, thing: Goes) -> bool:
        """True when the thing is of its kind, in its form and strong enough."""
        if thing.kind not in self.groups and thing.substance not in self.substances:
            return False
        right_form = self.solid is None or thing.solid is self.solid
        enough = (thing.strong or not self.strong) and (thing.neat or not self.neat)
        return right_form and enough

    def unsaid(self, known: str) -> Caution | None:
        """What is left of it after `known`, a text in lower case; None when nothing is."""
        if not self.parts:
            return None if _has(known, self.key) else self
        left = [words for key, words in self.parts if not _has(known, key)]
        if len(left) == len(self.parts):
            return self
        text = ", ".join(left)
        return replace(self, text=f"{text[0].upper()}{text[1:]}.") if left else None


def _has(known: str, key: str) -> bool:
    return any(word in known for word in key.split("|"))


def _of(words: str) -> frozenset[str]:
    return frozenset(part.strip() for part in words.split("|") if part.strip())


_CLASS, _CLEARING = frozenset({Step.USE}), frozenset({Step.WASTE})
_ACIDS = _of("acid|oxidising acid")
CAUTIONS: tuple[Caution, ...] = (
    Caution(1, Step.BEGIN, HOUSE_LINE, "c", "come first"),
    Caution(
        2, Step.MIX, "Acid into water, slowly and stirring, never water into acid; let it cool.",
        "c", "into water", groups=_ACIDS, solid=False, strong=True,
    ),
    Caution(
        2, Step.MIX, "Sulfuric acid gives the most heat: cool it before making up to the mark.",
        "c", "cool", substances=_of("sulfuric acid"), solid=False, strong=True,
    ),
    Caution(
        3, Step.MIX, "Alkali into water in small portions, stirring: it boils if hurried.",
        "c", "portions", substances=_of(
            "sodium hydroxide|potassium hydroxide|lithium hydroxide|barium hydroxide|calcium oxide"
        ), solid=True,
    ),
    Caution(
        4, Step.KEEP, "Vented cap, cool and dark, never filled to the brim, nothing poured back; "
        "no metal scoops: iron, copper, manganese, dust and alkali make gas and heat.",
        "a", "vented", groups=_of("peroxide|hypochlorite"), parts=(
            ("vented", "vented cap"),
            ("dark|cold", "cool and dark"),
            ("brim", "never filled to the brim"),
            ("poured back|return", "nothing poured back"),
            ("metal", "no metal scoops: iron, copper, manganese, dust and alkali make gas "
             "and heat"),
        ),
    ),
    Caution(
        5, Step.MIX, "Bleach never with acid (chlorine), nor with ammonia (chloramines); stored "
        "apart, its waste apart.",
        "a", "chlorine", groups=_of("hypochlorite"), also=_CLASS,
    ),
    Caution(
        5, Step.WASTE, "Ammonia never with bleach: it gives chloramines.",
        "c", "chloramines", substances=_of("ammonia"),
    ),
    Caution(
        6, Step.MIX, "Ammoniacal silver is never kept: it can turn explosive on standing, cold or "
        "warm. Mix it just before, in clean glass, and let no residue dry. Destroy it at once with "
        "an excess of chloride or of dilute acid, and rinse every vessel.",
        "a", "destroy", substances=_of("ammoniacal silver"), also=_CLEARING, parts=(
            ("explo", "ammoniacal silver is never kept: it can turn explosive on standing, cold "
             "or warm"),
            ("just before|before use", "mix it just before, in clean glass"),
            ("dries|dry", "let no residue dry"),
            ("destroy", "destroy it at once with an excess of chloride or of dilute acid"),
            ("rinse", "rinse every vessel"),
        ),
    ),
    Caution(
        8, Step.WASTE, "Oxidising and nitric waste: a vented container of its own, no more than "
        "two thirds full, never one that held solvent; cool it first.",
        "a", "two thirds", groups=_of("oxidiser|oxidising acid"), substances=_of("nitric acid"),
        collects=True,
    ),
    Caution(
        9, Step.OPEN, "Under pressure when warm: open the strong bottle in the fume cupboard.",
        "c", "fume cupboard", substances=_of("ammonia|hydrochloric acid"), solid=False,
        strong=True, also=_CLASS,
    ),
    Caution(
        10, Step.OPEN, "Bromine: fume cupboard and gloves, with thiosulfate solution to hand.",
        "a", "thiosulfate", substances=_of("bromine"), also=_CLASS,
    ),
    Caution(
        10, Step.USE, "Thiosulfate and acid give sulfur dioxide: good ventilation, and stop it in "
        "carbonate.",
        "c", "sulfur dioxide", substances=_of("sodium thiosulfate"),
    ),
    Caution(
        10, Step.USE, "Sulfites and acid give sulfur dioxide, which can set off asthma: good "
        "ventilation, and never more together than the work asks for.",
        "c", "sulfur dioxide", substances=_of(
            "sodium sulfite|sodium disulfite|potassium disulfite|sodium hydrogensulfite"
            "|sodium dithionite"
        ),
    ),
    Caution(
        11, Step.OPEN, "Glacial ethanoic acid burns skin and catches fire, and freezes in a cold "
        "store near 16 °C: thaw it standing in warm water.",
        "c", "freezes", substances=_of(_GLACIAL), neat=True, also=_CLASS,
    ),
    Caution(
        12, Step.MIX, "Flammable: no flame in the room.",
        "c", "flame", groups=_of("flammable"), solid=False, also=_CLASS,
    ),
    Caution(
        12, Step.USE, "Flame tests by damp splint or an approved spray, never by pouring alcohol "
        "near a flame.",
        "c", "splint", substances=_of("ethanol|methanol"), solid=False,
    ),
    Caution(
        13, Step.WASTE, "Collect the residues: local limits decide what may go down a sink.",
        "c", "residues", substances=_of(f"{METALS}|{HALOGENATED}"), collects=True,
    ),
    Caution(
        14, Step.LABEL, "Hazard text goes with strength: a stronger make needs a new label.",
        "a", "new label", groups=_ACIDS | _of("alkali|peroxide|hypochlorite|organic acid"),
    ),
    Caution(
        15, Step.BEGIN, "Never taste, never smell it direct, never find out by trial: what has no "
        "label is unknown.",
        "a", "taste", substances=_of("unknown"),
    ),
    Caution(16, Step.BEGIN, ESTIMATE, "c", "estimate"),
    Caution(
        17, Step.BEGIN, "Not alone and not after hours, where the house list names it.",
        "c", "alone", groups=_of("cyanide|toxic|water-reactive|oxidising acid"),
        substances=_of("bromine|phenol|ammoniacal silver"),
    ),
    Caution(
        18, Step.KEEP, "Looks count as well as dates: mould or brown, pour it away.",
        "c", "mould|brown", substances=_of(
            "iron(II) sulfate|ammonium iron(II) sulfate|iron(II) chloride|sodium sulfite"
            "|sodium disulfite|starch|glucose|fructose|sucrose|maltose|lactose"
        ), solid=False,
    ),
)  # fmt: skip
"""The cautions of common practice, no source; no. 7, of peroxide-formers, is below."""

PAST_TESTING = Caution(
    7,
    Step.OPEN,
    f"Makes peroxides. Past its test date, or with {SIGNS}: {DO_NOT_TOUCH}.",
    "a",
    "crystals",
    also=_CLASS,
)


def cautions_about(
    things: Iterable[Goes],
    *,
    said: Collection[str] = (),
    steps: Collection[Step] = frozenset(Step),
) -> tuple[Caution, ...]:
    """What the list says of these things at these steps, in the order of the steps.

    What somebody `said` already, by its telling word, is left out, and of a caution that
    says several things only those. One of several steps is given at the first asked for.
    The lines for every page (nos. 1 and 16) are never among them: they stand at its foot.
    """
    known = " ".join(said).casefold()
    found = dict.fromkeys(each for thing in things for each in _speaking_of(thing))
    at_step = (_at(each, steps) for each in found)
    kept = [left for each in at_step if each and (left := each.unsaid(known))]
    order = list(Step)
    return tuple(sorted(kept, key=lambda each: (order.index(each.step), each.number)))


def _at(each: Caution, steps: Collection[Step]) -> Caution | None:
    """The caution at the first of these steps that it belongs to; None when it is at none."""
    if each.step in steps:
        return each
    further = [step for step in Step if step in steps and step in each.also]
    return replace(each, step=further[0]) if further else None


def _speaking_of(thing: Goes) -> list[Caution]:
    former = [PAST_TESTING] if thing.former or class_of(thing.substance) else []
    return [each for each in CAUTIONS if each.speaks_of(thing)] + former
