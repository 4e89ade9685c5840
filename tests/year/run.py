"""Live through a simulated year, for people: python tests/year/run.py --seed 7 --days 365

Prints how it goes month by month and what came of it; ends with 1 at the first thing that
does not hold, and keeps the store it happened in.
"""

from __future__ import annotations

import argparse
import sys
import tempfile
from datetime import datetime
from pathlib import Path
from unittest import mock

sys.path.insert(0, str(Path(__file__).parents[1]))

from simulated_year import Broken, Year

from stockroom import clock
from stockroom.service.database import make_practice


def main() -> int:
    """One year, as asked for on the command line."""
    asked = argparse.ArgumentParser(description=__doc__)
    asked.add_argument("--seed", type=int, default=1)
    asked.add_argument("--days", type=int, default=365)
    asked.add_argument("--every", type=int, default=25, help="steps between two thorough looks")
    given = asked.parse_args()
    folder = Path(tempfile.mkdtemp(prefix=f"year-{given.seed}-"))
    path = folder / "store.sqlite"
    # the store begins at a fixed moment too, or no two runs could be alike
    with mock.patch.object(clock, "now", return_value=datetime(2027, 1, 4, 7)):
        make_practice(path)
    year = Year(path, folder, given.seed, given.days, given.every, told=print)
    try:
        digest = year.run()
    except Broken as broken:
        print(f"{broken}\nThe store: {path}")
        return 1
    finally:
        for what, count in sorted(year.outcomes.items()):
            print(f"{count:6} {what}")
        for what, count in year.refusals.most_common(25):
            print(f"{count:6} refused: {what}")
    print(f"seed {given.seed}, {given.days} days, {year.step} steps: all held. {digest}")
    return 0


if __name__ == "__main__":
    sys.exit(main())
