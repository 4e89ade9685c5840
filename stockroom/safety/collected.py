"""Substances whose residues are collected: compounds of heavy metals, halogenated liquids.

Common practice, no source; local limits decide what may go down a sink.
"""

from __future__ import annotations

METALS = (
    "barium chloride|barium nitrate|barium hydroxide|barium carbonate|copper(II) sulfate"
    "|copper(II) chloride|copper(II) nitrate|copper(II) oxide|basic copper(II) carbonate"
    "|silver nitrate|silver sulfate|ammoniacal silver|potassium permanganate|manganese dioxide"
    "|manganese(II) sulfate|manganese(II) chloride|lead(II) nitrate|lead(II) ethanoate"
    "|lead(II) bromide|lead(II) oxide|lead(IV) oxide|nickel(II) sulfate|nickel(II) chloride"
    "|nickel(II) nitrate|cobalt(II) chloride|cobalt(II) sulfate|cobalt(II) nitrate"
    "|potassium dichromate|potassium chromate|ammonium dichromate|sodium dichromate|zinc sulfate"
)
"""Their names, parted by |."""

HALOGENATED = (
    "dichloromethane|trichloromethane|chlorobenzene|bromobenzene|1-bromobutane|1-chlorobutane"
    "|1-iodobutane|bromoethane|tetrachloroethene|2-bromo-2-methylpropane|2-chloro-2-methylpropane"
)
"""Their names, parted by |."""
