"""What was corrected in the house's own words and numbers, as reports read it."""

from __future__ import annotations

from typing import Protocol


class Corrected(Protocol):
    """One correction: what stood there and what stands now, "" for nothing; why, by whom, when."""

    @property
    def before(self) -> str: ...
    @property
    def after(self) -> str: ...
    @property
    def why(self) -> str: ...
    @property
    def by(self) -> str: ...
    @property
    def on(self) -> str: ...
