"""What may share a batch: wants of one line that are made from the same things.

Groups stand in the order of the lines, what is made before what it is made from, and each
knows the groups its batches take from: that is all the planner of batches has to be told.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from stockroom.planning.facts import Facts, Form, Ingredient, Line, Method
from stockroom.planning.order_of_lines import settling_order
from stockroom.planning.timing import Moment
from stockroom.planning.wants import Settled, Want

Signature = tuple[object, ...]


@dataclass(slots=True)
class Group:
    """Wants of `line` that one batch may serve, in rank order.

    `parts` are the ingredients that are themselves made, with the group each comes from;
    `starts` the moment of the day work has to start by, for days on which the close of
    hours is too late, by day.
    """

    number: int
    line: Line
    method: Method
    wants: list[Want] = field(default_factory=list)
    parts: list[tuple[Ingredient, Group]] = field(default_factory=list)
    starts: dict[int, Moment] = field(default_factory=dict)

    @property
    def roots(self) -> list[Want]:
        """The needs themselves among its wants."""
        return [want for want in self.wants if want.under is None]


def grouped(facts: Facts, wants: list[Want], alone: frozenset[str] = frozenset()) -> list[Group]:
    """Every want that is to be made, in groups; the needs in `alone` share with nobody."""
    return _Grouping(facts, alone).run(wants)


class _Grouping:
    def __init__(self, facts: Facts, alone: frozenset[str]) -> None:
        self.facts, self.alone = facts, alone
        self.groups: list[Group] = []
        self.group_of: dict[int, Group] = {}
        # a part of a batch is one thing, whoever it is for: it is told by the first of them
        self.heads: dict[tuple[int, Ingredient], Signature] = {}

    def run(self, wants: list[Want]) -> list[Group]:
        to_make: dict[str, list[Want]] = {}
        for want in (part for root in wants if _stands(root) for part in root.tree()):
            if want.settled is Settled.MAKE:
                to_make.setdefault(want.line, []).append(want)
        for key in settling_order(self.facts):
            if key in to_make:
                self._line(key, sorted(to_make[key], key=lambda want: want.need.rank))
        return self.groups

    def _line(self, key: str, wants: list[Want]) -> None:
        named: dict[Signature, list[Want]] = {}
        for want in wants:
            named.setdefault(self._signature(want), []).append(want)
        line, method = self.facts.lines[key], self.facts.methods[key]
        # by their text, so that the order of the rows chooses nothing
        for signature in sorted(named, key=str):
            group = Group(len(self.groups), line, method, named[signature])
            self.groups.append(group)
            for want in group.wants:
                self.group_of[id(want)] = group
                self._join(want, group)

    def _join(self, want: Want, group: Group) -> None:
        """Tell the group of the batch this is a part of where the part comes from."""
        if want.under is not None:
            above = self.group_of[id(want.under)]
            assert want.ingredient is not None
            if all(ingredient != want.ingredient for ingredient, _ in above.parts):
                above.parts.append((want.ingredient, group))

    def _signature(self, want: Want) -> Signature:
        if want.under is None:
            alone = want.ref if want.ref in self.alone else ""
            return (*self._own_signature(want), alone, self._sitting(want))
        above = self.group_of[id(want.under)]
        assert want.ingredient is not None
        whose = want.ref if want.ref in self.alone else ""
        return self.heads.setdefault(
            (above.number, want.ingredient), (*self._own_signature(want), whose)
        )

    def _sitting(self, want: Want) -> str:
        """The class it is mixed for, where nothing of it may stand until another."""
        booking = want.need.booking
        never_kept = self.facts.lines[want.line].never_kept
        return f"{booking.on} {booking.minute}" if never_kept else ""

    def _own_signature(self, want: Want) -> Signature:
        # two strengths of stock in one batch would give a strength nobody has worked out
        parts = []
        for part in want.parts:
            solid = self.facts.lines[part.line].form is Form.SOLID
            bottles = () if solid else tuple(promise.bottle for promise in part.promises)
            # whoever has all of it in hand does not wait for what another has to buy
            parts.append((_shape(part), part.to_buy > 0, bottles))
        return tuple(parts)


def _shape(want: Want) -> Signature:
    """What is made for it and what is not, down to the bottom: alike for all of a batch."""
    if want.settled is not Settled.MAKE:
        return (want.line,)
    return (want.line, *(_shape(part) for part in want.parts))


def _stands(root: Want) -> bool:
    return root.settled not in (Settled.SHORT, Settled.REFUSED)
