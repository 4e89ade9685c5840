"""`stockroom`: what to make, check and order for every booking of a term, with reasons.

Start with `planning/` (what the program is for), then `service/` (one function
per thing a person does). DEVELOPERS.md has the table of rooms.
"""

from __future__ import annotations

__version__ = "0.1.0"
