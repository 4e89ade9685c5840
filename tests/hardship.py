"""Commands run where something is wrong: no room on the disc, or no right to write.

    python tests/hardship.py WHAT FOLDER      the commands as JSON on standard input

WHAT is `limited` (no file may grow over 40 kB) or `plain`. Prints what came of each command as
JSON. Four commands are its own: `cp FROM TO`, `chmod MODE PATH`, `fill` takes up all of the
disc, and `free BYTES` gives so much back. The superuser passes over no permission here.
"""

from __future__ import annotations

import contextlib
import ctypes
import hashlib
import io
import json
import os
import resource
import shutil
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

LIMIT = 40_000
_DROP, _OVERRIDE, _SEARCH = 24, 1, 2
"""Of Linux: give up for good a power of the superuser; the two that pass over permissions."""


def program(what: str, folder: Path) -> list[str]:
    """The words that run this file."""
    return [sys.executable, __file__, what, str(folder)]


def on_a_small_disc(folder: Path, kilobytes: int) -> list[str] | None:
    """What to put before a program so that `folder` is a disc of that size; None if impossible.

    Anybody may have one in a namespace of their own, where the machine allows those.
    """
    mount = f"mount -t tmpfs -o size={kilobytes}k none '{folder}' && exec \"$@\""
    words = ["unshare", "--user", "--map-root-user", "--mount", "sh", "-c", mount, "sh"]
    if shutil.which("unshare") is None:
        return None
    tried = subprocess.run([*words, "true"], capture_output=True, check=False)
    return words if tried.returncode == 0 else None


def ran(words: list[str], commands: list[list[str]]) -> list[dict[str, Any]]:
    """What came of each command: its code, what it said, and the digest of the store after it."""
    typed = json.dumps(commands)
    done = subprocess.run(words, input=typed, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    found: list[dict[str, Any]] = json.loads(done.stdout.splitlines()[-1])
    return found


def main() -> None:
    """Bring the hardship about, and run the commands one after the other."""
    what, folder = sys.argv[1], Path(sys.argv[2])
    commands: list[list[str]] = json.load(sys.stdin)
    if what == "limited":
        resource.setrlimit(resource.RLIMIT_FSIZE, (LIMIT, LIMIT))
    print(json.dumps([_run(folder, words) for words in commands]))


def _run(folder: Path, words: list[str]) -> dict[str, Any]:
    from stockroom.cli.main import run

    if words[:1] == ["cp"]:
        shutil.copy(words[1], words[2])
        return {}
    if words[:1] == ["chmod"]:
        Path(words[2]).chmod(int(words[1], 8))
        return {}
    if words == ["fill"]:
        _fill(folder / "filler")
        return {}
    if words[:1] == ["free"]:
        size = (folder / "filler").stat().st_size
        os.truncate(folder / "filler", max(0, size - int(words[1])))
        return {}
    said = io.StringIO()
    # it may give back its code or leave with it, as the console script allows
    command: Callable[[list[str]], object] = run
    with contextlib.redirect_stdout(said), contextlib.redirect_stderr(said):
        try:
            code = command(words)
        except SystemExit as leaving:
            code = leaving.code
    return {"code": code or 0, "said": " ".join(said.getvalue().split()), "files": _digests(folder)}


def _digests(folder: Path) -> dict[str, str]:
    """The digest of each file, by name; blank for one that may not be read."""
    found = {}
    for each in sorted(folder.iterdir()):
        with contextlib.suppress(PermissionError):
            found[each.name] = hashlib.sha256(each.read_bytes()).hexdigest()
    found.pop("filler", None)
    return found


def _fill(path: Path) -> None:
    """Write until nothing more goes on the disc."""
    with contextlib.suppress(OSError), open(path, "wb", buffering=0) as filler:
        while True:
            filler.write(b"x" * 4096)


def without_powers() -> None:
    """Give up the superuser's passing over permissions, and start again without it."""
    if os.geteuid() == 0 and "STOCKROOM_PLAIN" not in os.environ:
        library = ctypes.CDLL(None)
        for power in (_OVERRIDE, _SEARCH):
            assert library.prctl(_DROP, power, 0, 0, 0) == 0
        os.environ["STOCKROOM_PLAIN"] = "yes"
        # the powers in hand are dropped by becoming another program
        os.execv(sys.executable, [sys.executable, *sys.argv])


if __name__ == "__main__":
    without_powers()
    main()
