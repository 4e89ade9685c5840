"""One pass over lines that hang together: what stands on the shelf, then what is made or bought.

Lines are taken in order, what is made before what it is made from. All that is asked of a
line is known when its turn comes, and is settled together.
"""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.planning.amounts import solute_in
from stockroom.planning.choosing.lookahead import Lookahead
from stockroom.planning.choosing.make_or_take import MakeOrTake
from stockroom.planning.choosing.openings import open_fewest
from stockroom.planning.choosing.said import explain
from stockroom.planning.choosing.second_thoughts import IN_TURN, Thought
from stockroom.planning.choosing.serve import Serving
from stockroom.planning.choosing.while_good import Sooner, WhileGood
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts, Line, Method
from stockroom.planning.making_times import MakingTimes, Times
from stockroom.planning.obtaining import Obtaining
from stockroom.planning.wants import Settled, Want
from stockroom.planning.windows import held
from stockroom.safety.bars import barred_by


class Netting:
    """One attempt on the lines of a family. Not reused: a new one for each attempt.

    `strict` serves in rank order and makes as late as may be, whatever that costs in work;
    `as_late` are needs whose makes are not to be brought forward. `thought` is what is to be
    done otherwise than in turn, so that nobody is short.
    """

    def __init__(
        self,
        facts: Facts,
        serving: Serving,
        times: MakingTimes,
        order: Sequence[str],
        *,
        strict: bool = False,
        as_late: frozenset[str] = frozenset(),
        thought: Thought = IN_TURN,
    ) -> None:
        self.facts, self.serving, self.times, self.order = facts, serving, times, order
        self.strict, self.as_late, self.thought = strict, as_late, thought
        serving.kept = thought.kept
        self.obtaining = Obtaining(facts, serving)
        self.while_good = WhileGood(facts, serving)
        self.ahead: dict[str, Lookahead] = {}
        self.waiting: dict[str, list[Want]] = {}
        self.passed: set[str] = set()
        self.took_chances = False
        self.sooner: dict[int, Sooner] = {}

    def settle(self, wants: list[Want]) -> None:
        """Settle these needs and all that is made for them."""
        for want in wants:
            if want.settled is Settled.OPEN:
                self._queue(want)
        for key in self.order:
            self.passed.add(key)
            if key in self.waiting:
                # sorted anew on each line: who falls back to it keeps the place of its booking
                row = sorted(self.waiting[key], key=lambda w: w.need.rank)
                self._settle_line(self.facts.lines[key], row)
        for key in list(self.serving.held):
            open_fewest(self._ahead(self.facts.lines[key]))
        for ahead in self.ahead.values():
            explain(ahead.moved.values(), self.serving.holders)
        for want in wants:
            self.obtaining.in_hand(want)

    def in_vain(self, wants: list[Want]) -> set[str]:
        """The needs whose makes were brought forward for nothing; the others are told why."""
        found = set()
        for root in wants if self.sooner else ():
            for want in root.tree():
                sooner = self.sooner.get(id(want))
                if sooner and sooner.held(want):
                    root.reasons.append(sooner.words(want))
                elif sooner:
                    found.add(root.ref)
        return found

    def failures(self, wants: list[Want]) -> list[Want]:
        """The roots under which something came out short or refused, each with its reason."""
        return [want for want in wants if self._failed(want)]

    def _failed(self, want: Want) -> bool:
        bad = (Settled.SHORT, Settled.REFUSED)
        if want.settled in bad:
            return True
        for part in want.parts:
            if self._failed(part):
                want.settled = part.settled
                want.reasons += part.reasons
                return True
        return False

    def _queue(self, want: Want) -> None:
        if want.line in self.passed:
            # a later choice whose turn is over: it takes what is left there
            self._settle_one(want)
        else:
            self.waiting.setdefault(want.line, []).append(want)

    # -- one line ------------------------------------------------------------------------

    def _settle_line(self, line: Line, wants: list[Want]) -> None:
        if line.key not in self.facts.methods or line.never_kept:
            for want in wants:
                self._settle_one(want)
            return
        # where what is left out can be made, who takes the bottle is for all of them to say
        asked = [want for want in wants if not self._refusal(want, line)]
        left_out = [want for want in asked if not self._served(want, line)]
        if left_out and len(left_out) < len(asked) and not self.strict:
            choice = MakeOrTake(self.facts, self._ahead(line), self._times_of)
            self.took_chances |= choice.settle(asked)
        rest = [want for want in wants if want.settled is not Settled.HELD]
        self._bring_forward(line, [w for w in rest if w in asked and self._may_make(w, line)])
        for want in rest:
            self._settle_one(want, served=True)

    def _settle_one(self, want: Want, *, served: bool = False) -> None:
        """Settle a want on the line it tries; `served`: what the shelf can do is done."""
        line = self.facts.lines[want.line]
        more = want.tried + 1 < len(want.choices)
        refused = self._refusal(want, line)
        if refused and not more:
            want.settled = Settled.REFUSED
            want.reasons.append(refused)
        elif not refused and not served and self._served(want, line):
            return
        # a next choice is tried before buying, since what is held costs nothing
        elif more and (refused or not self._may_make(want, line)):
            want.tried += 1
            self._queue(want)
        elif self._may_make(want, line):
            self._make(want, line)
        elif self.obtaining.buyable(want) or not self._served(want, line, last_drops=True):
            self.obtaining.buy(want, line)

    def _served(self, want: Want, line: Line, *, last_drops: bool = False) -> bool:
        if self.serving.from_shelf(want, line, last_drops=last_drops):
            return True
        return not line.never_kept and self._ahead(line).make_room(want)

    def _ahead(self, line: Line) -> Lookahead:
        if line.key not in self.ahead:
            self.ahead[line.key] = Lookahead(self.serving, line)
        return self.ahead[line.key]

    def _refusal(self, want: Want, line: Line) -> str:
        recipe = want.need.recipe
        if line.never_kept and line.key not in self.facts.methods:
            return f"{line.item} is never kept: {line.never_kept}"
        if want.under is None or not recipe.bars:
            return ""
        barred = barred_by(recipe, line.substance, self._own_substances(want.need))
        return f"{line.item} is barred in {recipe.code}: {barred}" if barred else ""

    def _own_substances(self, need: Need) -> frozenset[str]:
        keys = (requirement.line for requirement in need.recipe.requirements)
        return frozenset(self.facts.lines[key].substance for key in keys if key in self.facts.lines)

    # -- by making -----------------------------------------------------------------------

    def _may_make(self, want: Want, line: Line) -> bool:
        # a stock made for this alone would be weighed out and then diluted: twice the work
        held_only = want.ingredient is not None and line.key in want.ingredient.only_if_held
        return line.key in self.facts.methods and not held_only

    def _times_of(self, want: Want) -> Times | None:
        """When a want can be made; None when nobody can make it."""
        line = self.facts.lines[want.line]
        if not self._may_make(want, line):
            return None
        times = self.times.of(want, line, self.facts.methods[line.key])
        return times if times.latest else None

    def _bring_forward(self, line: Line, wants: list[Want]) -> None:
        if self.strict:
            return
        method = self.facts.methods[line.key]
        # what is itself an ingredient follows the day of what it is made for
        roots = [w for w in wants if w.under is None and w.ref not in self.as_late]
        dated = [(want, times) for want in roots if (times := self._times_of(want))]
        self.sooner |= self.while_good.sooner(line, method, dated)
        self.took_chances |= bool(self.sooner)

    def _make(self, want: Want, line: Line) -> None:
        method = self.facts.methods[line.key]
        times = self.times.of(want, line, method)
        want.method, want.deadline = method, times.deadline
        want.reasons += [times.said] if times.said else []
        if times.latest is None:
            want.settled = Settled.SHORT
            want.reasons.append(times.cannot)
            return
        sooner = self._sooner(want, times)
        want.latest = sooner.start if sooner else times.latest
        want.earliest = times.earliest
        want.settled = Settled.MAKE
        self._add_parts(want, line, method)

    def _sooner(self, want: Want, times: Times) -> Sooner | None:
        thought = self.thought.days.get((want.ref, want.line))
        late = want.ref in self.as_late
        if thought and times.earliest and times.latest and not late:
            in_time = times.earliest <= thought.start[0] <= times.latest[0]
            self.sooner |= {id(want): thought} if in_time else {}
        return self.sooner.get(id(want))

    def _add_parts(self, want: Want, line: Line, method: Method) -> None:
        assert want.latest is not None
        volume = round(self.serving.amount_from(want, line) * self._faded(want, line))
        for ingredient in method.ingredients:
            part = Want(want.need, ingredient.lines, want.latest, under=want, ingredient=ingredient)
            if ingredient.per_dm3 is not None:
                part.amount = -(-volume * ingredient.per_dm3 // 1_000_000)
            else:
                part.solute = solute_in(line, volume)
            want.parts.append(part)
            self._queue(part)

    def _faded(self, want: Want, line: Line) -> float:
        """How much more of a stock is set aside than its label asks: it fades till it is used."""
        if want.under is None or want.solute is None or want.earliest is None:
            return 1.0
        # the oldest it may be: on which day it shares a batch is settled only later
        left = held(line, want.earliest, want.use_day)
        return (line.strength or 1.0) / left if left else 1.0
