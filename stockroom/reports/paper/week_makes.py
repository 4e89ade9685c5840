"""What is begun, made and finished on a day of the week sheet: a job each, cautions beside it."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta

from stockroom.keeping.rules import RuleKind
from stockroom.keeping.strength import strengths_on
from stockroom.keeping.verdict import verdict
from stockroom.measure.days import format_time
from stockroom.planning.amounts import say_strength
from stockroom.planning.decisions import Draw, Make, Plan
from stockroom.planning.facts import EXACT, Booking, Bottle, Facts
from stockroom.planning.known import how_known
from stockroom.planning.standing import standing_there
from stockroom.planning.timing import hours
from stockroom.reports.paper.day_times import TOO_LATE, times_of
from stockroom.reports.paper.left_over import clearing_words, collected, over_words
from stockroom.reports.paper.week_parts import Job, made, tied, volume
from stockroom.reports.words import listed, measured, named, raised, weekday_and_day

_ENDS = frozenset({RuleKind.LIFE, RuleKind.SAME_DAY, RuleKind.NEVER})
_LASTS = frozenset({RuleKind.LOOK, RuleKind.RECHECK, RuleKind.TEST})


class Makes:
    """The jobs that makes give, by day."""

    def __init__(self, known: Facts, plan: Plan) -> None:
        self.known, self.plan = known, plan
        self.by_id = {make.id: make for make in plan.makes}
        self.bottles = {bottle.number: bottle for bottle in known.bottles}
        self.bookings = {booking.number: booking for booking in known.bookings}

    def started(self, on: date) -> list[Job]:
        """What is begun on a day and ready on a later one."""
        return [self._job(make) for make in self.plan.makes if make.on == on < make.ready]

    def of_day(self, on: date) -> list[Job]:
        """What is finished that was begun before, then what is made; timed ones first of these."""
        finished = [self._finish(m) for m in self.plan.makes if m.finish_on == on > m.on]
        row = [make for make in self.plan.makes if make.on == on == make.ready]
        day = times_of(self.known, self.plan, on)
        times = day.makes
        jobs = [
            self._timed(make, times[make.id], late=make.id in day.too_late)
            for make in _by(times, row)
        ]
        return [*finished, *jobs, *(self._job(make) for make in row if make.id not in times)]

    def _timed(self, make: Make, minute: int, *, late: bool) -> Job:
        job = self._job(make)
        more = (*job.more, TOO_LATE) if late else job.more
        return replace(job, time=format_time(minute), more=more)

    def _job(self, make: Make) -> Job:
        method = self.known.methods[make.line]
        stands = f"stands {hours(method.stands_hours)}" if method.stands_hours else ""
        later = f"ready {weekday_and_day(make.ready)}" if make.ready > make.on else ""
        vessels = f"in {make.vessels} vessels, then mixed" if make.vessels > 1 else ""
        over = over_words(make, self.known.lines[make.line])
        told = (self._from(make), vessels, stands, later, self._until(make), over)
        served = f"for {listed(make.bookings)}" if make.bookings else ""
        verb = "start" if make.ready > make.on else "make"
        return Job(
            key=f"{make.on} {verb} {raised(make.line)}{self._which(make)}",
            time="",
            what=f"{made(make)}, {volume(make.volume)}",
            more=tuple(each for each in (*told, served, *map(raised, make.too_little)) if each),
            cautions=tuple(map(raised, make.cautions)),
            ref=make.id,
        )

    def _which(self, make: Make) -> str:
        """What tells two makes of one line on one day apart: whom they are for."""
        same = [m for m in self.plan.makes if m.line == make.line and m.on == make.on]
        return f" for {listed(make.bookings)}" if len(same) > 1 else ""

    def _finish(self, make: Make) -> Job:
        titrated = self.known.methods[make.line].titrated
        work = "finish and titrate" if titrated else "finish"
        vessels = f"{make.vessels} vessels, mixed first" if make.vessels > 1 else ""
        # the last sentence of its steps is what is done once it has stood
        last = raised(make.steps).rstrip(".").split(". ")[-1]
        told = (last, vessels, tied(f"{make.finishing} min"), f"for {listed(make.bookings)}")
        return Job(
            key=f"{make.finish_on} finish {raised(make.line)}{self._which(make)}",
            time="",
            what=f"{work} {made(make)}, {volume(make.volume)}, started {weekday_and_day(make.on)}",
            more=tuple(each for each in told if each),
            cautions=tuple(map(raised, make.cautions)),
            ref=make.id,
        )

    # -- what it is made from ------------------------------------------------------------

    def _from(self, make: Make) -> str:
        row = [self._source(make, draw) for draw in make.sources]
        return f"from {' + '.join(row)}" if row else ""

    def _source(self, make: Make, draw: Draw) -> str:
        much = measured(draw.amount, draw.kind)
        if draw.make in self.by_id and not draw.bottle:
            part = self.by_id[draw.make]
            return f"{much} of {made(part)} (made {weekday_and_day(part.ready)})"
        if not draw.bottle:
            return f"{much} of {named(draw.item, '')} (to be bought)"
        bottle = self.bottles[draw.bottle]
        line = self.known.lines[bottle.line]
        place = f" in {bottle.place}" if bottle.place else ""
        number = tied(f"of {bottle.number}")
        origin = f"{much} {number} {named(line.item, line.strength_text)}{place}"
        if not (line.strength and draw.strength) or not self._by_strength(make, bottle.line):
            return origin
        usual = round(draw.amount * draw.strength / line.strength)
        if abs(usual - draw.amount) <= EXACT * draw.amount:
            return origin
        known = how_known(bottle, strengths_on(bottle.record, line.rules, make.on))
        said = say_strength(line, draw.strength)
        return f"{origin} (expected {said}, {known}), not {measured(usual, draw.kind)}"

    def _by_strength(self, make: Make, line: str) -> bool:
        """Whether its amount follows from how strong it is, and from nothing else."""
        ingredients = self.known.methods[make.line].ingredients
        return any(line in each.lines and each.per_dm3 is None for each in ingredients)

    # -- how long it is good ---------------------------------------------------------------

    def _until(self, make: Make) -> str:
        if make.good_until is None:
            return ""
        if make.good_until == make.on:
            return "good that day only"
        last, near = make.good_until, make.good_until - make.on < timedelta(days=200)
        return f"good until {weekday_and_day(last) if near else last.isoformat()}"

    def left_over(self, on: date) -> list[Job]:
        """What is made this term and has its last day, so is not put back, by the clock."""
        row = [self._tidy(make, on) for make in self.plan.makes if self._last_day(make) == on]
        row += [self._tidy_bottle(each, on) for each in self._made_and_over(on)]
        return sorted(row, key=lambda job: job.time)

    def _made_and_over(self, on: date) -> list[Bottle]:
        """The bottles made here this term of which that is the last day.

        One that stands there longer is told of today, until somebody has poured it away.
        """
        found = []
        for bottle in standing_there(self.known.bottles):
            line, born = self.known.lines[bottle.line], bottle.record.made
            kinds = {rule.kind for rule in line.rules}
            if not bottle.made_here or born is None or born < self.known.start:
                continue
            if kinds & _ENDS and not kinds & _LASTS:
                until = verdict(bottle.record, line.rules, on).usable_until
                last = until and max(self.known.calendar.on_or_before(until), born)
                late = last is not None and last < on == self.plan.as_at
                found += [bottle] if last == on or late else []
        return found

    def _tidy_bottle(self, bottle: Bottle, on: date) -> Job:
        line = self.known.lines[bottle.line]
        method = self.known.methods.get(bottle.line)
        cautions = method.cautions if method else ()
        doing = "collect" if collected(cautions, line) else "pour away"
        ends = [
            self.bookings[number].minute + self.bookings[number].lasts_minutes
            for number in bottle.meant_for
            if number in self.bookings and self.bookings[number].on == on
        ]
        return Job(
            key=f"{on} tidy {bottle.number}",
            time=format_time(max(ends)) if ends and max(ends) < 1440 else "",
            what=f"{bottle.number} {named(line.item, line.strength_text)}: {doing} what is left",
            more=(self._last_of(bottle, on),),
            cautions=clearing_words(cautions, line),
        )

    def _last_of(self, bottle: Bottle, on: date) -> str:
        if bottle.record.made == on:
            return "good today only"
        rules = self.known.lines[bottle.line].rules
        until = verdict(bottle.record, rules, on).usable_until
        if until is None or until >= on:
            return "its last day is today"
        return f"its last day was {weekday_and_day(until)}"

    def _last_day(self, make: Make) -> date | None:
        kinds = {rule.kind for rule in self.known.lines[make.line].rules}
        if make.good_until is None or not kinds & _ENDS or kinds & _LASTS:
            return None
        used = max((self.bookings[number].on for number in make.bookings), default=make.on)
        day = self.known.calendar.on_or_before(make.good_until)
        return day if day >= used else make.good_until

    def _tidy(self, make: Make, on: date) -> Job:
        line = self.known.lines[make.line]
        kept_apart = collected(make.cautions, line)
        doing = "collect what is left" if kept_apart else "pour away what is left"
        again = [m.on for m in self.plan.makes if m.line == make.line and m.on > on]
        soon = [day for day in again if (day - on).days < 7 - on.weekday()]
        kept = f"do not keep it for {weekday_and_day(min(soon))}" if soon else ""
        until = make.good_until or on
        last = "its last day is today" if until == on else f"good until {weekday_and_day(until)}"
        last = "good today only" if until == make.on else last
        ends = [b.minute + b.lasts_minutes for b in self._on(make, on)]
        return Job(
            key=f"{on} tidy {raised(make.line)}{self._which(make)}{self._beside(make, on)}",
            time=format_time(max(ends)) if ends and max(ends) < 1440 else "",
            what=f"{made(make)}, the one made {weekday_and_day(make.on)}: {doing}",
            more=tuple(each for each in (last, kept) if each),
            cautions=clearing_words(make.cautions, line),
        )

    def _beside(self, make: Make, on: date) -> str:
        """What tells it apart from one of the same line made on another day, over on this one."""
        days = {m.on for m in self.plan.makes if m.line == make.line and self._last_day(m) == on}
        return f" of {make.on}" if len(days) > 1 else ""

    def _on(self, make: Make, on: date) -> list[Booking]:
        return [self.bookings[n] for n in make.bookings if self.bookings[n].on == on]


def _by(times: dict[str, int], row: list[Make]) -> list[Make]:
    return sorted((make for make in row if make.id in times), key=lambda make: times[make.id])
