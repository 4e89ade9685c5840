"""The store: tables, the append-only ledger, migrations, seeding, and rows into facts.

May import planning's values, keeping, safety, chemistry, measure and the root.
Writing goes through `engine.py` (SQLModel); reading for a plan goes through
`snapshot.py`, which uses the plain driver so that a reading command never pays
for the writing half. Light too: `temperatures`, `hazards`, `refills`, `rule_changes`.
Open `tables.py` first (the classes are in `tables_*.py`, by subject), then
`ledger.py`; a typed row is read by `rows_*.py`, and `layout.py` says which.
On a PostgreSQL server `server.py` reads and `server_writing.py` writes: the same
questions and tables, so SQL here is only what both engines read.
"""

from __future__ import annotations
