"""Whose money: orders split by what each department draws, and what each has spent and left."""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.planning.decisions import Budget, Order
from stockroom.planning.facts import Facts, Placed
from stockroom.planning.making.batch import Taken


def share_out(pence: int, parts: dict[str, int]) -> tuple[tuple[str, int], ...]:
    """Split pence by the parts, to the penny: the shares always add up to the whole.

    Odd pence go to the largest remainders, ties by name.
    """
    whole = sum(parts.values())
    if not whole:
        return ()
    shares = {name: pence * part // whole for name, part in parts.items()}
    odd = pence - sum(shares.values())
    by_remainder = sorted(parts, key=lambda name: (-(pence * parts[name] % whole), name))
    for name in by_remainder[:odd]:
        shares[name] += 1
    return tuple(sorted(shares.items()))


def by_department(takes: Iterable[Taken]) -> dict[str, int]:
    """What each department draws of a line, held or bought (micro-units)."""
    parts: dict[str, int] = {}
    for take in takes:
        # by what each draws, held or bought: who books first would else never pay
        code = take.need.booking.department
        parts[code] = parts.get(code, 0) + take.amount
    return parts


def spent_on(order: Placed) -> tuple[tuple[str, int], ...]:
    """What an order placed costs each department; of one cancelled, the part that came."""
    if order.cancelled is None:
        return order.shares
    came = min(order.came, order.amount)
    pence = order.pence * came // order.amount if order.amount else 0
    return share_out(pence, dict(order.shares))


def budgets(facts: Facts, orders: Iterable[Order]) -> list[Budget]:
    """Every department's money, by code: those without a limit only where they spend.

    What was spent is what was ordered this term, or is still to come.
    """
    spent: dict[str, int] = {}
    for placed in facts.placed:
        for code, pence in spent_on(placed):
            spent[code] = spent.get(code, 0) + pence
    promised: dict[str, int] = {}
    for order in orders:
        for code, pence in order.shares:
            promised[code] = promised.get(code, 0) + pence
    known = {department.code: department for department in facts.departments}
    row = []
    for code in sorted(known.keys() | spent.keys() | promised.keys()):
        department = known.get(code)
        had = department.left_pence if department else None
        if had is None and code not in spent and code not in promised:
            continue
        name = department.name if department else ""
        row.append(Budget(code, name, spent.get(code, 0), promised.get(code, 0), had))
    return row
