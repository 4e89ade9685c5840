"""`chemistry`: molar masses, strengths turned into one another, and making-up sums.

Plain numbers in g, cm³ and mol/dm³ in and out; rounding to what a person can
measure is left to whoever prints. Pure. May import `measure` and the root
(`errors`, `findings`). Open `strength.py` first, then `making.py`.
"""
