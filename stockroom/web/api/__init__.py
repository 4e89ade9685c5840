"""The JSON API: the answers of `--json`, and every form as a request, described by OpenAPI.

Open `answers.py` first.
"""

from __future__ import annotations
