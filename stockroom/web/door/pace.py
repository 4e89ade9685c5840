"""How often somebody may try to come in: a few times at once, then only now and then."""

from __future__ import annotations

import ipaddress
import threading
import time
from collections import OrderedDict
from collections.abc import Callable
from dataclasses import dataclass

AT_ONCE, EVERY = 5, 60.0
"""Tries one address has at once, and the seconds until it has one more. Our choice."""

ALL_AT_ONCE, ALL_EVERY = 20, 15.0
"""The same for all addresses together: a room that comes in at nine, and no more. Our choice."""

REMEMBERED = 1024
"""Addresses kept in mind by a worker; the one not heard of longest is forgotten first."""

Clock = Callable[[], float]


@dataclass(slots=True)
class Bucket:
    """Tries left, which come back one after the other. `since` is when it was last asked."""

    most: float
    every: float
    left: float
    since: float

    def wait(self, now: float) -> float:
        """Seconds until there is a try; 0 where there is one."""
        self.left = min(self.most, self.left + (now - self.since) / self.every)
        self.since = now
        # a hair's breadth of rounding is no reason to wait
        return 0.0 if self.left >= 1 - 1e-9 else (1 - self.left) * self.every


class Pace:
    """The tries of each address and of all together, in the memory of one worker.

    A worker sees its share of the tries only, so each has its share of the number. Trying
    again costs nothing while there is none left. Whoever came in gets that one try back, and
    nothing that was used up before it; what all together have stays used.
    """

    def __init__(self, workers: int = 1, clock: Clock = time.monotonic) -> None:
        self._clock, self._lock = clock, threading.Lock()
        self._most = max(AT_ONCE / workers, 1.0)
        self._every = EVERY * workers
        total = max(ALL_AT_ONCE / workers, 1.0)
        self._all = Bucket(total, ALL_EVERY * workers, total, clock())
        self._each: OrderedDict[str, Bucket] = OrderedDict()

    def wait(self, address: str) -> float:
        """Seconds this address has to wait; 0 where it may try now, which is then counted."""
        with self._lock:
            now, bucket = self._clock(), self._of(_whose(address))
            seconds = max(bucket.wait(now), self._all.wait(now))
            if not seconds:
                bucket.left -= 1
                self._all.left -= 1
            return seconds

    def came_in(self, address: str) -> None:
        """Give an address back the one try by which somebody came in."""
        with self._lock:
            bucket = self._of(_whose(address))
            bucket.left = min(bucket.most, bucket.left + 1)

    def _of(self, who: str) -> Bucket:
        if who not in self._each:
            self._each[who] = Bucket(self._most, self._every, self._most, self._clock())
        self._each.move_to_end(who)
        while len(self._each) > REMEMBERED:
            self._each.popitem(last=False)
        return self._each[who]


def _whose(address: str) -> str:
    """The address, or of one of the long kind the network: one machine has as many as it likes."""
    try:
        found = ipaddress.ip_address(address.partition("%")[0])
    except ValueError:
        return address
    if found.version == 6 and found.ipv4_mapped is None:
        return str(ipaddress.ip_network((found, 64), strict=False))
    return str(found)
