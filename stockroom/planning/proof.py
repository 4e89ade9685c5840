"""How near the best there can be a family's makes are: proved by a solver, or how much is open.

A family is a stock and everything made from it. What is proved is the arranging: who shares
a batch and on which day. The bottles stay given out as they are, and the other makes keep
their days, their minutes counting against the daily limit.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from stockroom.lots.cost import cost_of, load_of
from stockroom.lots.exact import CLOSED, gap, prove
from stockroom.lots.families import Family, families, only, part_of
from stockroom.lots.model import Arrangement, Problem
from stockroom.lots.objective import Cost
from stockroom.planning.making.make import Made


@dataclass(frozen=True, slots=True)
class Proved:
    """A family's lines and makes, what they cost, and the least any plan of them could.

    `best` is the cheapest the solver found, `bound` what nothing is below, in minutes;
    `gap` the fraction of our cost that might still be saved; `proved`: it is nothing.
    """

    lines: tuple[str, ...]
    makes: int
    ours: Cost
    best: Cost
    bound: float

    @property
    def gap(self) -> float:
        """From 0 to 1; 0 also where there is nothing to make."""
        return gap(self.ours.total, self.bound)

    @property
    def proved(self) -> bool:
        """True when nothing better exists."""
        return self.gap <= CLOSED


def proof_of(made: Made, keys: frozenset[str], seconds: float) -> Proved:
    """The proof for the families of lines that are made, in so many seconds of the solver's time.

    Raises Refused where the solver is not installed.
    """
    problem, arranged = made.numbers.problem, made.arranged
    family = _family(problem, keys)
    part, ours = _by_itself(problem, arranged, family), only(problem, family, arranged)
    proof = prove(part, seconds=seconds, start=ours)
    names = tuple(dict.fromkeys(sort.name for sort in part.sorts))
    return Proved(names, len(ours.batches), cost_of(part, ours), proof.cost, proof.bound)


def _family(problem: Problem, keys: frozenset[str]) -> Family:
    """Everything that hangs together with any sort of those names."""
    hit = [family for family in families(problem) if _names(problem, family, keys)]
    return tuple(sorted(number for family in hit for number in family))


def _names(problem: Problem, family: Family, keys: frozenset[str]) -> bool:
    return any(problem.sorts[number].name in keys for number in family)


def _by_itself(problem: Problem, arranged: Arrangement, family: Family) -> Problem:
    """The family's part of the problem, with what the others do spoken for."""
    others = tuple(batch for batch in arranged.batches if batch.sort not in family)
    return replace(part_of(problem, family), busy=tuple(load_of(problem, others)))
