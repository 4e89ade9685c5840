"""Who may come in: passphrases, sessions, tokens against forged forms, limits, headers.

Nothing in here knows a bottle. `session.py` is what a cookie says, `roles.py` what each role
may do, `keeper.py` who is let in and who has left, `door_file.py` the file with the passphrases
and `passphrases.py` what makes one, `pace.py` how often one may try. What every request passes
on its way in stands in `guards.py`, in its order. Open `session.py` first, then `guards.py`.
"""

from __future__ import annotations
