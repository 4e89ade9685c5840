"""Reading a number out of typed text: spaces, commas and look-alike characters settled.

Used by every parser of this room, so that "7,8" and "1 350" mean the same everywhere.
"""

from __future__ import annotations

import re
import unicodedata
from decimal import Decimal
from functools import lru_cache

from stockroom.errors import BadAmount

NUMBER = r"[+-]?[0-9][0-9 .,]*(?:[eE][+-]?[0-9]{1,3}(?![0-9]))?"

_GROUPED = re.compile(r"[+-]?[0-9]{1,3}( [0-9]{3})+(\.[0-9]+)?")
_PLAIN = re.compile(r"[+-]?[0-9]+(\.[0-9]*)?([eE][+-]?[0-9]{1,3})?")
_COMMA = re.compile(r"[+-]?(?P<whole>[0-9]+),(?P<rest>[0-9]+)")
_VULGAR = re.compile("(?<=[0-9])(?=[\u00bc-\u00be\u2150-\u215e])")
_RAISED = "\u2070\u00b9\u00b2\u00b3\u2074-\u2079"
# "1.0 x 10^-3": papers write a small strength so; the power must be seen to be one
_POWER = re.compile(
    rf"(?<=[0-9]) ?[x\u00d7\u00b7*] ?10"
    rf"(?:\^\(?(?P<typed>[-\u2212+]?[0-9]{{1,3}})\)?|(?P<minus>[-\u2212][0-9]{{1,3}})"
    rf"|(?P<raised>[\u207a\u207b]?[{_RAISED}]{{1,3}}))(?![0-9.,])"
)
_LONGEST_QUOTE = 60


# a store's names are tidied again for every word somebody looks up
@lru_cache(maxsize=8192)
def tidy(text: str) -> str:
    """`text` stripped, with look-alikes made plain: "cm³" to "cm3", thin spaces to spaces.

    Compatibility forms (superscripts, wide digits, narrow spaces, the micro sign)
    become their plain characters; every dash used as a minus becomes "-", and
    "1 × 10⁻³" becomes "1e-3".
    """
    # "1½" would come out of the next step as eleven halves, and "10³" as a hundred and three
    plain = unicodedata.normalize("NFKC", _POWER.sub(_exponent, _VULGAR.sub(" ", text)))
    plain = re.sub(r"[\u2010-\u2012\u2212]", "-", plain)
    return re.sub(r"\s+", " ", plain).strip()


def _exponent(power: re.Match[str]) -> str:
    written = power["typed"] or power["minus"] or power["raised"]
    return "e" + unicodedata.normalize("NFKC", written).replace("\u2212", "-")


def quote(text: str) -> str:
    """`text` in double quotes, shortened in the middle of nowhere when very long."""
    shown = text.strip()
    if len(shown) > _LONGEST_QUOTE:
        shown = shown[: _LONGEST_QUOTE - 1] + "…"
    return f'"{shown}"'


def read_number(number: str, *, where: str, whole: str | None = None) -> Decimal:
    """The value of typed digits, exactly.

    "1 350" (groups of three) and "7,8" (a comma that can only be decimal) are
    read; `whole` is the full text to quote, `where` names what it stood for.
    Raises: BadAmount for "1,000" (two readings), negatives and anything else.
    """
    text, shown = number.strip(), f"{where} {quote(whole or number)}"
    if text.startswith("-"):
        raise BadAmount(f"{shown}: less than nothing.", "Write it without the minus sign.")
    comma = _COMMA.fullmatch(text)
    if comma:
        _refuse_thousands(comma["whole"], comma["rest"], shown)
        return Decimal(text.replace(",", "."))
    if _GROUPED.fullmatch(text) or _PLAIN.fullmatch(text):
        return Decimal(text.replace(" ", ""))
    raise BadAmount(f"{shown}: I cannot read the number.", 'Write it plainly, as "1350.5".')


def refuse_bare_point(plain: str, shown: str) -> None:
    """Pass unless tidied text begins with a point. Raises: BadAmount with its zero put in.

    A point alone is lost on a label, and then 0.1 is read as 1.
    """
    if re.match(r"[.,][0-9]", plain):
        raise BadAmount(
            f"{shown}: a point with nothing before it.", f'Write "0{plain.replace(",", ".", 1)}".'
        )


def _refuse_thousands(whole: str, rest: str, shown: str) -> None:
    # "0,125" and "1234,567" cannot be grouped thousands; "1,000" can
    if len(rest) == 3 and len(whole) <= 3 and not whole.startswith("0"):
        meant = "One thousand or one?" if (whole, rest) == ("1", "000") else "Thousands?"
        raise BadAmount(
            f"{shown}: {meant}", f'Write "{whole}{rest}" or "{whole}.{rest}", whichever is meant.'
        )
