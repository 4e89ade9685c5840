"""One function for each thing a person does: open, load, decide, save.

The only room that commits. May import store and everything above it. A subject
keeps its name: `stock.py` for what happens at the shelf, `bookings.py`,
`database.py` for the store as a whole, `plan.py` for the answers. Open
`stock.py` first.
"""

from __future__ import annotations
