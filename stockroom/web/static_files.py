"""What the pages look like: the style, the script and the typeface, all from this machine."""

from __future__ import annotations

from pathlib import Path

from fastapi import APIRouter, HTTPException
from fastapi.responses import FileResponse

from stockroom.reports.shipped import font_folder

STATIC = Path(__file__).parent / "static"

_FACES = {"regular": "SourceSansPro-Regular.ttf", "bold": "SourceSansPro-Semibold.ttf"}

faces = APIRouter(include_in_schema=False)


@faces.get("/face/{weight}.ttf")
def face(weight: str) -> FileResponse:
    """The typeface of the sheets. 404 where its package is not there: the browser's own will do."""
    # a name from the table, never from the request
    name = _FACES.get(weight)
    path = Path(font_folder()) / name if name and font_folder() else None
    if path is None or not path.is_file():
        raise HTTPException(404, f"There is no typeface {weight}.")
    return FileResponse(path, media_type="font/ttf", headers={"cache-control": "max-age=604800"})
