"""What a cookie says of its bearer, signed so that nobody else can write one."""

from __future__ import annotations

import hashlib
import hmac
import secrets
from dataclasses import dataclass, replace
from datetime import date
from typing import Any

from itsdangerous import BadData, TimestampSigner, URLSafeTimedSerializer

from stockroom.web.door.roles import Role
from stockroom.web.house import House

LASTS = 12 * 3600
"""Seconds a session lasts: a working day with its evening. Our choice."""

IDLE = 2 * 3600
"""Seconds a session at a shared door lasts while nothing is asked: a long practical. Our choice."""

RENEWED = 300
"""Seconds after which the cookie is signed anew, so that not every answer carries one."""

LONGEST_INITIALS = 8
"""Signs of the initials."""


@dataclass(frozen=True, slots=True)
class Session:
    """One bearer: a name drawn by lot, the role, the initials, and another day to look from.

    `as_at` is None for today. `generation` is that of the passphrase it came in by, `born` the
    moment it began, in seconds since 1970.
    """

    number: str
    role: Role
    initials: str = ""
    as_at: date | None = None
    generation: str = ""
    born: int = 0


def moment() -> int:
    """Seconds since 1970: the one clock by which cookies are signed and read."""
    return TimestampSigner(b"clock only").get_timestamp()


def cookie_name(house: House) -> str:
    """The name of the cookie; the prefix holds a browser to this host and to encryption."""
    # browsers give a cookie to every port of a host: two houses would take each other's
    own = f"stockroom-{house.port}" if house.port else "stockroom"
    return f"__Host-{own}" if house.secure else own


def fresh(house: House) -> Session:
    """A session for whoever has none: nobody at a shared door, the keeper on this machine."""
    role = Role.NOBODY if house.door else Role.KEEP_HOUSE
    return Session(_number(), role, born=moment())


def come_in(role: Role, generation: str, initials: str) -> Session:
    """The session of somebody let in: always a number nobody had before."""
    return Session(_number(), role, initials, generation=generation, born=moment())


def written(house: House, session: Session) -> str:
    """The session as a cookie's value."""
    data = {
        "n": session.number,
        "r": int(session.role),
        "i": session.initials,
        "d": session.as_at.isoformat() if session.as_at else "",
        "g": session.generation,
        "b": session.born,
    }
    return str(_signer(house).dumps(data))


def read(house: House, cookie: str | None) -> Session | None:
    """The session a cookie carries; None for none, a forged one or one that is over."""
    found = read_with_age(house, cookie)
    return found[0] if found else None


def read_with_age(house: House, cookie: str | None) -> tuple[Session, int] | None:
    """The session a cookie carries, and the seconds since the cookie was written; or None."""
    if not cookie:
        return None
    try:
        data, signed = _signer(house).loads(cookie, max_age=LASTS, return_timestamp=True)
        session = _session(data)
    except (BadData, KeyError, ValueError, TypeError):
        return None
    age = moment() - int(signed.timestamp())
    idle = house.door is not None and age > IDLE
    return None if idle or moment() - session.born > LASTS else (session, age)


def form_token(house: House, session: Session) -> str:
    """What every form carries to show that it is one of ours, for this bearer."""
    said = f"form {session.number}".encode()
    return hmac.new(house.key, said, hashlib.sha256).hexdigest()


def is_our_form(house: House, session: Session, token: str) -> bool:
    """Whether a form's token is the one this bearer was given."""
    # a form may hold signs no text of ours can: they are no token either
    given = token.encode(errors="replace")
    return hmac.compare_digest(form_token(house, session).encode(), given)


def with_initials(session: Session, initials: str) -> Session:
    """The same session with the initials its entries carry."""
    return replace(session, initials=initials.strip())


def _number() -> str:
    return secrets.token_urlsafe(24)


def _session(data: dict[str, Any]) -> Session:
    as_at = date.fromisoformat(data["d"]) if data["d"] else None
    initials, generation = str(data["i"]), str(data["g"])
    return Session(
        str(data["n"]), Role(data["r"]), initials, as_at, generation, born=int(data["b"])
    )


class _Signer(TimestampSigner):
    def get_timestamp(self) -> int:
        return moment()


def _signer(house: House) -> URLSafeTimedSerializer:
    return URLSafeTimedSerializer(
        house.key, salt="session", signer=_Signer, signer_kwargs={"digest_method": hashlib.sha256}
    )
