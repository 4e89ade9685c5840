"""A booking row as a mapped class: what the large term of `optimum.py` is loaded as."""

from __future__ import annotations

from sqlalchemy.orm import DeclarativeBase, Mapped, mapped_column


class Base(DeclarativeBase):
    """The registry of this file alone."""


class Booking(Base):
    """One row: so many cm³ of a solution on a day, at least so strong."""

    __tablename__ = "booking"

    id: Mapped[int] = mapped_column(primary_key=True)
    solution: Mapped[int]
    day: Mapped[int]
    strength: Mapped[float]
    volume: Mapped[float]
