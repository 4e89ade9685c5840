"""What can be printed or taken away as a file: said once for the list, the look and the copy.

`sheet.py` is a sheet as a value, `sheets.py` and `labels.py` say how each is made, `files.py`
what goes to other programs. Open `sheet.py` first.
"""

from __future__ import annotations
