"""Groups that must not share a place, and caps that must let gas out.

Each pair has its reason, who says so, and a mark: a = read, c = from memory, or common
practice without a source. The house's own rules come first. An older transport table
(IMDG) is held against these in the tests; it tells no acid from an alkali, so nothing is
taken from it.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import TypeVar

from stockroom.findings import Danger, DangerKind, Finding, Moves
from stockroom.safety.kinds import also
from stockroom.safety.peroxide_formers import class_of

_Found = TypeVar("_Found", bound=Finding)


@dataclass(frozen=True, slots=True)
class Ruling:
    """Why two groups stand apart, who says so, and how that is known."""

    reason: str
    source: str
    how: str


_KENTUCKY = "Univ. of Kentucky page after Prudent Practices 2011, sect. 5"
_PRUDENT = "Prudent Practices 2011, storage groups"
_NOTRE_DAME = "Univ. of Notre Dame page"
_MIT = "MIT page"
_EUH = "what EUH031 and EUH032 mean: with acid, toxic gas"
_TRADE = "common practice, no source"
_LISTS = "lists of incompatible chemicals in Prudent Practices and the CRC Handbook"

# group, group: reason | source | mark
_PAIRS = f"""
acid + hypochlorite: bleach beside acid: chlorine if they meet | {_EUH} | c
acid + alkali: acid beside alkali: heat if they meet | {_NOTRE_DAME} | a
acid + cyanide: cyanide beside acid: hydrogen cyanide if they meet | {_EUH} | c
acid + sulfide: sulfide beside acid: hydrogen sulfide if they meet | {_EUH} | c
acid + thiocyanate: thiocyanate beside acid: very toxic gas if they meet | {_EUH} | c
acid + azide: azide beside acid: very toxic, explosive gas if they meet | {_EUH} | c
acid + flammable: acid beside flammable: fire and fumes | {_KENTUCKY} | a
acid + metal powder: acid beside metal powder: hydrogen and heat | {_TRADE} | c
acid + water-reactive: acid beside water-reactive: violent, with gas | {_PRUDENT} | a
acid + oxidiser: oxidiser beside acid: toxic or explosive gas if they meet | {_TRADE} | c
acid + oxidising acid: oxidising acid wants a place of its own: heat, fumes | {_MIT} | a
organic acid + hypochlorite: bleach beside acid: chlorine if they meet | {_EUH} | c
organic acid + alkali: acid beside alkali: heat if they meet | {_NOTRE_DAME} | a
organic acid + oxidiser: oxidiser beside organic acid: fire | {_NOTRE_DAME} | a
organic acid + oxidising acid: oxidising beside organic acid: fire, explosion | {_MIT} | a
organic acid + peroxide: peroxide beside organic acid: explosive peracid | {_NOTRE_DAME} | a
organic acid + cyanide: cyanide beside acid: hydrogen cyanide if they meet | {_EUH} | c
organic acid + sulfide: sulfide beside acid: hydrogen sulfide if they meet | {_EUH} | c
organic acid + thiocyanate: thiocyanate beside acid: toxic gas if they meet | {_EUH} | c
organic acid + azide: azide beside acid: very toxic, explosive gas if they meet | {_EUH} | c
organic acid + water-reactive: acid beside water-reactive: violent, with gas | {_PRUDENT} | a
organic acid + metal powder: acid beside metal powder: hydrogen and heat | {_TRADE} | c
oxidising acid + alkali: acid beside alkali: heat if they meet | {_NOTRE_DAME} | a
oxidising acid + flammable: oxidising acid beside flammable: fire | {_MIT} | a
oxidising acid + hypochlorite: bleach beside acid: chlorine if they meet | {_EUH} | c
oxidising acid + cyanide: cyanide beside acid: hydrogen cyanide if they meet | {_EUH} | c
oxidising acid + sulfide: sulfide beside acid: toxic gas if they meet | {_EUH} | c
oxidising acid + thiocyanate: thiocyanate beside acid: toxic gas | {_EUH} | c
oxidising acid + azide: azide beside acid: toxic, explosive gas if they meet | {_EUH} | c
oxidising acid + metal powder: oxidising acid beside metal powder: fire | {_MIT} | a
oxidising acid + water-reactive: oxidising acid beside water-reactive: violent | {_PRUDENT} | a
oxidising acid + peroxide: peroxide beside oxidising acid: gas and heat | {_MIT} | a
nitric acid + organic acid: nitric beside organic acid: fire, explosion | {_MIT} | a
nitric acid + flammable: nitric acid beside flammable: fire | {_MIT} | a
oxidiser + flammable: oxidiser beside flammable: fire | {_KENTUCKY} | a
oxidiser + metal powder: oxidiser beside metal powder: fire, explosion | {_TRADE} | c
oxidiser + water-reactive: oxidiser beside water-reactive: fire | {_PRUDENT} | a
oxidiser + cyanide: oxidiser beside cyanide: explosion if heated together | {_TRADE} | c
oxidiser + thiocyanate: oxidiser beside thiocyanate: fire, toxic gas | {_TRADE} | c
oxidiser + sulfide: oxidiser beside sulfide: fire, toxic gas | {_TRADE} | c
oxidiser + peroxide former: oxidiser beside a peroxide-former: fire | {_NOTRE_DAME} | a
peroxide + flammable: peroxide beside flammable: fire | {_KENTUCKY} | a
peroxide + alkali: peroxide beside alkali: it falls apart with gas and heat | makers of peroxide | a
peroxide + metal powder: peroxide beside metal powder: gas and heat | makers of peroxide | a
peroxide + water-reactive: peroxide beside water-reactive: violent | {_PRUDENT} | a
peroxide + peroxide former: peroxide beside a peroxide-former: fire | {_NOTRE_DAME} | a
peroxide + cyanide: peroxide beside cyanide: heat and gas | {_TRADE} | c
peroxide + sulfide: peroxide beside sulfide: heat and gas | {_TRADE} | c
peroxide + thiocyanate: peroxide beside thiocyanate: heat, toxic gas | {_TRADE} | c
hypochlorite + flammable: bleach beside flammable: heat and fumes | {_TRADE} | c
hypochlorite + ammonia: bleach beside ammonia: chloramines if they meet | {_TRADE} | c
hypochlorite + metal powder: bleach beside metal powder: gas and heat | {_TRADE} | c
hypochlorite + water-reactive: bleach beside water-reactive: violent | {_PRUDENT} | a
hypochlorite + cyanide: bleach beside cyanide: toxic gas if they meet | {_TRADE} | c
hypochlorite + peroxide: bleach beside peroxide: they set oxygen free | {_TRADE} | c
alkali + water-reactive: solution beside water-reactive: hydrogen, fire | {_PRUDENT} | a
alkali + metal powder: alkali beside metal powder: hydrogen if they meet | {_TRADE} | c
flammable + water-reactive: flammable beside water-reactive: fire | {_PRUDENT} | a
oxidiser + gas: oxidiser beside a gas cylinder: fire | {_TRADE} | c
flammable + gas: flammable beside a gas cylinder: fire | {_TRADE} | c
oxidising acid + oxidiser: oxidiser beside oxidising acid: fire, explosive gas | {_TRADE} | c
hypochlorite + sulfide: bleach beside sulfide: heat and fumes if they meet | {_TRADE} | c
hypochlorite + thiocyanate: bleach beside thiocyanate: toxic gas if they meet | {_TRADE} | c
acid + sulfite: sulfite beside acid: sulfur dioxide if they meet | {_EUH} | c
organic acid + sulfite: sulfite beside acid: sulfur dioxide if they meet | {_EUH} | c
oxidising acid + sulfite: sulfite beside acid: sulfur dioxide, heat | {_EUH} | c
oxidiser + sulfite: oxidiser beside sulfite: heat if they meet | {_TRADE} | c
acid + fluoride: fluoride beside acid: hydrogen fluoride if they meet | {_EUH} | c
organic acid + fluoride: fluoride beside acid: hydrogen fluoride if they meet | {_EUH} | c
oxidising acid + fluoride: fluoride beside acid: hydrogen fluoride if they meet | {_EUH} | c
acid + hexacyanoferrate: hexacyanoferrate beside acid: hydrogen cyanide, if hot | {_EUH} | c
oxidising acid + hexacyanoferrate: hexacyanoferrate beside acid: toxic gas | {_EUH} | c
hypochlorite + ammonium salt: bleach beside an ammonium salt: chloramines | {_TRADE} | c
chlorate + ammonium salt: chlorate beside an ammonium salt: explosive together | {_TRADE} | c
halogen + ammonia: halogen beside ammonia: explosive if they meet | {_TRADE} | c
alkali metal + chlorinated solvent: alkali metal beside it: explosion | {_TRADE} | c
metal powder + chlorinated solvent: metal powder beside it: heat, explosion | {_TRADE} | c
oxidiser + fuel: oxidiser beside what burns: fire, with permanganate unlit | {_NOTRE_DAME} | a
oxidiser + phenylamine: oxidiser beside phenylamine: fire | {_LISTS} | c
chlorate + sugar: chlorate beside sugar or starch: explosive together | {_LISTS} | c
calcium hypochlorite + fuel: dry bleach beside it: takes fire by itself | {_LISTS} | c
calcium hypochlorite + phenylamine: dry bleach beside phenylamine: fire | {_LISTS} | c
oxidising acid + fuel: oxidising acid beside what burns: fire, explosion | {_LISTS} | c
oxidising acid + sugar: oxidising acid beside sugar or starch: fire, explosion | {_LISTS} | c
oxidising acid + phenylamine: oxidising acid beside phenylamine: fire | {_LISTS} | c
oxidising acid + metal: oxidising acid beside metal: fire, explosion | {_LISTS} | c
nitric acid + fuel: nitric acid beside what burns: fire, poisonous gas | {_LISTS} | c
oxidising acid + peroxide former: oxidising acid beside a peroxide-former: fire | {_LISTS} | c
nitric acid + peroxide former: nitric acid beside a peroxide-former: fire | {_LISTS} | c
nitric acid + phenylamine: nitric acid beside phenylamine: takes fire by itself | {_LISTS} | c
nitric acid + metal: nitric acid beside metal: brown, very poisonous gas | {_LISTS} | c
nitric acid + metal powder: nitric acid beside metal powder: poisonous gas, fire | {_LISTS} | c
peroxide + fuel: peroxide beside what burns: fire | {_LISTS} | c
peroxide + phenylamine: peroxide beside phenylamine: fire | {_LISTS} | c
peroxide + metal: peroxide beside metal: gas and heat | {_LISTS} | c
nitrite + ammonium salt: nitrite beside an ammonium salt: explosive together | {_LISTS} | c
silver salt + ammonia: silver beside ammonia: what they give explodes once dry | {_LISTS} | c
hypochlorite + sulfite: bleach beside sulfite: heat and poisonous gas | {_LISTS} | c
trichloromethane + alkali: trichloromethane beside alkali: violent if they meet | {_LISTS} | c
trichloromethane + ketone: trichloromethane beside a ketone: violent with alkali | {_LISTS} | c
"""


def _read(rows: str) -> Mapping[frozenset[str], Ruling]:
    found: dict[frozenset[str], Ruling] = {}
    for row in rows.strip().splitlines():
        groups, _, told = row.partition(": ")
        one, _, other = groups.partition(" + ")
        reason, source, how = (part.strip() for part in told.split(" | "))
        found[frozenset({one, other})] = Ruling(reason, source, how)
    return found


RULINGS = _read(_PAIRS)

APART: dict[frozenset[str], str] = {pair: ruling.reason for pair, ruling in RULINGS.items()}
"""The reason alone, pair by pair."""

_WITHOUT_A_RULE = frozenset({"general", "toxic", "salt"})
_OF_PLACES = frozenset({"solid", "dark", "cold", "set aside"})
"""What a place may be kept for that is no storage group: nothing there reacts with it."""

_NAMED = 4
"""How many neighbours a note names: whoever goes to move one sees the others."""

GROUPS = frozenset(group for pair in RULINGS for group in pair) | _WITHOUT_A_RULE


def kinds_of(substance: str, group: str) -> tuple[str, ...]:
    """The groups a bottle counts as beside others: its storage group, and what else it is.

    A peroxide-former stored with the flammables has their rules already.

    >>> kinds_of("ammonia", "alkali"), kinds_of("benzyl alcohol", "general")
    (('alkali', 'ammonia'), ('general', 'peroxide former'))
    """
    former = ["peroxide former"] if class_of(substance) and group != "flammable" else []
    return tuple(dict.fromkeys(kind for kind in (group, *also(substance), *former) if kind))


@dataclass(frozen=True, slots=True)
class Stands:
    """A bottle where it stands: the groups it counts as, the place, what that is kept for."""

    bottle: str
    kinds: tuple[str, ...]
    place: str
    meant_for: str = ""


def wrong_neighbours(standing: Iterable[Stands]) -> list[Danger]:
    """Dangers of bottles that stand where they should not: beside which, where, and why not.

    In the order given, one for a bottle and a reason; a pair without a rule is passed over.
    """
    row = list(standing)
    there: dict[str, dict[str, list[str]]] = {}
    for each in row:
        for kind in each.kinds:
            there.setdefault(each.place, {}).setdefault(kind, []).append(each.bottle)
    return [found for each in row for found in _wrong(each, there.get(each.place, {}))]


def _wrong(each: Stands, there: Mapping[str, list[str]]) -> Iterator[Danger]:
    beside: dict[str, list[str]] = {}
    kept = {APART.get(frozenset({kind, each.meant_for}), "") for kind in each.kinds}
    for kind in each.kinds:
        for other in sorted({*there, each.meant_for}):
            reason = APART.get(frozenset({kind, other}))
            if reason:
                beside.setdefault(reason, []).extend(there.get(other, ()))
    for reason, numbers in beside.items():
        others = [number for number in dict.fromkeys(numbers) if number != each.bottle]
        if others or reason in kept:
            yield _beside(each, others, reason, kept=reason in kept)


def _beside(each: Stands, others: list[str], reason: str, *, kept: bool) -> Danger:
    # what the place is kept for says which of the two has to go
    belongs = each.meant_for in each.kinds and others
    moves = Moves.IT if kept else Moves.OTHER if belongs else Moves.ONE
    text = f"{_words(each, others, kept=kept)}: {reason.replace(': ', ', ')}: move {moves}"
    return Danger(each.bottle, text, DangerKind.BESIDE, tuple(others), reason, moves)


def _words(each: Stands, others: list[str], *, kept: bool) -> str:
    more = len(others) - _NAMED
    listed = ", ".join(others[:_NAMED]) + (f" and {more} more" if more > 0 else "")
    where = f"in {each.place}" + (f", kept for {each.meant_for}" if kept else "")
    return f"stands beside {listed} {where}" if others else f"stands {where}"


def told_once(findings: Iterable[_Found]) -> list[_Found]:
    """The same in their order, each wrong pair once: by what has to go, else by whoever has most.

    Of a pair with two reasons both are told. What must itself go is told always; what no
    sentence names but its own (of many neighbours four are named) is told too, and so is
    every finding of another kind.
    """
    row = list(findings)
    told: set[tuple[frozenset[str], str]] = set()
    kept: set[_Found] = set()
    for each in sorted(row, key=_sooner):
        pairs = _pairs(each)
        goes = isinstance(each, Danger) and each.moves is Moves.IT
        if goes or not pairs or not told.issuperset(pairs):
            kept.add(each)
            told.update(pairs[:_NAMED])
    return [each for each in row if each in kept]


def _sooner(finding: Finding) -> tuple[int, int]:
    if not isinstance(finding, Danger):
        return 0, 0
    return list(Moves).index(finding.moves), -len(finding.others)


def _pairs(finding: Finding) -> list[tuple[frozenset[str], str]]:
    if not isinstance(finding, Danger):
        return []
    return [(frozenset({finding.subject, other}), finding.why) for other in finding.others]


def not_checked(standing: Iterable[tuple[str, str, str]]) -> list[Finding]:
    """Findings on groups nobody has a rule for, each once.

    `standing` is (bottle, its storage group, the place's own group or a group beside it)
    pair by pair. A place kept for something that is no group (dark, cold, solids) is
    passed over, and so is a bottle of no group at all.
    """
    strange: dict[str, list[str]] = {}
    for bottle, group, beside in standing:
        for each in (group, beside):
            if each and each not in GROUPS | _OF_PLACES:
                strange.setdefault(each, []).append(bottle)
    return [
        Finding(
            ", ".join(dict.fromkeys(bottles)),
            f'neighbours not checked: no rule for the storage group "{group}"',
        )
        for group, bottles in sorted(strange.items())
    ]


def tight_caps(bottles: Iterable[tuple[str, str, bool]]) -> list[Danger]:
    """Dangers of (bottle, cap as written, must it be vented): tight where gas is made."""
    text = "tight cap on a solution that gives off gas: vent it with care, change the cap"
    tight = [number for number, cap, vented in bottles if vented and cap == "tight"]
    return [Danger(number, text, DangerKind.TIGHT) for number in tight]
