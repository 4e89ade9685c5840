"""Plain figures as they are typed at the bench: a number with a unit that may be left out."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from types import MappingProxyType
from typing import TYPE_CHECKING

from stockroom.errors import BadInput

if TYPE_CHECKING:
    from stockroom.service.bench_task import Assay

NO_UNITS: Mapping[str, float] = MappingProxyType({"": 1.0})
PER_CENT: Mapping[str, float] = MappingProxyType({"": 1.0, "%": 1.0, "percent": 1.0})
CUBIC: Mapping[str, float] = MappingProxyType({"": 1.0, "cm3": 1.0, "ml": 1.0, "cc": 1.0})
_AT_LEAST = re.compile(r"\s*(?:≥|>=|=>|>|min(?:imum|\.)?|at least|not less than)\s*", re.IGNORECASE)
_LEAST_PER_CENT = 1.0


def figure(
    text: str | None,
    where: str,
    *,
    like: str,
    units: Mapping[str, float] = NO_UNITS,
    zero: bool = False,
) -> float | None:
    """A number above 0 typed after the option `where`, or None; "1,18 g/cm3" as 1.18.

    `units` are those that may stand behind it, with what each is multiplied by; `like` is
    shown as what may be written. With `zero`, 0 will do.
    Raises: BadInput; BadAmount for "1,000", which has two readings.
    """
    if text is None:
        return None
    from stockroom.measure.reading import NUMBER, read_number, tidy

    shown = f"{where} {text.strip()!r}"
    read = re.fullmatch(rf"(?P<number>{NUMBER}) ?(?P<unit>.*)", tidy(text))
    unit = re.sub(r"[ .·]", "", read["unit"]).lower() if read else ""
    if read is None or unit not in units or read["number"].startswith("-"):
        raise BadInput(f"{shown} is not a number {_above(zero)}.", f"Write it as {like}.")
    value = float(read_number(read["number"], where=where, whole=text)) * units[unit]
    if not (value > 0 or (zero and value == 0)) or value == float("inf"):
        raise BadInput(f"{shown} is not a number {_above(zero)}.", f"Write it as {like}.")
    return value


def _above(zero: bool) -> str:
    return "from 0 up" if zero else "above 0"


def assay_of(text: str | None, where: str = "--assay") -> Assay:
    """The per cent and how far off it may be; "at least" counts as the figure itself.

    Raises: BadInput for what is none, and for a fraction in the place of a per cent.
    """
    from stockroom.service.bench_task import Assay

    if text is None:
        return Assay()
    at_least = _AT_LEAST.match(text)
    written = text[at_least.end() :] if at_least else text
    number, _, within = re.sub(r"\+/?-", "±", written).partition("±")
    percent = figure(number, where, like="97, or 99.9 ± 0.1", units=PER_CENT)
    # "0.97" is 97 % to whoever wrote it, and would make a hundredfold solution
    if percent is not None and percent <= _LEAST_PER_CENT:
        raise BadInput(
            f"{where} {text!r}: {percent:g} % of it is the substance?",
            f"Write a per cent, as {100 * percent:g}.",
        )
    spread = figure(within, where, like="99.9 ± 0.1", units=PER_CENT) if within.strip() else None
    return Assay(percent, spread or 0.0, at_least=at_least is not None)


def titres_of(texts: Sequence[str]) -> list[float]:
    """Titres in cm³ as they were read, each typed apart. Raises: BadInput."""
    return [_titre(text) for text in texts]


def cm3_of(text: str, where: str, *, like: str, zero: bool = False) -> float:
    """A volume in cm³ typed after the option `where`. Raises: BadInput."""
    return figure(text, where, like=like, units=CUBIC, zero=zero) or 0.0


def _titre(text: str) -> float:
    if "," in text and "." in text:
        raise BadInput(f"titre {text!r} is more than one.", "Write them apart: 25.30 25.35.")
    return cm3_of(text, "titre", like="25.35")
