"""A sheet as data: what its template is filled with, and what --json shows."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import fields, is_dataclass
from datetime import date
from enum import Enum
from typing import Any


def as_data(value: object) -> Any:
    """Frozen values as what JSON holds: days as ISO text, records as objects by field name.

    Raises: TypeError for what no sheet is made of, naming its type.
    """
    if value is None or isinstance(value, (bool, int, float)):
        return value
    if isinstance(value, Enum):
        return as_data(value.value)
    if isinstance(value, str):
        return value
    if isinstance(value, date):
        return value.isoformat()
    if is_dataclass(value):
        return {each.name: as_data(getattr(value, each.name)) for each in fields(value)}
    if isinstance(value, Mapping):
        return {str(key): as_data(each) for key, each in value.items()}
    if isinstance(value, (tuple, list)):
        return [as_data(each) for each in value]
    raise TypeError(f"a sheet holds no {type(value).__name__}: {value!r}")
