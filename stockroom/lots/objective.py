"""What a plan of batches costs: the one place that says what counts, and how much.

Everything is told in minutes of a technician's hands, so that it can be added up.
What is short is so dear that no chain of batches is worth leaving 10 cm³ of a need out;
minutes over the day's limit count three times; then come the minutes worked, and the
value thrown away at what a minute is worth. The day chosen only breaks ties: the latest.
"""

from __future__ import annotations

from dataclasses import dataclass

SHORT = 30.0
"""Minutes for each cm³ that cannot be had. Our choice: 10 cm³ outweigh any chain of makes."""

OVER = 3.0
"""Minutes for each minute over the day's limit. Our choice."""

EARLY = 1e-4
"""Minutes for each day a batch is started before the last day that would do: ties only."""

UNUSUAL = 100.0
"""Days early that a batch counts off the days its sort stood under in the plan last printed.

Our choice: 0.01 minute, more than any lateness is worth and less than work that is saved.
"""

PENCE_A_MINUTE = 25
"""What a minute of hands-on work is worth, to price what is thrown away. Our choice."""

POUR_AWAY = 1.0
"""Minutes it takes to pour a dm³ away by the usual route. Our choice."""


@dataclass(frozen=True, slots=True)
class Cost:
    """The parts of the sum: minutes worked, value wasted and the rest, in minutes; `short` in cm³.

    `over` is in minutes over the limit, `early` in days before the last that would do, and
    `UNUSUAL` more for each batch that leaves the days it was printed under.
    """

    minutes: float = 0.0
    waste: float = 0.0
    short: float = 0.0
    over: float = 0.0
    early: float = 0.0

    @property
    def total(self) -> float:
        """All of it in minutes, ties left out."""
        return self.minutes + self.waste + SHORT * self.short + OVER * self.over

    @property
    def with_ties(self) -> float:
        """All of it, the day chosen included: what is really made least."""
        return self.total + EARLY * self.early
