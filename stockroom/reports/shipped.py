"""What is shipped with the code and never changes: templates, the typeface, the GHS symbols.

The one module of the pure rooms that opens files, and only these. The typeface and the symbols
come in packages of their own, which are found and not run.

Source: Source Sans Pro, SIL Open Font License 1.1, from the package `font-source-sans-pro`;
symbols GHS01 to GHS09 of the Globally Harmonized System, from `ghs-hazard-pictogram` (MIT).
"""

from __future__ import annotations

import re
from functools import cache
from importlib.util import find_spec
from pathlib import Path

TEMPLATES = Path(__file__).parent / "templates"

FACE = "Source Sans Pro"
"""The typeface of every sheet and picture. The marks come from those that Typst carries."""

_RED = re.compile(r"#ff0000|#f00\b|\bred\b", re.IGNORECASE)
_BLACK = "#000"


@cache
def font_folder() -> str:
    """The folder with the typeface; "" where its package is not installed."""
    return _inside("font_source_sans_pro", "files")


@cache
def symbol(code: str) -> str:
    """A hazard symbol as SVG, "GHS05", its frame in black; "" where there is none of that code.

    The frame is red in the standard; a printer without colours would make it a pale grey.
    """
    folder = _inside("ghs_hazard_pictogram", "pictograms")
    path = Path(folder) / f"{code.lower()}.svg"
    if not folder or not path.is_file():
        return ""
    return _RED.sub(_BLACK, path.read_text(encoding="utf-8"))


def _inside(package: str, folder: str) -> str:
    # found and not imported: importing one of them looks through every file it has
    spec = find_spec(package)
    places = spec.submodule_search_locations if spec else None
    return str(Path(next(iter(places))) / folder) if places else ""
