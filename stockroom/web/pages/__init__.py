"""One file for each page: its address, one call into the service, one template.

`router` in each is registered in `web/app.py`. Open `week.py` first.
"""

from __future__ import annotations
