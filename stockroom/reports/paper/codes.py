"""A bottle's number as a QR code, by ISO/IEC 18004 (the library segno draws it)."""

from __future__ import annotations

import io

_MASK = 3
"""The mask of all codes. Our choice: it is part of the code, so each reader undoes it."""


def code_svg(text: str) -> str:
    """The code of a text as SVG, black on nothing, with its quiet zone of four modules."""
    import segno

    drawn = io.BytesIO()
    # the strongest correction: labels get wet, and a number is short
    # any mask reads: trying all eight for the best is most of the work for a sheet of labels
    segno.make(text, micro=False, error="h", mask=_MASK).save(
        drawn, kind="svg", xmldecl=False, border=4
    )
    return drawn.getvalue().decode()
