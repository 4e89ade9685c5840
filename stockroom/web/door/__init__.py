"""Who may come in: passphrases, sessions, tokens against forged forms, limits, headers.

Nothing in here knows a bottle. `session.py` is what a cookie says, `roles.py` what each role
may do. Open `session.py` first.
"""

from __future__ import annotations
