"""A name as a spreadsheet has it, taken apart: what it is, which form, how strong."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from functools import lru_cache

from stockroom.measure.reading import tidy

NUMBER = r"[0-9]{1,15}(?:\.[0-9]{1,15})?"
"""A number with a point at most: "1.2.3" is none. No bench writes one of more figures; ours."""

_SAME = (
    (re.compile("sulph"), "sulf"),
    (re.compile("aluminum"), "aluminium"),
    (re.compile(r"\bcesium"), "caesium"),
    (re.compile("['’`\u2018\u00b4]"), ""),
    # "copper (II)", "copper II" and "copper(II)" are one name
    (re.compile(r"\s*\((i{1,3}|iv|v|vi{1,2})\)"), r"(\1)"),
    (re.compile(r"\s(i{2,3}|iv|vi{1,2})(?=\s)"), r"(\1)"),
    # "2,4-" keeps its comma, and "thiosulfate, anhydrous" loses it
    (re.compile(r",\s+|[;:_]"), " "),
    (re.compile(r"\.(?=\s|$)"), ""),
    (re.compile(r"\s+"), " "),
)
_STRENGTH = re.compile(
    r"(?<![\w.,/(-])(?P<strength>[MN] ?/ ?[0-9]+"
    r"|1 in [0-9]+"
    r"|(?P<number>[0-9][0-9.,]*) ?(?P<unit>vols?\b\.?|volumes?\b|[Vv]\b|%(?: ?[wmv]/[wmv]\b)?"
    r"|per ?cent(?: ?[wmv]/[wmv]\b)?|m?mol ?/ ?(?:dm3|[lL])\b|m?mol (?:dm-?3|[lL]-1)|m?M\b|N\b"
    r"|m?g ?/ ?(?:dm3|[lL])\b))"
)
_SATURATED = re.compile(r"\b(?:saturated|satd\b\.?|sat\b\.?)", re.IGNORECASE)
# ".880" is a density; "0.880" could be mol/dm³
_DENSITY = re.compile(
    rf"(?<![0-9\w])(?:\.(?P<bare>[0-9]{{3}})|sp\.? ?gr\.? ?(?P<said>{NUMBER}))"
    r"(?![0-9\w]|\.[0-9])"
)
_H2O = re.compile(rf"(?<=\S)[ .·*•x]+(?P<waters>{NUMBER}) ?H2O(?![0-9A-Za-z])")
_ONE_H2O = re.compile(r"(?<=[A-Za-z0-9)])[.·*•]H2O(?![0-9A-Za-z])")
_WATERS = {
    "hemi": 0.5,
    "mono": 1, "di": 2, "tri": 3, "tetra": 4, "penta": 5, "hexa": 6, "hepta": 7, "octa": 8,
    "nona": 9, "deca": 10, "dodeca": 12,
}  # fmt: skip
_HYDRATE = re.compile(rf"\b(?P<how>{'|'.join(_WATERS)})-?hydrate\b", re.IGNORECASE)
_HYDRATE_SHORT = re.compile(
    rf"\b(?P<how>{'|'.join(each for each in _WATERS if len(each) > 3)})(?:hyd\w*)?\b\.?(?=\s|$)",
    re.IGNORECASE,
)
_DRY = re.compile(r"\banhydrous\b", re.IGNORECASE)
_DRY_SHORT = re.compile(r"\b(?:anhyd\w*|anh|dry)\b\.?", re.IGNORECASE)
_DISSOLVED = re.compile(
    r"\b(?:soln?s?|sol'n|solution|aq|aqueous|dil|dilute|dild)\b\.?", re.IGNORECASE
)
_NEAT = re.compile(r"\b(?:conc(?:entrated)?|fuming|glacial|neat)\b\.?", re.IGNORECASE)
# how it looks says nothing of what it is; tried without, where the whole name is not known
_LOOK = re.compile(
    r"\b(?:pellets?|powder(?:ed)?|crystals?|flakes?|granules?|granular|lumps?|sticks?|glacial)\b"
    r"|(?<=\S) [0-9]+(?:\.[0-9]+)?$",
    re.IGNORECASE,
)
_NOISE = re.compile(
    r"\b(?:AR|GPR|SLR|LR|(?:lab(?:oratory)?|reagent|technical|analytical|general) "
    r"(?:grade|reagent|purpose)|tech|conc|concentrated|fuming|neat|pure|purified|bottle of"
    r"|hydrated?)\b\.?",
    re.IGNORECASE,
)
_VOLUMES = re.compile(r"(?P<number>[0-9][0-9.,]*) ?(?:[Vv]|[Vv]ols?\.?|volumes?)\.?")


@dataclass(frozen=True, slots=True)
class NameWords:
    """The parts of a name. `core` is what is left when the rest is taken out.

    `water` is molecules of water, 0 for anhydrous, None where nothing is said; `in_full`
    is False where the form was only hinted at ("anhyd", "penta"). `density` is in g/cm³.
    `neat` is a liquid as it is bought: concentrated, glacial.
    """

    core: str
    water: float | None = None
    in_full: bool = True
    strength: str = ""
    density: float | None = None
    dissolved: bool = False
    neat: bool = False

    @property
    def bare(self) -> str:
        """The core without words for how it looks, and without a number nobody explains."""
        return re.sub(r"\s+", " ", _LOOK.sub(" ", self.core)).strip(" ,-")


@lru_cache(maxsize=8192)
def spelt(text: str) -> str:
    """A name in the one spelling names are compared in."""
    plain = tidy(text).casefold()
    for pattern, instead in _SAME:
        plain = pattern.sub(instead, plain)
    return plain.strip(" .,-")


def written_strength(text: str) -> str:
    """A strength cell as the reader of strengths wants it: "20V" and "20 vols." as "20 vol"."""
    volumes = _VOLUMES.fullmatch(tidy(text))
    return f"{volumes['number']} vol" if volumes else text.strip()


@lru_cache(maxsize=8192)
def name_words(text: str) -> NameWords:
    """The parts of a name; a part written twice counts once."""
    rest, words = tidy(text), NameWords("")
    found = _STRENGTH.search(rest)
    if found:
        words = replace(words, strength=written_strength(found["strength"]))
        rest = _without(rest, found)
    elif _SATURATED.search(rest):
        words = replace(words, strength="saturated")
        rest = _SATURATED.sub(" ", rest)
    found = _DENSITY.search(rest)
    if found:
        density = float(found["said"] or f"0.{found['bare']}")
        words, rest = replace(words, density=density), _without(rest, found)
    rest, words = _form(rest, words)
    if _DISSOLVED.search(rest):
        words, rest = replace(words, dissolved=True), _DISSOLVED.sub(" ", rest)
    core = re.sub(r"\s+", " ", _NOISE.sub(" ", rest)).strip(" ,.;-()")
    return replace(words, core=core, neat=_NEAT.search(text) is not None)


def _form(rest: str, words: NameWords) -> tuple[str, NameWords]:
    for pattern, in_full in ((_H2O, True), (_HYDRATE, True), (_HYDRATE_SHORT, False)):
        found = pattern.search(rest)
        if found:
            groups = found.groupdict()
            water = float(groups.get("waters") or _WATERS[groups["how"].lower()])
            return _without(rest, found), replace(words, water=water, in_full=in_full)
    for pattern, water, in_full in (
        (_ONE_H2O, 1.0, True), (_DRY, 0.0, True), (_DRY_SHORT, 0.0, False)
    ):  # fmt: skip
        found = pattern.search(rest)
        if found:
            return _without(rest, found), replace(words, water=water, in_full=in_full)
    return rest, words


def _without(text: str, found: re.Match[str]) -> str:
    return f"{text[: found.start()]} {text[found.end() :]}".strip()
