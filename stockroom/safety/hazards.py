"""What can be said of one thing's hazards: worked out from its strength, or the supplier's words.

Values only; `service/hazards.py` fills them and `reports/hazards_text.py` prints them.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.safety.clp import Classification
from stockroom.safety.grounds import SHEET, RestsOn


@dataclass(frozen=True, slots=True)
class SheetText:
    """What somebody typed from a supplier's safety data sheet, and when.

    `statements` is the text as typed; `codes` the statement codes in it; `sheet` names
    the sheet: supplier and date. `signal_word` is "Danger", "Warning" or "".
    """

    statements: str
    codes: tuple[str, ...]
    signal_word: str
    pictograms: tuple[str, ...]
    sheet: str
    why: str
    by: str
    entered_on: date


@dataclass(frozen=True, slots=True)
class Content:
    """So many per cent by mass of a substance, at the most it could be, and how that is known."""

    substance: str
    percent: float
    note: str = ""


@dataclass(frozen=True, slots=True)
class Hazards:
    """The answer for a bottle, a line, or a substance at a strength.

    `what` names it; `strength` is the highest it could be, in words, and says whose figure
    that is. `sheet` is the supplier's text that counts, `older` those before it, the
    newest first. `worked_out` is always there, so that the two can be compared.
    `cautions` are the usual ones for what is in it; `practice` marks the invented college.
    `sources` has each source key behind it, with its citation.
    """

    what: str
    strength: str
    worked_out: Classification
    contents: tuple[Content, ...] = ()
    bottle: str = ""
    line: str = ""
    sheet: SheetText | None = None
    older: tuple[SheetText, ...] = ()
    notes: tuple[str, ...] = ()
    cautions: tuple[str, ...] = ()
    practice: bool = False
    sources: tuple[tuple[str, str], ...] = ()

    @property
    def signal_word(self) -> str:
        """The sheet's where there is one, else the one worked out."""
        return self.sheet.signal_word if self.sheet else self.worked_out.signal_word

    @property
    def pictograms(self) -> tuple[str, ...]:
        """The sheet's where there is one, else those worked out."""
        return self.sheet.pictograms if self.sheet else self.worked_out.pictograms

    @property
    def statements(self) -> tuple[str, ...]:
        """H codes: the sheet's where there is one, else those worked out."""
        if self.sheet is None:
            return self.worked_out.statements
        # a sheet writes both kinds in one list, and a label keeps them apart
        return tuple(code for code in self.sheet.codes if not code.startswith("EUH"))

    @property
    def supplemental(self) -> tuple[str, ...]:
        """EUH codes: the sheet's where there is one, else those worked out."""
        if self.sheet is None:
            return self.worked_out.supplemental
        return tuple(code for code in self.sheet.codes if code.startswith("EUH"))

    @property
    def entered(self) -> bool:
        """True when there is anything to go by: a sheet, or limits of something in it."""
        return self.sheet is not None or self.worked_out.entered

    @property
    def known(self) -> tuple[RestsOn, ...]:
        """For each statement how it is known and whose it is: the sheet's, or the limits'."""
        if self.sheet is None:
            return self.worked_out.rests_on
        return tuple(RestsOn(code, SHEET, self.sheet.sheet) for code in self.sheet.codes)

    @property
    def missing_from_sheet(self) -> tuple[str, ...]:
        """Statements worked out that the sheet's text does not have: worth a second look."""
        if self.sheet is None:
            return ()
        return tuple(c for c in self.worked_out.statements if c not in self.sheet.codes)
