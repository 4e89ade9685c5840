"""`measure`: amounts, strengths as written, days, periods and open days.

The border of the house: everything a person types or reads as a quantity passes
through here once. Pure: no clock, file, database or printing. May import the
root (`errors`, `findings`) only. The one room that knows pint and dateutil, and
both are loaded on first use. Open `amounts.py` first, then `parsing.py`, which reads a
strength with `strengths.py` (its units) and `strength_words.py` (what stands beside them).
"""
