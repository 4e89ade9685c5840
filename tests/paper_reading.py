"""Printed sheets read back: their words, where they stand, and the codes on them.

Independent of what made them: pypdf for the words, PDFium for places and pictures, zxing for codes.
"""

from __future__ import annotations

import io
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

POINTS_TO_MM = 25.4 / 72

# of a text's matrix: above this it does not stand upright
TURNED = 0.05


@dataclass(frozen=True)
class Piece:
    """A stretch of text on a page and its box, in points from the bottom left corner."""

    page: int
    text: str
    left: float
    bottom: float
    right: float
    top: float


def words(pdf: bytes) -> str:
    """All text of a PDF on one line, spaces made single."""
    return " ".join(" ".join(page_words(pdf)).split())


def page_words(pdf: bytes) -> list[str]:
    """The text of each page, spaces made single."""
    from pypdf import PdfReader

    pages = PdfReader(io.BytesIO(pdf)).pages
    return [" ".join(page.extract_text().split()) for page in pages]


def sizes_mm(pdf: bytes) -> list[tuple[float, float]]:
    """Width and height of each page, in mm to a tenth."""
    with _opened(pdf) as document:
        sizes = [page.get_size() for page in document]
    return [(round(w * POINTS_TO_MM, 1), round(h * POINTS_TO_MM, 1)) for w, h in sizes]


@lru_cache(maxsize=4)
def pieces(pdf: bytes) -> list[Piece]:
    """Every stretch of upright text with its box; the overprint, which is turned, left out."""
    import pypdfium2.raw

    raw: Any = pypdfium2.raw
    found = []
    with _opened(pdf) as document:
        for number, page in enumerate(document):
            text = page.get_textpage()
            for each in page.get_objects(filter=[raw.FPDF_PAGEOBJ_TEXT]):
                said = _said(raw, each, text)
                if said and abs(each.get_matrix().b) < TURNED:
                    found.append(Piece(number, said, *each.get_bounds()))
    return found


def _said(raw: Any, each: Any, text: Any) -> str:
    size = raw.FPDFTextObj_GetText(each, text, None, 0)
    buffer = (raw.FPDF_WCHAR * (size // 2))()
    raw.FPDFTextObj_GetText(each, text, buffer, size)
    return bytes(buffer).decode("utf-16-le").rstrip("\0").strip()


def outside(pdf: bytes, margin: float = 0.0) -> list[Piece]:
    """Stretches of text that reach over the edge of their page, less a margin in points."""
    with _opened(pdf) as document:
        sizes = [page.get_size() for page in document]
    return [
        each
        for each in pieces(pdf)
        if each.left < margin
        or each.bottom < margin
        or each.right > sizes[each.page][0] - margin
        or each.top > sizes[each.page][1] - margin
    ]


def overlapping(pdf: bytes, slack: float = 0.8) -> list[tuple[str, str]]:
    """Pairs of stretches whose boxes lie over each other by more than `slack` points each way."""
    # from the top of each page down, so that only what is level with it need be looked at
    found, seen = [], sorted(pieces(pdf), key=lambda each: (each.page, -each.top))
    for place, one in enumerate(seen):
        for other in seen[place + 1 :]:
            if one.page != other.page or other.top <= one.bottom:
                break
            across = min(one.right, other.right) - max(one.left, other.left)
            along = min(one.top, other.top) - max(one.bottom, other.bottom)
            if across > slack and along > slack:
                found.append((one.text, other.text))
    return found


def codes(pdf: bytes, dpi: int = 300) -> list[str]:
    """What an independent reader makes of every QR code on it, page by page."""
    import zxingcpp

    found: list[str] = []
    for picture in pictures(pdf, dpi):
        read = zxingcpp.read_barcodes(
            picture, formats=zxingcpp.BarcodeFormats(zxingcpp.BarcodeFormat.QRCode)
        )
        found += [each.text for each in read]
    return found


def pictures(pdf: bytes, dpi: int = 100) -> list[Any]:
    """Each page as a picture, as a printer would put it on paper."""
    with _opened(pdf) as document:
        return [page.render(scale=dpi / 72).to_pil() for page in document]


def greys_only(pdf: bytes, dpi: int = 60) -> bool:
    """Whether nothing on it has a colour."""
    return all(
        red == green == blue
        for picture in pictures(pdf, dpi)
        for _, (red, green, blue) in picture.convert("RGB").getcolors(maxcolors=1 << 24)
    )


def _opened(pdf: bytes) -> Any:
    import pypdfium2

    opened: Any = pypdfium2.PdfDocument
    return opened(pdf)
