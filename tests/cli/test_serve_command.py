"""`stockroom serve`: what it refuses, what it says, and how it ends."""

from __future__ import annotations

import os
import re
import shutil
import signal
import socket
import ssl
import subprocess
import time
import urllib.error
import urllib.request
from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from serving_process import PATIENCE, serving

from stockroom.web.door.door_file import door_of, read_door
from stockroom.web.door.roles import Role
from stockroom.web.serving import house_as_text, house_from

if TYPE_CHECKING:
    from conftest import Stockroom

GOOD = "seven dull grey herons\n"

pytestmark = pytest.mark.file


def test_a_passphrase_is_set_from_standard_input_and_kept_as_a_hash(
    stockroom: Stockroom, own: Path
) -> None:
    result = stockroom("serve", "--set-passphrase", "read", store=own, typed=GOOD)
    assert (result.code, result.err.startswith("next: stockroom")) == (0, True)
    assert "whoever has it may look at every page" in result.said
    door = read_door(door_of(own))
    assert door
    assert door.passphrases[Role.READ].hashed.startswith("$argon2id$v=19$m=65536,t=3")
    assert GOOD.strip() not in door_of(own).read_text(encoding="utf-8") + result.out + result.err


@pytest.mark.parametrize("typed", ["", "short\n", "Quillmere College\n", "aaaaaaaaaaaaaaa\n"])
def test_one_easily_guessed_is_refused_and_nothing_is_kept(
    stockroom: Stockroom, own: Path, typed: str
) -> None:
    result = stockroom("serve", "--set-passphrase", "record", store=own, typed=typed)
    assert result.code == 2
    assert not door_of(own).exists()


def test_at_a_terminal_it_is_asked_for_twice(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    from stockroom.cli import serve

    typed = iter([GOOD.strip(), "something else"])
    monkeypatch.setattr(serve, "at_a_terminal", lambda: True)
    monkeypatch.setattr("getpass.getpass", lambda prompt, stream: next(typed))
    result = stockroom("serve", "--set-passphrase", "read", store=own)
    assert (result.code, "not the same" in result.err) == (2, True)
    assert not door_of(own).exists()


def test_a_passphrase_is_forgotten(stockroom: Stockroom, own: Path) -> None:
    stockroom("serve", "--set-passphrase", "read", store=own, typed=GOOD)
    assert stockroom("serve", "--forget-passphrase", "read", store=own).code == 0
    assert stockroom("serve", "--forget-passphrase", "read", store=own).code == 1


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("--port", "many"), "many"),
        (("--port", "70000"), "between 0 and 65535"),
        (("--port", "-1"), "-1"),
        (("--workers", "0"), "between 1 and 8"),
        (("--workers", "9"), "between 1 and 8"),
        (("--host", "0.0.0.0"), "--share"),
        (("--share", "--host", "prep"), "'prep'"),
        (("--name", "a b"), "'a b'"),
        (("--name", "x/../y"), "no name of a machine"),
        (("--certificate", "c.pem"), "without --key"),
        (("--key", "k.pem"), "without --certificate"),
        (("--set-passphrase", "owner"), "'owner'"),
        (("--set-passphrase", "read", "--forget-passphrase", "read"), "one after the other"),
    ],
)
def test_what_cannot_be_read_is_refused_with_2(
    stockroom: Stockroom, own: Path, words: tuple[str, ...], said: str
) -> None:
    result = stockroom("serve", *words, store=own)
    assert (result.code, said in result.err) == (2, True), result.err
    assert result.out == ""


def test_a_house_is_not_shared_before_a_passphrase_is_set(stockroom: Stockroom, own: Path) -> None:
    result = stockroom("serve", "--share", store=own)
    assert result.code == 1
    assert "--set-passphrase read" in result.err


def test_a_damaged_door_is_told_and_not_opened(stockroom: Stockroom, own: Path) -> None:
    door_of(own).write_text("{", encoding="utf-8")
    result = stockroom("serve", "--share", store=own)
    assert (result.code, "is damaged" in result.err) == (1, True)
    assert stockroom("serve", "--set-passphrase", "read", store=own, typed=GOOD).code == 1


def test_a_port_that_is_taken_is_told(stockroom: Stockroom, own: Path) -> None:
    with socket.create_server(("127.0.0.1", 0)) as taken:
        port = str(taken.getsockname()[1])
        result = stockroom("serve", "--port", port, store=own)
    assert (result.code, f"Port {port} is taken" in result.err) == (1, True)


def test_an_address_of_another_machine_is_told(stockroom: Stockroom, own: Path) -> None:
    stockroom("serve", "--set-passphrase", "read", store=own, typed=GOOD)
    result = stockroom("serve", "--share", "--host", "192.0.2.7", "--port", "0", store=own)
    assert (result.code, "no address of this machine" in result.err) == (1, True)


def test_a_store_that_is_not_there_is_told(stockroom: Stockroom, tmp_path: Path) -> None:
    assert stockroom("serve", "--port", "0", store=tmp_path / "none.sqlite").code == 1


