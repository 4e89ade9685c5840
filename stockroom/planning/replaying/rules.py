"""The rules a plan is held to once it is made, each with its name, and a fault against one."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum


class Broken(StrEnum):
    """A rule of the house that a plan breaks. The words name the rule and not the fault."""

    ANSWERED = "every need is answered once"
    ASKED = "a need is what its booking asks for"
    ADDS_UP = "what is drawn, made and bought adds up to what is missing"
    LISTED = "what is short is listed"
    NAMED = "what a line names is there"
    KIND = "what is used is of the kind asked for"
    OUT_OF_USE = "nothing set aside, not found, undated or gone is used"
    AGE = "it is good on the day it is used"
    SAFETY = "nothing is used past its safety date"
    STOOD = "a bottle has stood its time"
    FRESH = "it is as fresh as the recipe asks"
    NEVER_KEPT = "what is never kept is used the day it is mixed"
    ONE_SITTING = "what is never kept serves classes of one starting time"
    MARKED = "only what is wanted fresh, or is never kept, is marked fresh"
    STRENGTH = "its strength on the day is within the limits"
    TOLD = "the strength told is the strength expected on the day"
    ONE_STRENGTH = "one class gets one strength"
    EXACT = "an exact strength is found inside its interval"
    BARRED = "no recipe meets what it bars"
    BALANCE = "no bottle gives more than it holds"
    GIVEN = "no make gives more than is made"
    SOLUTE = "a make holds the solute its strength asks for"
    VESSEL = "a make fits its vessels"
    WEIGHED = "a solid is enough to weigh, or the plan says what else to do"
    OPEN = "hands-on work falls on open days"
    HOURS = "hands-on work fits the staffed hours"
    NOT_YET = "nothing is done before today"
    READY = "it is ready before it is used"
    DAY_BEFORE = "what is not fresh is done the open day before, or the plan says why not"
    SERVES = "a make names the bookings it serves"
    ORDERED = "what is to be bought is on order or in an order that covers it"
    IN_TIME = "an order comes before what waits for it"
    ORDER_BY = "an order goes off its lead time and the margin before it is needed"
    ARRIVES = "arrival and lateness follow from the order-by day"
    PRICED = "an order is its packs at their prices"
    SHARES = "shares add up to the penny"
    CHECK_DAY = "a check falls on an open day inside its time"


@dataclass(frozen=True, slots=True)
class Fault:
    """One rule broken: `where` is a need, make, bottle, order or check, `what` says how."""

    rule: Broken
    where: str
    what: str

    def __str__(self) -> str:
        return f"{self.where}: {self.what} ({self.rule})"
