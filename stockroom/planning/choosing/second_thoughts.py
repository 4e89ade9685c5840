"""Second thoughts for whoever came out short: others give way across lines, or makes move.

Each line is settled for itself, so a dilution may take the stock a class needs as it stands,
or be left for a day on which nothing good is there to make it from. Here a need that is
short says what would have served it: a bottle somebody else holds, or one that is good only
on an earlier day its make may have. Each such thought is tried on all lines together; whoever
is short for it then says the same in turn. A thought is kept only if it serves more by rank.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from heapq import heappop, heappush
from itertools import accumulate, chain, combinations

from stockroom.planning.choosing.serve import Serving
from stockroom.planning.choosing.while_good import Sooner, WhileGood
from stockroom.planning.facts import Bottle, Facts, Form, Line
from stockroom.planning.wants import Settled, Want

# our choices: beyond these a need may stay short that a longer search would serve
TRIES_A_NEED = 24
"""Thoughts tried for one need that is short."""
TRIES_A_FAMILY = 72
"""The same for all needs of lines that hang together."""
NEEDS_SETTLED = 3_000
"""Needs settled again by all those tries together, so that a big house waits no longer."""
_GIVING_WAY = 6
"""Holders of one bottle asked to give way one by one and in twos; the rest only in a row."""

Key = tuple[str, str]


@dataclass(frozen=True, slots=True)
class Thought:
    """What is done otherwise than in turn.

    `kept` says for whom a bottle is kept from a need, by the need's and the bottle's number;
    `days` the start of a make, by its need and line.
    """

    kept: Mapping[Key, str] = field(default_factory=dict)
    days: Mapping[Key, Sooner] = field(default_factory=dict)

    @property
    def sort(self) -> tuple[object, ...]:
        """Equal for thoughts that come to the same."""
        return frozenset(self.kept), frozenset((k, one.start) for k, one in self.days.items())

    def and_(self, more: Thought) -> Thought:
        """Both at once; where two days are given to one make, the second holds."""
        return Thought({**self.kept, **more.kept}, {**self.days, **more.days})


IN_TURN = Thought()
"""Nothing done otherwise."""

Trial = Callable[[Thought], list[Want]]
"""Settles everything again under a thought: the needs that are then short or refused."""


def worth_a_try(facts: Facts, serving: Serving, short: Want) -> bool:
    """True when some bottle or day might serve a need that came out short.

    Costs no trial: most shortages are of things that are not in the house at all.
    """
    return any(True for _ in Moves(facts, serving, IN_TURN, short.ref).of(short))


class SecondThoughts:
    """One search for the sake of one need. Counted in trials: the same facts, the same answer."""

    def __init__(self, facts: Facts, serving: Serving, trial: Trial, most: int) -> None:
        self.facts, self.serving, self.trial = facts, serving, trial
        self.left = most
        self._sake = ""
        self._open: list[tuple[int, int, int, Thought]] = []
        self._seen: set[tuple[object, ...]] = set()

    def of(self, short: Want, so_far: Thought) -> Thought | None:
        """A thought that serves a need and all that rank before it; None when none is found.

        One that leaves nobody short is preferred to one that costs a later need its bottle.
        """
        second_best = None
        self._sake = short.ref
        self._think(short, so_far, failing=1, depth=0)
        while self._open and self.left > 0:
            _, depth, _, thought = heappop(self._open)
            self.left -= 1
            failing = sorted(self.trial(thought), key=lambda w: w.need.rank)
            if not failing:
                return thought
            if second_best is None and failing[0].need.rank > short.need.rank:
                second_best = thought
            self._think(failing[0], thought, len(failing), depth + 1)
        return second_best

    def _think(self, short: Want, so_far: Thought, failing: int, depth: int) -> None:
        """Note what would serve a need that is short as the shelf stands now."""
        for move in Moves(self.facts, self.serving, so_far, self._sake).of(short):
            thought = so_far.and_(move)
            if thought.sort not in self._seen:
                self._seen.add(thought.sort)
                heappush(self._open, (failing, depth, len(self._seen), thought))


class Moves:
    """What would serve a need that is short, as the shelf and its promises stand.

    `sake` is the need for whose sake all of it is done, for the words.
    """

    def __init__(self, facts: Facts, serving: Serving, so_far: Thought, sake: str) -> None:
        self.facts, self.serving, self.so_far, self.sake = facts, serving, so_far, sake
        self.shelf = serving.shelf
        self.while_good = WhileGood(facts, serving)

    def of(self, short: Want) -> Iterator[Thought]:
        """Thoughts, the likeliest first: what lacks something before what it is made for."""
        for want in reversed(short.tree()):
            if want.settled is Settled.HELD or want.settled is Settled.BUY:
                continue
            for key in want.choices:
                line = self.facts.lines[key]
                if line.never_kept or line.form is Form.SUNDRY:
                    continue
                for bottle in self.shelf.of_line(key):
                    yield from self._with(want, line, bottle)

    def _with(self, want: Want, line: Line, bottle: Bottle) -> Iterator[Thought]:
        """Ways to serve a want from one bottle."""
        number = bottle.number
        if bottle.left <= 0 or (want.ref, number) in self.so_far.kept:
            return
        sooner = self._made_while_good(want, line, bottle)
        if sooner is None:
            return
        amount = self.serving.amount_of(want, line, number)
        for givers in self._giving_way(want, number, amount):
            thought = sooner.and_(Thought({(one.ref, number): want.ref for one in givers}))
            for one in givers:
                thought = thought.and_(self._elsewhere(one, number) or IN_TURN)
            yield thought

    def _made_while_good(self, want: Want, line: Line, bottle: Bottle) -> Thought | None:
        """What has to be done for a bottle to be good when it is used; None when nothing helps."""
        judge, made = self.serving.judge(want, line), want.under
        if self.serving.barred(want, bottle):
            return None
        if not self.shelf.unfit_opened(
            bottle.number, want.use_day, want.purpose, judge, want.use_day
        ):
            return IN_TURN
        if made is None or made.earliest is None or made.latest is None or made.method is None:
            return None
        calendar, early = self.facts.calendar, made.earliest
        day = self.while_good.bottle_until(bottle, judge, early, made.latest[0])
        day = calendar.on_or_before(day) if day else None
        start = self.while_good.start(day, made.deadline, made.method) if day else None
        if start is None or start[0] < early or want.ingredient is None:
            return None
        saves = f"or {self.sake} would be short"
        return Thought(days={(made.ref, made.line): Sooner(start, (want.ingredient,), saves)})

    def _giving_way(self, want: Want, number: str, amount: int) -> Iterator[tuple[Want, ...]]:
        """Who might give a bottle up so that enough of it is free: nobody, one, or several."""
        bottle = self.shelf.bottle[number]
        if amount > bottle.left:
            return
        if self._enough(want, number, amount, 0):
            yield ()
            return
        others = [w for w in self.serving.holders.get(number, {}).values() if w.ref != want.ref]
        others.sort(key=lambda w: w.need.rank, reverse=True)
        row = sorted(others[: 2 * _GIVING_WAY], key=lambda w: self._elsewhere(w, number) is None)
        few = (combinations(row[:_GIVING_WAY], several) for several in (1, 2))
        for givers in chain.from_iterable(few):
            if self._enough(want, number, amount, sum(_held(w, number) for w in givers)):
                yield givers
        many = [*row, *others[2 * _GIVING_WAY :]]
        for several, given_up in enumerate(accumulate(_held(w, number) for w in many), 1):
            if self._enough(want, number, amount, given_up):
                if several > 2:
                    yield tuple(many[:several])
                return

    def _enough(self, want: Want, number: str, amount: int, given_up: int) -> bool:
        # what would be too close to call once it is given up is so by as much less
        free = self.shelf.left[number] + given_up
        return amount <= free and not self.serving.too_close(want, number, amount - given_up)

    def _elsewhere(self, want: Want, number: str) -> Thought | None:
        """How a want might do without a bottle: made, or from another with enough in it.

        None when it cannot, as far as can be seen without a trial.
        """
        wanted = _held(want, number)
        for key in want.choices:
            line = self.facts.lines[key]
            if key in self.facts.methods:
                return IN_TURN
            for bottle in self.shelf.of_line(key):
                enough = bottle.number != number and self.shelf.left[bottle.number] >= wanted
                if enough and (want.ref, bottle.number) not in self.so_far.kept:
                    thought = self._made_while_good(want, line, bottle)
                    if thought is not None:
                        return thought
        return None


def _held(want: Want, number: str) -> int:
    return sum(promise.amount for promise in want.promises if promise.bottle == number)
