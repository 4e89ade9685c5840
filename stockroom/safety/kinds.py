"""Substances that react as more than their storage group says, each under the kinds it counts as.

Common practice and the usual lists of incompatible chemicals, from memory: `neighbours.py`
has the pairs and their marks. Names are those of the tables of substances.
"""

from __future__ import annotations

import re

_KINDS = {
    "ammonia": "ammonia",
    "nitric acid": "nitric acid",
    "oxidising acid": "perchloric acid",
    "calcium hypochlorite": "calcium hypochlorite",
    "chlorate": "potassium chlorate|sodium chlorate",
    "nitrite": "sodium nitrite|potassium nitrite",
    "silver salt": "silver nitrate|silver sulfate",
    "sulfite": "sodium sulfite|sodium disulfite|potassium disulfite|sodium hydrogensulfite"
    "|sodium dithionite",
    "fluoride": "sodium fluoride|potassium fluoride",
    "hexacyanoferrate": "potassium hexacyanoferrate(II)|potassium hexacyanoferrate(III)",
    "halogen": "bromine|chlorine|iodine",
    "organic acid": "ethanoic acid|methanoic acid",
    "alkali metal": "lithium|potassium|sodium",
    # what hydrogen peroxide or nitric acid reacts with, powder or turnings
    "metal": "copper|tin|lead|calcium|nickel|manganese",
    "chlorinated solvent": "dichloromethane|tetrachloroethene|trichloromethane",
    "trichloromethane": "trichloromethane",
    "ketone": "propanone|butanone",
    "phenylamine": "phenylamine",
    # organic or carbon, stored with neither the flammables nor the peroxide-formers, and
    # ready fuel for an oxidiser
    "fuel": "glycerol|ethane-1,2-diol|propane-1,2-diol|benzaldehyde|octan-1-ol|carbon|cellulose"
    "|paraffin wax|liquid paraffin|olive oil|oleic acid|stearic acid",
    "sugar": "sucrose|glucose|fructose|lactose|maltose|starch",
}

KINDS: dict[str, tuple[str, ...]] = {}
for _kind, _names in _KINDS.items():
    for _name in _names.split("|"):
        KINDS[_name] = (*KINDS.get(_name, ()), _kind)

_AMMONIUM = re.compile(r"\b(di|tri)?ammonium\b")


def also(substance: str) -> tuple[str, ...]:
    """The kinds a substance counts as beside its storage group; () for most.

    >>> also("trichloromethane"), also("diammonium hydrogenphosphate")
    (('chlorinated solvent', 'trichloromethane'), ('ammonium salt',))
    """
    salt = ("ammonium salt",) if _AMMONIUM.search(substance) else ()
    return (*KINDS.get(substance, ()), *salt)
