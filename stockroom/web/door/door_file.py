"""The file of the door: the passphrases as hashes, and the key that signs cookies.

It lies beside the store, or in the user's data folder for a store kept by a server. It is no part
of the store, so no backup and nothing handed out takes it along, and only its owner may read it.
"""

from __future__ import annotations

import contextlib
import hashlib
import json
import os
import secrets
import tempfile
from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path

from stockroom.errors import StoreTrouble
from stockroom.settings import Server, StoreAt, data_folder
from stockroom.web.door.roles import Role

LAYOUT = 1
"""The layout of the file, for a later program that keeps more."""

ONLY_OWNER = 0o600

ROLES = (Role.READ, Role.RECORD, Role.KEEP_HOUSE)
"""Those a passphrase may be set for."""


@dataclass(frozen=True, slots=True)
class Passphrase:
    """One passphrase as it is kept: its argon2 hash, and a name drawn anew each time it is set."""

    hashed: str
    generation: str


@dataclass(frozen=True, slots=True)
class DoorFile:
    """What the file says. `key` signs cookies and forms and outlives every passphrase."""

    key: bytes
    passphrases: Mapping[Role, Passphrase] = field(default_factory=dict)


def door_of(path: StoreAt) -> Path:
    """Where the door of a store is kept: STORE.door beside it, wherever a link to it lies."""
    if isinstance(path, Server):
        # the address as it may be shown: a password changed there is no other house
        named = hashlib.sha256(str(path).encode()).hexdigest()[:16]
        return data_folder() / f"{named}.door"
    whole = path.resolve()
    return whole.with_name(f"{whole.name}.door")


def new_door() -> DoorFile:
    """A door without a passphrase."""
    return DoorFile(secrets.token_bytes(32))


def read_door(file: Path) -> DoorFile | None:
    """What the file says; None where there is none. Raises: StoreTrouble for a damaged one."""
    try:
        said = json.loads(file.read_text(encoding="utf-8"))
        if said["layout"] != LAYOUT:
            raise ValueError(f"layout {said['layout']}")
        key = bytes.fromhex(said["key"])
        kept = {_role(name): _passphrase(each) for name, each in said["passphrases"].items()}
    except FileNotFoundError:
        return None
    except OSError as trouble:
        raise StoreTrouble(
            f"The file of passphrases {file} cannot be read: {trouble.strerror}.",
            "It must belong to whoever runs stockroom serve.",
        ) from trouble
    except (ValueError, KeyError, TypeError, AttributeError) as fault:
        raise _damaged(file) from fault
    if len(key) < 32:
        raise _damaged(file)
    return DoorFile(key, kept)


def write_door(file: Path, door: DoorFile) -> None:
    """Write the file whole, readable by its owner only, or leave it as it was.

    Raises: StoreTrouble where it cannot be written.
    """
    kept = {
        role.words: {"hash": each.hashed, "generation": each.generation}
        for role, each in sorted(door.passphrases.items())
    }
    said = json.dumps({"layout": LAYOUT, "key": door.key.hex(), "passphrases": kept}, indent=1)
    try:
        file.parent.mkdir(parents=True, exist_ok=True)
        _replaced(file, said)
    except OSError as trouble:
        raise StoreTrouble(
            f"The passphrase was not kept: {file} cannot be written ({trouble.strerror}).",
            "Make room, or ask whoever owns the folder.",
        ) from trouble


def made_private(file: Path) -> bool:
    """Take away what others may do with the file; whether there was anything to take away.

    Raises: StoreTrouble where that is not allowed.
    """
    # elsewhere these bits say nothing about who may read
    if os.name != "posix" or not file.stat().st_mode & 0o077:
        return False
    try:
        file.chmod(ONLY_OWNER)
    except OSError as trouble:
        raise StoreTrouble(
            f"Others on this machine may read {file}, and it cannot be made private"
            f" ({trouble.strerror}).",
            f"Its owner can: chmod 600 {file}",
        ) from trouble
    return True


def _replaced(file: Path, text: str) -> None:
    # made by mkstemp: readable by its owner only from the first byte on
    handle, name = tempfile.mkstemp(prefix=f"{file.name}.", dir=file.parent)
    try:
        with open(handle, "w", encoding="utf-8") as fresh:
            fresh.write(text + "\n")
            fresh.flush()
            os.fsync(fresh.fileno())
        Path(name).replace(file)
    except BaseException:
        with contextlib.suppress(OSError):
            Path(name).unlink()
        raise


def _role(name: str) -> Role:
    found = [role for role in ROLES if role.words == name]
    if not found:
        raise ValueError(f"no role {name}")
    return found[0]


def _passphrase(said: Mapping[str, str]) -> Passphrase:
    return Passphrase(str(said["hash"]), str(said["generation"]))


def _damaged(file: Path) -> StoreTrouble:
    return StoreTrouble(
        f"The file of passphrases {file} is damaged.",
        "Take it away and set the passphrases again: stockroom serve --set-passphrase read",
    )
