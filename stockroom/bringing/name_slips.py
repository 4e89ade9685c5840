"""Which names may be a slip for another, and which are other substances altogether.

One letter parts a sulfite from a sulfide, and the two are no mistake for each other on a
shelf: a word that is itself a chemical's is never taken for a slip.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from difflib import SequenceMatcher, get_close_matches
from functools import lru_cache

from stockroom.bringing.name_words import spelt

_ELEMENTS = (
    "hydrogen helium lithium beryllium boron carbon nitrogen oxygen fluorine neon sodium"
    " magnesium aluminium silicon phosphorus sulfur chlorine argon potassium calcium scandium"
    " titanium vanadium chromium manganese iron cobalt nickel copper zinc gallium germanium"
    " arsenic selenium bromine rubidium strontium yttrium zirconium molybdenum ruthenium"
    " palladium silver cadmium indium tin antimony tellurium iodine caesium barium lanthanum"
    " cerium tungsten platinum gold mercury thallium lead bismuth thorium uranium ammonium"
)
_IONS = (
    "fluoride chloride bromide iodide oxide sulfide nitride phosphide carbide hydride peroxide"
    " hydroxide cyanide azide persulfate sulfite sulfate nitrite nitrate phosphite phosphate"
    " chlorite chlorate perchlorate hypochlorite bromate iodate periodate carbonate bicarbonate"
    " hydrogencarbonate hydrogensulfate hydrogensulfite bisulfite bisulfate metabisulfite"
    " thiosulfate thiocyanate cyanate chromate dichromate manganate permanganate silicate borate"
    " tetraborate aluminate zincate stannate molybdate vanadate tungstate arsenite arsenate"
    " peroxodisulfate dithionite hypophosphite ferrocyanide ferricyanide hydrogenphosphate"
    " dihydrogenphosphate methanoate formate ethanoate acetate propanoate butanoate oxalate"
    " ethanedioate citrate tartrate lactate benzoate salicylate stearate phthalate"
    " hydrogenphthalate ascorbate gluconate succinate maleate ferrous ferric cuprous cupric"
    " mercurous mercuric stannous stannic plumbous plumbic"
)
_OTHERS = (
    "sulfuric sulfurous nitric nitrous hydrochloric hydrobromic hydriodic hydrofluoric chloric"
    " perchloric hypochlorous phosphoric phosphorous boric carbonic chromic ethanoic methanoic"
    " propanoic butanoic acetic formic oxalic citric tartaric benzoic salicylic lactic ascorbic"
    " maleic fumaric stearic oleic palmitic methanol ethanol propanol butanol pentanol hexanol"
    " methanal ethanal propanal propanone butanone methane ethane propane butane pentane hexane"
    " heptane octane ethene propene butene pentene hexene cyclohexane cyclohexene cyclohexanol"
    " ethyne benzene toluene xylene phenol aniline naphthalene glucose fructose sucrose maltose"
    " lactose galactose ribose cellulose amylase lipase protease pepsin trypsin catalase"
    " methyl ethyl propyl butyl pentyl hexyl"
)
_WORDS = frozenset(f"{_ELEMENTS} {_IONS} {_OTHERS}".split())
"""Words that name one thing and no other.

Source: the elements and ions a school's shelf may hold, under IUPAC and older names; the
choice of them is ours, from memory.
"""

_ALIKE_WORD = 0.8
"""How like a slip is to the word meant: one letter in five. Our choice."""

_ROMAN = re.compile(r"\((?P<number>i{1,3}|iv|v|vi{1,2})\)")
_NUMBERED = re.compile(r"\b([a-z]+ate)\((?:i{1,3}|iv|v|vi{1,2})\)")
_BEFORE = re.compile(r"hypo|hydrogen|dihydrogen|per|bi|di|tri|tetra|thio|meta|pyro|ortho|sub")
_ENDING = re.compile(r"(?P<vowel>[ia]?)(?P<sign>[dt])e?")


def contradicts(written: str, name: str) -> bool:
    """Whether a name leaves out what is written in full: another ion, element or number.

    True for iron(III) beside iron(II), and for a sulfide beside a sulfite.
    """
    one, other = spelt(written), spelt(name)
    if not _numbers(one) <= _numbers(other):
        return True
    # a bare "chlorate" is not "chlorate(I)", which is a bleach
    bleached = (found[1] for found in _NUMBERED.finditer(other) if found[0] not in one)
    if any(re.search(rf"\b{word}\b", one) for word in bleached):
        return True
    theirs = _parts(other)
    return any(word in _WORDS and word not in theirs for word in _parts(one))


def another_thing(written: str, name: str) -> bool:
    """Whether a name is of another substance than the one written, however like it looks.

    True across -ide, -ite and -ate, hypo-, per- and hydrogen-, another oxidation number,
    another element; False for a slip of the pen, and for what is only longer or shorter.
    """
    if contradicts(written, name):
        return True
    ours, theirs = _parts(spelt(written)), _parts(spelt(name))
    slips = [word for word in ours if word not in theirs and not _short(word, theirs)]
    for word in theirs - ours:
        near = next((slip for slip in slips if _ratio(slip, word) >= _ALIKE_WORD), "")
        shortened = any(_short(each, {word}) for each in ours)
        if (near and not _slip_of(near, word)) or (word in _WORDS and not near and not shortened):
            return True
    return False


def words_known(words: Iterable[str]) -> bool:
    """Whether one of the words is a chemical's own, said in full."""
    return any(_ROMAN.sub("", word) in _WORDS for word in words)


def begins_word(word: str, token: str) -> bool:
    """Whether a short word stands for a longer one: "thiosulf" does, and "chlorate" is whole.

    A bare metal may be of any oxidation number, which is asked about; a bare "chlorate" is
    not "chlorate(I)", which is a bleach.
    """
    if token in _WORDS:
        stem, number = _ROMAN.sub("", word), _ROMAN.search(word)
        return stem == token and not (number and token.endswith("ate"))
    return word.startswith(token)


def _numbers(text: str) -> set[str]:
    return {found["number"] for found in _ROMAN.finditer(text)}


def _parts(text: str) -> set[str]:
    return set(re.findall(r"[a-z]{3,}", _ROMAN.sub(" ", text)))


def _short(word: str, names: set[str]) -> bool:
    return word not in _WORDS and any(name.startswith(word) for name in names)


@lru_cache(maxsize=8192)
def _ratio(one: str, other: str) -> float:
    return SequenceMatcher(None, one, other).ratio()


def _slip_of(slip: str, word: str) -> bool:
    before = [_BEFORE.match(each) for each in (slip, word)]
    if (before[0] and before[0][0]) != (before[1] and before[1][0]):
        return False
    if word.endswith(("ide", "ite", "ate")):
        # "chlorde" has lost its i and can only be an -ide; "sulfte" may be either of two
        ending = _ENDING.search(slip[-3:])
        lost = ending is not None and ending["sign"] == "d" and not ending["vowel"]
        if ending is None or ending["sign"] != word[-2]:
            return False
        if not lost and ending["vowel"] != word[-3]:
            return False
    nearest = get_close_matches(slip, _WORDS | {word}, n=1, cutoff=_ALIKE_WORD)
    return nearest in ([], [word])
