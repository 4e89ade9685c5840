"""A passphrase: what is taken for one, how it is kept, and whose it is."""

from __future__ import annotations

import pytest
from argon2 import PasswordHasher

from stockroom.errors import BadInput
from stockroom.web.door import passphrases
from stockroom.web.door.door_file import DoorFile, Passphrase
from stockroom.web.door.passphrases import fit_for, kept, role_by
from stockroom.web.door.roles import Role

HOUSE = "Quillmere College"
# taken before a test puts a quicker one in its place
REAL = passphrases._HASHER

pytestmark = pytest.mark.usefixtures("quick_hash")


@pytest.mark.parametrize(
    "text",
    [
        "seven dull grey herons",
        "zwölf Boxkämpfer jagen",
        "correct-horse-battery",
        "d7!kQz91;:aa",
        "семь серых цапель",
        "x" + "abc defg" * 15,
    ],
)
def test_words_that_do_not_belong_together_are_taken(text: str) -> None:
    assert fit_for(Role.READ, text, HOUSE) == text


@pytest.mark.parametrize(
    "text",
    [
        "",
        "eleven sign",
        "x" * 129,
        "aaaaaaaaaaaaaaaa",
        "abababababababab",
        "abcdefghijklm",
        "098765432109",
        "qwertyuiopasd",
        "            ",
        "Quillmere College",
        "quillmerecollege2027",
        "Quillmere-2027-!",
        "keep-house keep-house",
        "readreadread",
        "stockroom stockroom 1",
        "PasswordPassword1",
        "a tab\tis not to be seen",
        "a null\x00 is not to be seen",
    ],
)
def test_what_is_easily_guessed_is_refused_and_never_quoted(text: str) -> None:
    with pytest.raises(BadInput) as refused:
        fit_for(Role.READ, text, HOUSE)
    assert len(text) < 4 or text not in str(refused.value)


def test_the_length_is_said_when_it_is_the_trouble() -> None:
    with pytest.raises(BadInput, match="has 11 signs, and 12 to 128 are taken"):
        fit_for(Role.RECORD, "eleven sign", HOUSE)


def test_a_house_without_a_name_takes_a_passphrase() -> None:
    assert fit_for(Role.READ, "seven dull grey herons", "")


def test_it_is_kept_as_argon2id_with_a_salt_of_its_own() -> None:
    one, two = kept("seven dull grey herons"), kept("seven dull grey herons")
    assert one.hashed.startswith("$argon2id$")
    assert one.hashed != two.hashed
    assert one.generation != two.generation


def test_the_passphrase_decides_the_role() -> None:
    door = DoorFile(b"k" * 32, {Role.READ: kept("one two three"), Role.RECORD: kept("four five")})
    assert role_by(door, "one two three") is Role.READ
    assert role_by(door, "four five") is Role.RECORD
    assert role_by(door, "One two three") is None
    assert role_by(door, "") is None


def test_the_same_sign_sent_in_two_ways_is_the_same() -> None:
    door = DoorFile(b"k" * 32, {Role.READ: kept(fit_for(Role.READ, "café über größer", HOUSE))})
    assert role_by(door, "cafe\u0301 u\u0308ber gro\u0308ßer") is Role.READ


class Counting:
    """Counts how often a hash is checked; every one is a mistake."""

    def __init__(self) -> None:
        self.checks = 0

    def verify(self, hashed: str, text: str) -> bool:
        from argon2.exceptions import VerifyMismatchError

        self.checks += 1
        raise VerifyMismatchError

    def hash(self, text: str) -> str:
        return "$argon2id$"


@pytest.mark.parametrize("roles", [[], [Role.READ], [Role.READ, Role.RECORD, Role.KEEP_HOUSE]])
def test_as_many_checks_are_made_whatever_is_set(
    roles: list[Role], monkeypatch: pytest.MonkeyPatch
) -> None:
    counting = Counting()
    monkeypatch.setattr(passphrases, "_HASHER", counting)
    door = DoorFile(b"k" * 32, {role: kept(role.words) for role in roles})
    assert role_by(door, "guessed") is None
    assert counting.checks == 3


def test_a_hash_nobody_can_read_lets_nobody_in() -> None:
    door = DoorFile(b"k" * 32, {Role.KEEP_HOUSE: Passphrase("not a hash", "g")})
    assert role_by(door, "not a hash") is None


def test_a_guess_costs_as_much_as_the_library_thinks_right() -> None:
    usual = PasswordHasher()
    assert (REAL.memory_cost, REAL.time_cost) == (usual.memory_cost, usual.time_cost)
    assert REAL.memory_cost >= 46 * 1024
