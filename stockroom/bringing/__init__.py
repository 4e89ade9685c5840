"""The old spreadsheet, as values: what its columns are, what each row says, what must be asked.

Pure: bytes and the house's own names in; rows accepted, asked about or refused out, each with
its reason. May import keeping, chemistry, measure and the root. From file to rows: `opening.py`
(bytes to a sheet), `headings.py` (which column is what), `row.py` (what one row says, with
`names.py`, `dates.py` and `amounts.py`), `whole_file.py` (what only the rows together show).
Open `whole_file.py` first.
"""

from __future__ import annotations
