"""Densities of aqueous solutions against % w/w, and back: printed tables and one formula.

One source, one file: `crc.py`, `perry.py` and `kuester_thiel.py` hold rows, `oiml.py`
the formula for ethanol. `lookup.py` answers and is the file to open first; `tables.py`
says which rows serve which substance and `between.py` draws the curve through them.
Pure; nothing outside the standard library.
"""

from __future__ import annotations

from stockroom.chemistry.densities.lookup import (
    Density,
    covers,
    density_at,
    in_words,
    percent_ww_for,
)

__all__ = ["Density", "covers", "density_at", "in_words", "percent_ww_for"]