def test_what_is_no_certificate_is_told(stockroom: Stockroom, own: Path, tmp_path: Path) -> None:
    (tmp_path / "c.pem").write_text("no certificate", encoding="utf-8")
    for name in ("c.pem", "none.pem"):
        files = ("--certificate", str(tmp_path / name), "--key", str(tmp_path / name))
        result = stockroom("serve", *files, "--port", "0", store=own)
        assert (result.code, "cannot be used" in result.err) == (1, True), result.err


def page(address: str, path: str = "/static/mark.svg") -> tuple[int, str]:
    """The status of a page, and its head."""
    try:
        with urllib.request.urlopen(address + path, timeout=PATIENCE) as came:
            return came.status, str(came.headers)
    except urllib.error.HTTPError as refused:
        with refused:
            return refused.code, str(refused.headers)


def test_it_answers_on_this_machine_alone_until_ctrl_c(own: Path) -> None:
    with serving(store=own) as (process, address, said):
        status, head = page(address, "/enter")
        assert (status, "uvicorn" in head) == (200, False)
        port = int(address.removeprefix("http://127.0.0.1:"))
        # another address of this very machine, where all of it could be reached
        with pytest.raises(ConnectionRefusedError):
            socket.create_connection(("127.0.0.2", port), 2).close()
        process.send_signal(signal.SIGINT)
        assert process.wait(PATIENCE) == 130
        assert "Traceback" not in "".join(said)


def test_shared_it_lets_nobody_in_without_a_passphrase_and_ends_when_it_is_asked_to(
    stockroom: Stockroom, own: Path
) -> None:
    stockroom("serve", "--set-passphrase", "read", store=own, typed=GOOD)
    words = ("--share", "--host", "127.0.0.1", "--workers", "2")
    with serving(*words, store=own) as (process, address, said):
        assert page(address, "/api/plan")[0] == 401
        assert "can be read by whoever listens on this network" in "".join(said)
        process.terminate()
        assert process.wait(PATIENCE) == 0
        with socket.create_server(("127.0.0.1", int(address.rpartition(":")[2]))):
            pass


@pytest.mark.skipif(not os.path.isdir("/proc/self"), reason="no list of processes to read")
def test_under_tls_it_speaks_tls_and_workers_do_not_outlive_a_parent_that_was_killed(
    own: Path, tmp_path: Path
) -> None:
    if not shutil.which("openssl"):
        pytest.skip("no openssl to make a certificate with")
    made = (
        "openssl req -x509 -newkey rsa:2048 -nodes -keyout k.pem -out c.pem -days 2 -subj".split()
    )
    names = ["/CN=localhost", "-addext", "subjectAltName=IP:127.0.0.1"]
    subprocess.run([*made, *names], cwd=tmp_path, check=True, capture_output=True)
    files = ("--certificate", str(tmp_path / "c.pem"), "--key", str(tmp_path / "k.pem"))
    known = ssl.create_default_context(cafile=tmp_path / "c.pem")
    with serving(*files, "--workers", "2", store=own) as (process, address, _):
        assert address.startswith("https://127.0.0.1:")
        with urllib.request.urlopen(address + "/enter", timeout=PATIENCE, context=known) as came:
            head = str(came.headers)
        workers = _children(process.pid)
        process.kill()
        until = time.monotonic() + PATIENCE
        while any(map(_runs, workers)) and time.monotonic() < until:
            time.sleep(0.1)
        assert [_runs(each) for each in workers][:2] == [False, False]
    assert "strict-transport-security" in head
    assert re.search(r"set-cookie: __Host-stockroom-\d+=.*; Secure", head)


def _children(parent: int) -> list[int]:
    return [
        int(each.name)
        for each in Path("/proc").iterdir()
        if each.name.isdecimal() and _parent(each) == parent
    ]


def _parent(process: Path) -> int:
    try:
        return int((process / "stat").read_text(encoding="utf-8").rpartition(")")[2].split()[1])
    except OSError:
        return 0


def _runs(number: int) -> bool:
    try:
        stat = Path(f"/proc/{number}/stat").read_text(encoding="utf-8")
    except OSError:
        return False
    return stat.rpartition(")")[2].split()[0] not in "ZX"


def test_a_worker_is_told_of_the_very_house_and_a_shared_key_is_not_in_the_telling(
    stockroom: Stockroom, own: Path
) -> None:
    from dataclasses import replace
    from datetime import date

    from stockroom.web.house import House

    house = House(own, b"k" * 32, date(2027, 1, 4), names=("localhost",), workers=2, port=8765)
    assert house_from(house_as_text(house)) == house
    stockroom("serve", "--set-passphrase", "read", store=own, typed=GOOD)
    door = read_door(door_of(own))
    assert door
    shared = replace(house, key=door.key, door=door_of(own))
    assert door.key.hex() not in house_as_text(shared)
    assert house_from(house_as_text(shared)) == shared
