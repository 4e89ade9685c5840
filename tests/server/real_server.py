"""A PostgreSQL server for the tests: made in a folder of its own, started, stopped, thrown away.

    python tests/server/real_server.py start FOLDER    prints the address to test with
    python tests/server/real_server.py stop FOLDER     stops it and removes the folder

It listens on a socket in that folder only, on a port nobody else uses, and knows one user
without a password. It writes nothing through to the disc: it is for tests, and would not
outlive a power cut. Debian's packages are looked for first, then the path.
"""

from __future__ import annotations

import os
import shutil
import socket
import subprocess
import sys
from pathlib import Path

USER = "stockroom"
SHUT_OUT = "newcomer"
# PostgreSQL refuses to run as root, and Debian's package brings this user along
INSTEAD_OF_ROOT = "postgres"
SETTINGS = {
    "listen_addresses": "",
    "fsync": "off",
    "synchronous_commit": "off",
    "full_page_writes": "off",
    "autovacuum": "off",
    "max_connections": "40",
    "shared_buffers": "64MB",
    "log_min_messages": "warning",
}


def programs() -> Path:
    """The folder of the server's programs, the newest first. Raises: SystemExit without one."""
    found = sorted(Path("/usr/lib/postgresql").glob("*/bin/initdb"), key=_version, reverse=True)
    on_path = shutil.which("initdb")
    if on_path:
        found.append(Path(on_path).resolve())
    if not found:
        raise SystemExit("No PostgreSQL server here: apt-get install postgresql")
    return found[0].parent


def _version(initdb: Path) -> int:
    name = initdb.parent.parent.name
    return int(name) if name.isdigit() else 0


def start(folder: Path) -> str:
    """Make and start a server in a new folder; its address, with no database named.

    Raises: CalledProcessError, with what it said, when it does not start.
    """
    # a socket's path has room for about a hundred letters
    folder.mkdir(parents=True)
    if os.geteuid() == 0:
        shutil.chown(folder, INSTEAD_OF_ROOT)
    _run(folder, "initdb", "-A", "trust", "-U", USER, "-E", "UTF8", *_locale(), "--no-sync")
    # one user needs a password, so that a wrong one can be tried
    rules = f"local all {SHUT_OUT} scram-sha-256\nlocal all all trust\n"
    (folder / "data" / "pg_hba.conf").write_text(rules)
    port = _free_port()
    settings = {**SETTINGS, "unix_socket_directories": str(folder), "port": str(port)}
    options = " ".join(f"-c {name}='{value}'" for name, value in settings.items())
    _run(folder, "pg_ctl", "-w", "-l", str(folder / "log"), "-o", options, "start")
    return f"postgresql+psycopg://{USER}@/?host={folder}&port={port}"


def stop(folder: Path) -> None:
    """Stop the server of that folder, and remove the folder."""
    _run(folder, "pg_ctl", "-w", "-m", "immediate", "stop")
    shutil.rmtree(folder)


def _locale() -> list[str]:
    # a language's own order where there is one: texts must come in the order of a file all the same
    listed = subprocess.run(["locale", "-a"], capture_output=True, text=True, check=False).stdout
    named = [name for name in listed.split() if name.lower() in ("en_gb.utf8", "en_us.utf8")]
    if named:
        return [f"--locale={named[0]}"]
    # ICU brings its own languages; Debian builds with it from 15 on
    return ["--locale-provider=icu", "--icu-locale=en", "--locale=C.UTF-8"]


def _run(folder: Path, program: str, *words: str) -> None:
    # each stands in a group of its own, so that an interrupted test run takes no server along
    as_user: dict[str, str] = {"user": INSTEAD_OF_ROOT} if os.geteuid() == 0 else {}
    subprocess.run(
        [str(programs() / program), "-D", str(folder / "data"), *words],
        check=True,
        cwd=folder,
        stdout=sys.stderr,
        start_new_session=True,
        **as_user,  # type: ignore[call-overload]
    )


def _free_port() -> int:
    with socket.socket() as asked:
        asked.bind(("127.0.0.1", 0))
        return int(asked.getsockname()[1])


if __name__ == "__main__":
    if len(sys.argv) != 3 or sys.argv[1] not in ("start", "stop"):
        raise SystemExit(__doc__)
    place = Path(sys.argv[2])
    if sys.argv[1] == "stop":
        stop(place)
    else:
        print(start(place))
