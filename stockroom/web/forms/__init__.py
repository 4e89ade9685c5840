"""What can be entered: each event as a short form, said once for the pages and for the API.

`field.py` is a form as a value, `typed.py` what was typed into one, the other files the forms
of a subject; `table.py` lists them all. Open `field.py` first.
"""

from __future__ import annotations
