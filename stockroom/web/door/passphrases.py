"""What makes a passphrase, how it is kept, and which of them somebody typed."""

from __future__ import annotations

import re
import secrets
import unicodedata
from functools import cache

from argon2 import PasswordHasher
from argon2.exceptions import InvalidHashError, VerificationError

from stockroom.errors import BadInput
from stockroom.web.door.door_file import ROLES, DoorFile, Passphrase
from stockroom.web.door.roles import Role

LEAST = 12
"""Signs a passphrase has at the least."""

MOST = 128
"""Signs that are taken: room for a sentence, and a bound on what is hashed."""

_KNOWN = ("stockroom", "passphrase", "password", "keephouse", "practice", "read", "record", "the")
# what a hand runs along when it wants to be done
_ROWS = (
    "abcdefghijklmnopqrstuvwxyzabcdefghijklmnopqrstuvwxyz",
    "012345678901234567890123456789",
    "1qaz2wsx3edc4rfv5tgb6yhn7ujm8ik9ol0p",
    "qwertyuiopasdfghjklzxcvbnm",
    "qwertzuiopasdfghjklyxcvbnm",
    "azertyuiopqsdfghjklmwxcvbn",
)
_HASHER = PasswordHasher()


def as_typed(text: str) -> str:
    """The passphrase in one writing: a keyboard may send the same sign in two ways."""
    return unicodedata.normalize("NFKC", text)


def fit_for(role: Role, typed: str, house: str) -> str:
    """The passphrase as it is to be typed from now on.

    `house` is the name of the house, which everybody who comes by may know.
    Raises: BadInput, which never quotes it, for one that is easily guessed.
    """
    text = as_typed(typed)
    about = f"The passphrase for {role.words}"
    if not LEAST <= len(text) <= MOST:
        told = f"{about} has {len(text)} signs, and {LEAST} to {MOST} are taken."
        raise BadInput(told, "Four or five words that do not belong together are easily kept.")
    if not text.isprintable():
        raise BadInput(f"{about} holds a sign that cannot be seen.", "Type it with letters.")
    plain = re.sub(r"[\W_]+", "", text.casefold()) or text
    if len(set(plain)) < 5 or _is_a_row(plain):
        raise BadInput(f"{about} is a few signs repeated or in a row.", "Take several words.")
    left = _without(plain, (*_names(house), *_KNOWN))
    if len(left) < 8 or len(set(left)) < 5:
        told = f"{about} is made of the name of the house, or of words everybody tries first."
        raise BadInput(told, "Take words that have nothing to do with it.")
    return text


def kept(text: str) -> Passphrase:
    """A passphrase as it is kept, with a name of its own: whoever came in by an older one falls
    out."""
    return Passphrase(_HASHER.hash(text), secrets.token_urlsafe(9))


def role_by(door: DoorFile, typed: str) -> Role | None:
    """The role of the passphrase somebody typed; None where it is none of the house's.

    Each of the three is tried, and a role without one costs as much as the others, so that
    the time it takes tells nothing.
    """
    # more than any passphrase has: cut, so that it is tried like any other
    text = as_typed(typed[: 2 * MOST])
    tried = [role for role in ROLES if _is(door.passphrases.get(role), text)]
    return max(tried, default=None)


def _is(passphrase: Passphrase | None, text: str) -> bool:
    hashed = passphrase.hashed if passphrase else _nobodys()
    try:
        return _HASHER.verify(hashed, text) and passphrase is not None
    except (VerificationError, InvalidHashError):
        return False


@cache
def _nobodys() -> str:
    """The hash of a passphrase nobody has."""
    return _HASHER.hash(secrets.token_urlsafe(24))


def _is_a_row(plain: str) -> bool:
    return any(plain in row or plain[::-1] in row for row in _ROWS)


def _names(house: str) -> list[str]:
    whole = re.sub(r"[\W_]+", "", house.casefold())
    words = [word for word in re.findall(r"\w+", house.casefold()) if len(word) > 3]
    return sorted(filter(None, [whole, *words]), key=len, reverse=True)


def _without(plain: str, words: tuple[str, ...]) -> str:
    for word in words:
        plain = plain.replace(word, "")
    return plain
