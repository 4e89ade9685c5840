"""A passphrase set or taken away, at the machine that serves."""

from __future__ import annotations

from dataclasses import replace

from stockroom.errors import BadInput, NotAllowed
from stockroom.service.answers import Done
from stockroom.service.front import front
from stockroom.settings import StoreAt
from stockroom.web.door.door_file import ROLES, door_of, made_private, new_door, read_door
from stockroom.web.door.door_file import write_door as write
from stockroom.web.door.passphrases import fit_for, kept, role_by
from stockroom.web.door.roles import Role

MAY = {
    Role.READ: "look at every page",
    Role.RECORD: "look, and enter what happens at the shelf",
    Role.KEEP_HOUSE: "look, enter, and change the house itself",
}
"""What each role may do, in words."""


def role_named(name: str) -> Role:
    """The role of that name. Raises: BadInput for none of the three."""
    found = [role for role in ROLES if role.words == name.strip().lower()]
    if not found:
        names = ", ".join(role.words for role in ROLES)
        raise BadInput(f"There is no role {name!r}.", f"Name one of {names}.")
    return found[0]


def set_passphrase(path: StoreAt, role: Role, typed: str) -> Done:
    """Keep a passphrase for a role of the house at `path`; whoever came in by the old one is out.

    Raises: BadInput for one easily guessed; NotAllowed for that of another role; StoreTrouble.
    """
    house, file = front(path, None), door_of(path)
    text = fit_for(role, typed, house.name)
    door = read_door(file) or new_door()
    others = {each: said for each, said in door.passphrases.items() if each is not role}
    taken = role_by(replace(door, passphrases=others), text)
    if taken:
        raise NotAllowed(
            f"That is the passphrase for {taken.words} already.",
            f"It decides the role, so {role.words} needs another.",
        )
    write(file, replace(door, passphrases={**others, role: kept(text)}))
    return Done(
        f"The passphrase for {role.words} is set: whoever has it may {MAY[role]}.",
        next="stockroom serve --share",
        practice=house.practice,
        details=(f"It is kept in {file}, as a hash.", "Whoever came in by an older one is out."),
    )


def forget_passphrase(path: StoreAt, role: Role) -> Done:
    """Take away the passphrase of a role; whoever came in by it is out.

    Raises: NotAllowed where there is none; StoreTrouble.
    """
    house, file = front(path, None), door_of(path)
    door = read_door(file)
    if door is None or role not in door.passphrases:
        raise NotAllowed(
            f"No passphrase is set for {role.words}.",
            f"stockroom serve --set-passphrase {role.words} sets one.",
        )
    left = {each: said for each, said in door.passphrases.items() if each is not role}
    write(file, replace(door, passphrases=left))
    return Done(f"The passphrase for {role.words} is forgotten.", practice=house.practice)


def opened_door(path: StoreAt) -> tuple[bytes, str]:
    """The key of a house that is to be shared, and a word of warning or "".

    Raises: NotAllowed where no passphrase is set; StoreTrouble for a damaged file.
    """
    file = door_of(path)
    door = read_door(file)
    if door is None or not door.passphrases:
        raise NotAllowed(
            "Nobody is let in from the room without a passphrase, and none is set.",
            "Set one first: stockroom serve --set-passphrase read (or record, or keep-house)",
        )
    if made_private(file):
        return door.key, (
            f"Others on this machine could read {file}; now they cannot."
            " Should anybody have done so, remove it and set the passphrases again."
        )
    return door.key, ""
