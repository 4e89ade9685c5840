"""The questions and events as JSON, with the same keys as the commands have under --json.

`answering.py` is how a question is asked and answered, `planning.py`, `standing.py` and
`sheets.py` the questions, `doing.py` the events, `contract*.py` the keys as OpenAPI tells them.
Open `answering.py` first.
"""

from __future__ import annotations
