"""What somebody says of columns: HEADING=FIELD, one text for each."""

from __future__ import annotations

from collections.abc import Iterable
from difflib import get_close_matches

from stockroom.bringing.fields import FIELDS, LEFT_OUT
from stockroom.errors import BadInput
from stockroom.measure.reading import quote


def columns_said(written: Iterable[str]) -> dict[str, str]:
    """Headings with the field each is, from texts of the form HEADING=FIELD.

    Raises: BadInput quoting what cannot be read.
    """
    said: dict[str, str] = {}
    for text in written:
        # from the right: a heading may hold the sign itself
        heading, equals, field = text.rpartition("=")
        field = field.strip().casefold().replace(" ", "-")
        if not equals or not heading.strip():
            raise BadInput(
                f"--column {quote(text)}: which column is what?",
                'Write it as HEADING=FIELD: --column "where=place".',
            )
        if field not in FIELDS and field != LEFT_OUT:
            known = [*FIELDS, LEFT_OUT]
            near = get_close_matches(field, known, n=3, cutoff=0.5) or known
            raise BadInput(
                f"--column {quote(text)}: a row says nothing called {quote(field)}.",
                f"It may be: {', '.join(near)}.",
            )
        if said.setdefault(heading.strip().casefold(), field) != field:
            raise BadInput(
                f"--column: {quote(heading)} is said to be {said[heading.strip().casefold()]}"
                f" and {field}.",
                "Say one; of two columns headed alike each goes by its letter: --column C=note.",
            )
    return said
