"""What a cookie says of its bearer, signed so that nobody else can write one."""

from __future__ import annotations

import hashlib
import hmac
import secrets
from dataclasses import dataclass, replace
from datetime import date
from typing import Any

from itsdangerous import BadData, URLSafeTimedSerializer

from stockroom.web.door.roles import Role
from stockroom.web.house import House

LASTS = 12 * 3600
"""Seconds a session lasts: a working day with its evening. Our choice."""


@dataclass(frozen=True, slots=True)
class Session:
    """One bearer: a name drawn by lot, the role, the initials, and another day to look from.

    `as_at` is None for today. `generation` is that of the passphrase it came in by.
    """

    number: str
    role: Role
    initials: str = ""
    as_at: date | None = None
    generation: str = ""


def cookie_name(house: House) -> str:
    """The name of the cookie; the prefix holds a browser to this host and to encryption."""
    return "__Host-stockroom" if house.secure else "stockroom"


def fresh(house: House) -> Session:
    """A session for whoever has none: nobody at a shared door, the keeper on this machine."""
    return Session(secrets.token_urlsafe(24), Role.NOBODY if house.door else Role.KEEP_HOUSE)


def written(house: House, session: Session) -> str:
    """The session as a cookie's value."""
    data = {
        "n": session.number,
        "r": int(session.role),
        "i": session.initials,
        "d": session.as_at.isoformat() if session.as_at else "",
        "g": session.generation,
    }
    return str(_signer(house).dumps(data))


def read(house: House, cookie: str | None) -> Session | None:
    """The session a cookie carries; None for none, a forged one or one that is over."""
    if not cookie:
        return None
    try:
        return _session(_signer(house).loads(cookie, max_age=LASTS))
    except (BadData, KeyError, ValueError, TypeError):
        return None


def form_token(house: House, session: Session) -> str:
    """What every form carries to show that it is one of ours, for this bearer."""
    said = f"form {session.number}".encode()
    return hmac.new(house.key, said, hashlib.sha256).hexdigest()


def is_our_form(house: House, session: Session, token: str) -> bool:
    """Whether a form's token is the one this bearer was given."""
    return hmac.compare_digest(form_token(house, session).encode(), token.encode())


def with_initials(session: Session, initials: str) -> Session:
    """The same session with the initials its entries carry."""
    return replace(session, initials=initials.strip())


def _session(data: dict[str, Any]) -> Session:
    as_at = date.fromisoformat(data["d"]) if data["d"] else None
    return Session(str(data["n"]), Role(data["r"]), str(data["i"]), as_at, str(data["g"]))


def _signer(house: House) -> URLSafeTimedSerializer:
    return URLSafeTimedSerializer(
        house.key, salt="session", signer_kwargs={"digest_method": _DIGEST}
    )


_DIGEST = hashlib.sha256
