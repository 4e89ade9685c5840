"""How fast the pages and the API are under load; by hand: python tests/benchmarks/pages.py

The server is `stockroom serve` in processes of its own, the load a second process with eight
connections that stay open. "cold" is the first answer after something was saved, beside the
planner's own time for the same plan; "kept" the answers while nothing is saved, which come from
memory. On the college and on a house of 300 bookings, 2 000 bottles and 20 000 entries.
Nothing here is asserted: a machine's mood is not a test.
"""

from __future__ import annotations

import argparse
import http.client
import json
import os
import signal
import socket
import statistics
import subprocess
import sys
import tempfile
import threading
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from speed import FIRST_DAY, grow, median_seconds

from stockroom.measure.amounts import Amount
from stockroom.planning.derive import with_derived
from stockroom.planning.plan import plan
from stockroom.service import stock
from stockroom.service.database import make_practice
from stockroom.store.snapshot import facts

AT_ONCE = 8
"""Connections that ask at the same time."""

COLD = 5
"""First answers taken, each after something was saved."""

ASKED = ("/week", "/api/plan")


def free_port() -> int:
    """A port nobody listens on."""
    with socket.create_server(("127.0.0.1", 0)) as found:
        return int(found.getsockname()[1])


@contextmanager
def serving(store: Path, workers: int) -> Iterator[int]:
    """A server on the store; its port. Raises: TimeoutError when it does not come up."""
    port = free_port()
    words = ["--store", str(store), "--as-at", FIRST_DAY.isoformat(), "serve"]
    words += ["--port", str(port), "--workers", str(workers)]
    call = f"from stockroom.cli.main import run; raise SystemExit(run({words}))"
    # apart from us, so that all of its workers can be ended together; it only tells its address
    server = subprocess.Popen(
        [sys.executable, "-c", call], start_new_session=True, stderr=subprocess.DEVNULL
    )
    try:
        _wait_for(port, server)
        yield port
    finally:
        os.killpg(server.pid, signal.SIGTERM)
        server.wait(20)


def _wait_for(port: int, server: subprocess.Popen[bytes]) -> None:
    for _ in range(300):
        if server.poll() is not None:
            raise RuntimeError(f"the server ended with {server.returncode}")
        try:
            first(port, "/api/openapi.json")
        except OSError:
            time.sleep(0.1)
        else:
            return
    raise TimeoutError(f"no answer on port {port} after 30 s")


def first(port: int, path: str) -> float:
    """Seconds one answer takes on a new connection. Raises: ValueError where it is none."""
    link = http.client.HTTPConnection("127.0.0.1", port, timeout=120)
    try:
        return _ask(link, path)
    finally:
        link.close()


def _ask(link: http.client.HTTPConnection, path: str) -> float:
    begun = time.perf_counter()
    link.request("GET", path)
    came = link.getresponse()
    came.read()
    if came.status != http.client.OK:
        raise ValueError(f"{path} was answered with {came.status}")
    return time.perf_counter() - begun


def load(port: int, path: str, requests: int) -> dict[str, float]:
    """Ask so often from this process: requests per second, and the times of the slower ones."""
    times: list[float] = []

    def ask(count: int) -> None:
        link = http.client.HTTPConnection("127.0.0.1", port, timeout=120)
        times.extend([_ask(link, path) for _ in range(count)])
        link.close()

    threads = [threading.Thread(target=ask, args=(requests // AT_ONCE,)) for _ in range(AT_ONCE)]
    begun = time.perf_counter()
    for each in threads:
        each.start()
    for each in threads:
        each.join()
    took = time.perf_counter() - begun
    cuts = statistics.quantiles(times, n=20)
    return {"rate": len(times) / took, "p50": statistics.median(times), "p95": cuts[-1]}


def loaded(port: int, path: str, requests: int) -> dict[str, float]:
    """As `load`, from a process of its own, so that the asking takes none of the server's time."""
    words = [sys.executable, __file__, "--load", str(port), path, str(requests)]
    ran = subprocess.run(words, check=True, capture_output=True, text=True)
    return {name: float(value) for name, value in json.loads(ran.stdout).items()}


def cold(store: Path, port: int, path: str) -> float:
    """Median seconds of the first answer after something was saved."""
    times = []
    for _ in range(COLD):
        stock.draw(store, "S14", Amount.cm3(1), on=None, today=FIRST_DAY, by="T1")
        times.append(first(port, path))
    return statistics.median(times)


def pages(name: str, store: Path, requests: int) -> None:
    """Every page asked for, with one worker and with four."""
    known = with_derived(facts(store, FIRST_DAY))
    planner = median_seconds(lambda: plan(known), 5)
    print(f"  {name}: the planner alone {1000 * planner:.0f} ms")
    for workers in (1, 4):
        with serving(store, workers) as port:
            for path in ASKED:
                alone = cold(store, port, path)
                # every worker has its own memory
                for _ in range(8 * workers):
                    first(port, path)
                found = loaded(port, path, requests)
                print(
                    f"    {workers} worker{'s' if workers > 1 else ' '} {path:<10}"
                    f" cold {1000 * alone:6.0f} ms, {alone / planner:4.1f} × planner;"
                    f" kept {found['rate']:6.0f} a second, p50 {1000 * found['p50']:6.1f} ms,"
                    f" p95 {1000 * found['p95']:6.1f} ms, {found['p95'] / planner:5.2f} × planner"
                )


def main() -> None:
    """Print all figures; with --load, those of one load as JSON."""
    words = argparse.ArgumentParser(description=__doc__)
    words.add_argument("--load", nargs=3, metavar=("PORT", "PATH", "REQUESTS"))
    words.add_argument("--requests", type=int, default=400)
    given = words.parse_args()
    if given.load:
        port, path, count = given.load
        print(json.dumps(load(int(port), path, int(count))))
        return
    with tempfile.TemporaryDirectory() as folder:
        college, big = Path(folder) / "college.sqlite", Path(folder) / "big.sqlite"
        make_practice(college)
        make_practice(big)
        grow(big, bookings=300, bottles=2000, entries=20_000)
        print(f"{given.requests} requests, {AT_ONCE} at once")
        pages("the college", college, given.requests)
        pages("300 bookings, 2 000 bottles, 20 000 entries", big, given.requests // 4)


if __name__ == "__main__":
    main()
