"""A second look at every plan: each rule of the house, from the facts and the decisions alone.

It has nothing of the planner's own working: no shelf, no promises, no lots. Rules that
are short are said again here in other words, so that one slip cannot hide in both.
Whatever breaks a rule is a fault of the planner, and such a plan is not to be shown.
"""

from __future__ import annotations

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.replaying.bottles import faults_of_bottles
from stockroom.planning.replaying.equipment import faults_of_equipment
from stockroom.planning.replaying.makes import faults_of_makes
from stockroom.planning.replaying.needs import faults_of_needs
from stockroom.planning.replaying.orders import faults_of_checks, faults_of_orders
from stockroom.planning.replaying.rules import Broken as Broken
from stockroom.planning.replaying.rules import Fault as Fault
from stockroom.planning.replaying.times import faults_of_times
from stockroom.planning.replaying.walk import walk


def replay(facts: Facts, plan: Plan) -> tuple[Fault, ...]:
    """Every rule this plan breaks, with where and how; () for a plan that may be shown.

    `plan` may be of the whole term or of a part of it, as `planning.plan.plan` gives it,
    and `facts` what it was made from. Never raises for what a plan says, however wrong.
    """
    laid = walk(facts, plan)
    return (
        *laid.lost,
        *faults_of_needs(laid),
        *faults_of_bottles(laid),
        *faults_of_makes(laid),
        *faults_of_equipment(laid),
        *faults_of_times(laid),
        *faults_of_orders(laid),
        *faults_of_checks(laid),
    )
