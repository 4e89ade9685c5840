"""The three roles, each of which may do what the ones before it may."""

from __future__ import annotations

from enum import IntEnum


class Role(IntEnum):
    """What a visitor may do; the order is the order of trust."""

    NOBODY = 0
    READ = 1
    RECORD = 2
    KEEP_HOUSE = 3

    @property
    def words(self) -> str:
        """The name as people read it: "keep-house"."""
        return self.name.lower().replace("_", "-")
