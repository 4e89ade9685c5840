"""The tables of a store. `migrations/` builds exactly these; a test compares them.

Amounts are whole micro-units (µg, µL, micro-items), money whole pence, days ISO
dates, times minutes after midnight, strengths in the line's own unit with the
text as written beside them. Blank text is "", an unknown figure NULL. Amounts are
BIGINT, since a 32-bit column elsewhere than in SQLite ends at 2 kg.

The classes are in `tables_house.py`, `tables_lines.py`, `tables_bookings.py`,
`tables_ledger.py` and `tables_plans.py`. Those have no `from __future__ import annotations`,
alone in the project: SQLModel reads the annotations of its classes while they are being made.
"""

from __future__ import annotations

from stockroom.store.tables_bookings import (
    Bar,
    Booking,
    BookingChange,
    Recipe,
    Requirement,
    Swap,
)
from stockroom.store.tables_desk import BackupMade, Submission, Walk, WalkEnd
from stockroom.store.tables_house import (
    Balance,
    BalanceAway,
    Closure,
    Department,
    Glassware,
    GlasswareAway,
    House,
    Numbered,
    Place,
    Reading,
    ReadingTakenBack,
    Term,
    Vessel,
    VesselAway,
)
from stockroom.store.tables_ledger import (
    Bottle,
    Entry,
    KeptBalance,
    Parent,
    RowChange,
)
from stockroom.store.tables_lines import (
    Hazard,
    HazardText,
    Ingredient,
    KeepingRule,
    Line,
    Method,
    OtherName,
    Pack,
    Substance,
)
from stockroom.store.tables_orders import (
    FormerUse,
    Placed,
    PlacedCame,
    PlacedChange,
    PlacedShare,
)
from stockroom.store.tables_plans import PrintedCopy, PrintedPlan

__all__ = [
    "BackupMade",
    "Balance",
    "BalanceAway",
    "Bar",
    "Booking",
    "BookingChange",
    "Bottle",
    "Closure",
    "Department",
    "Entry",
    "FormerUse",
    "Glassware",
    "GlasswareAway",
    "Hazard",
    "HazardText",
    "House",
    "Ingredient",
    "KeepingRule",
    "KeptBalance",
    "Line",
    "Method",
    "Numbered",
    "OtherName",
    "Pack",
    "Parent",
    "Place",
    "Placed",
    "PlacedCame",
    "PlacedChange",
    "PlacedShare",
    "PrintedCopy",
    "PrintedPlan",
    "Reading",
    "ReadingTakenBack",
    "Recipe",
    "Requirement",
    "RowChange",
    "Submission",
    "Substance",
    "Swap",
    "Term",
    "Vessel",
    "VesselAway",
    "Walk",
    "WalkEnd",
]
