"""One function for each thing a person does: open, load, decide, save.

The only room that commits. May import store and everything above it. A subject
keeps its name: `stock.py` for what happens at the shelf, `bookings.py`,
`database.py` for the store as a whole, `plan.py` for the answers, `fades`, `learn`,
`logger`, `house_rules` and `hazards` for how things age and hurt. Sums that want no
store: `bench_strength`, `bench_weigh`, `bench_dilute` (what they share is in `bench.py`)
and `titrate`. Open `stock.py` first.
"""

from __future__ import annotations
