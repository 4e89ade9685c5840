"""`stockroom serve` in a process of its own, for tests of what only a real process shows."""

from __future__ import annotations

import re
import signal
import subprocess
import sys
import threading
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

# on a busy machine the libraries of the pages take long to load
PATIENCE = 120

PROGRAM = "from stockroom.cli.main import run; run()"


@contextmanager
def serving(
    *words: str, store: Path, program: str = PROGRAM
) -> Iterator[tuple[subprocess.Popen[str], str, list[str]]]:
    """A server in a process of its own, its address once it listens, and what it says."""
    command = [sys.executable, "-c", program, "--store", str(store), "--as-at", "2027-01-04"]
    process = subprocess.Popen(
        [*command, "serve", "--port", "0", *words],
        stderr=subprocess.PIPE,
        text=True,
        preexec_fn=_heed_ctrl_c,
    )
    said: list[str] = []
    threading.Thread(target=_listen, args=(process, said), daemon=True).start()
    try:
        yield process, _address(process, said), said
    finally:
        process.kill()
        process.wait(10)
        assert process.stderr
        process.stderr.close()


def _heed_ctrl_c() -> None:
    # what a shell runs in the background is born deaf to it, and so is all that it runs
    signal.signal(signal.SIGINT, signal.SIG_DFL)


def _listen(process: subprocess.Popen[str], said: list[str]) -> None:
    assert process.stderr
    # line by line: each is to be seen as soon as it is said
    while line := process.stderr.readline():
        said.append(line)


def _address(process: subprocess.Popen[str], said: list[str]) -> str:
    until = time.monotonic() + PATIENCE
    while time.monotonic() < until and process.poll() is None:
        found = re.search(r"(https?://\S+:\d+)/ \(Ctrl-C ends it\)", "".join(said))
        if found:
            return found[1]
        time.sleep(0.05)
    raise AssertionError(f"never listened: {said}")
