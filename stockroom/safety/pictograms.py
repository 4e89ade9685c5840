"""Which of the nine symbols stand on a label, and which of the two signal words.

Source: Regulation (EC) No 1272/2008 Art. 26 (precedence of pictograms, as read in the
Slovak and Czech texts and a German summary) and Art. 20 (signal word, from memory).
"""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.errors import BadInput
from stockroom.safety.classes import CLASSES, HazardClass

PICTOGRAMS: dict[str, str] = {
    "GHS01": "exploding bomb",
    "GHS02": "flame",
    "GHS03": "flame over circle",
    "GHS04": "gas cylinder",
    "GHS05": "corrosion",
    "GHS06": "skull and crossbones",
    "GHS07": "exclamation mark",
    "GHS08": "health hazard",
    "GHS09": "environment",
}

DANGER, WARNING = "Danger", "Warning"

_IRRITATION = frozenset({"skin", "eye"})


def signal_word(classes: Iterable[HazardClass]) -> str:
    """ "Danger" if any class has it, else "Warning" if any has that, else ""."""
    words = {each.signal for each in classes}
    return next((word for word in (DANGER, WARNING) if word in words), "")


def pictograms_of(classes: Iterable[HazardClass]) -> tuple[str, ...]:
    """The symbols that stand on the label, by number; the optional ones are left out.

    Of one ladder only the worst category counts. GHS01 makes GHS02 and GHS03
    optional, unless one class wants both; GHS02 or GHS06 makes GHS04 optional.
    """
    given = list(classes)
    worst = [each for each in given if each.rank == _worst_rank(given, each.ladder)]
    shown = {mark for each in worst for mark in each.pictogram.split("+") if mark}
    if "GHS01" in shown and not any("+" in each.pictogram for each in worst):
        shown -= {"GHS02", "GHS03"}
    if shown & {"GHS02", "GHS06"}:
        shown -= {"GHS04"}
    if "GHS07" in shown and not _needs_exclamation(worst, shown):
        shown -= {"GHS07"}
    return tuple(sorted(shown))


def _worst_rank(classes: list[HazardClass], ladder: str) -> int:
    return min(each.rank for each in classes if each.ladder == ladder)


def _needs_exclamation(worst: list[HazardClass], shown: set[str]) -> bool:
    if "GHS06" in shown:
        return False
    excused: frozenset[str] = _IRRITATION if "GHS05" in shown else frozenset()
    if any(each.ladder == "lung allergy" for each in worst):
        excused |= _IRRITATION | {"skin allergy"}
    # harmful or irritating to breathe keeps the mark beside GHS05, as on bottles of ammonia
    return any(each.pictogram == "GHS07" and each.ladder not in excused for each in worst)


_MARKED_BY_ROUTE = {
    "H300": "Acute Tox. 1", "H310": "Acute Tox. 1", "H330": "Acute Tox. 1",
    "H301": "Acute Tox. 3", "H311": "Acute Tox. 3", "H331": "Acute Tox. 3",
    "H302": "Acute Tox. 4", "H312": "Acute Tox. 4", "H332": "Acute Tox. 4",
    "H335": "STOT SE 3", "H336": "STOT SE 3",
}  # fmt: skip


def class_behind(code: str) -> HazardClass | None:
    """A category marked with this statement; None for a supplemental one, which marks nothing.

    Categories that share a statement share its symbol; of two signal words the graver is taken.
    Raises: BadInput for a code nothing is marked with.
    """
    if code.startswith("EUH"):
        return None
    if code in _MARKED_BY_ROUTE:
        return CLASSES[_MARKED_BY_ROUTE[code]]
    # lettered codes are marked as their number is; of two categories the worse comes first
    found = next((each for each in CLASSES.values() if each.statement == code[:4]), None)
    if found is None:
        raise BadInput(f"{code!r} marks no hazard class I know.", "Read the code again.")
    return found


def pictograms_for(codes: Iterable[str]) -> tuple[str, ...]:
    """The symbols for statements written on a sheet. Raises: as `class_behind`.

    >>> pictograms_for(["H314", "H335"]), pictograms_for(["H315", "H318"])
    (('GHS05', 'GHS07'), ('GHS05',))
    """
    return pictograms_of(filter(None, (class_behind(code) for code in codes)))
