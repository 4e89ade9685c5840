"""The store: tables, the append-only ledger, migrations, seeding, and rows into facts.

May import planning's values, keeping, safety, chemistry, measure and the root.
Writing goes through `engine.py` (SQLModel); reading for a plan goes through
`snapshot.py`, which uses the plain driver so that a reading command never pays
for the writing half. Open `tables.py` first, then `ledger.py`.
"""

from __future__ import annotations
