"""The options that may stand before or after the command: --store, --as-at, --by, --json.

Click takes an option of the whole program only before the command's name. So
these four are lifted out of the command line first, wherever they stand.
"""

from __future__ import annotations

import os
import re
import sys
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date

import typer

from stockroom.errors import BadInput
from stockroom.service.typed import day_or_none
from stockroom.settings import StoreAt

ANYWHERE = (
    "Anywhere in the line: --store PATH (the store; else STOCKROOM_STORE), "
    "--as-at DATE (the day to think of as today), --json (for programs), "
    "--by INITIALS (who; else STOCKROOM_BY)."
)
"""Printed under the help of every command."""


# the options that may be given again, by command; of any other the second would go unseen
SEVERAL = {
    "bring-in": frozenset({"--column", "--answer"}),
    "fades": frozenset({"--below"}),
    "make": frozenset({"--from"}),
    "picture": frozenset({"--below"}),
    "serve": frozenset({"--name"}),
    "titrate": frozenset({"--dilution"}),
    "what-if": frozenset({"--groups", "--shift", "--without", "--cancel", "--book"}),
}
"""The options that take several values, for each command that has one."""

WITH_VALUE = {"--store": "a path", "--as-at": "a date", "--by": "initials"}
"""Those of the four that a value follows, and what it is."""


@dataclass(frozen=True, slots=True)
class Shared:
    """What was given with the four, as typed; None where it was not."""

    store: str | None = None
    as_at: str | None = None
    by: str | None = None
    json: bool = False
    asked: list[str] = field(default_factory=list, repr=False, compare=False)
    """The initials asked for at the terminal, once for the whole command."""

    @property
    def path(self) -> StoreAt:
        """The store to open: the one given, else the usual one, else the practice college."""
        from stockroom.settings import store_to_open

        return store_to_open(self.store)

    @property
    def given_initials(self) -> str:
        """The initials given with --by, else STOCKROOM_BY; empty when neither says."""
        return self.by if self.by is not None else os.environ.get("STOCKROOM_BY", "")

    @property
    def initials(self) -> str:
        """Whose hand this is: the initials given, else asked once at a terminal.

        Empty when nobody says, which is for the use case to refuse.
        """
        given = self.given_initials
        if given.strip() or not at_a_terminal():
            return given
        if not self.asked:
            # on standard error: what is printed may be going into a file
            print("Whose initials? ", end="", file=sys.stderr, flush=True)
            self.asked.append(sys.stdin.readline().strip())
        return self.asked[0]

    @property
    def given_day(self) -> date | None:
        """The day given with --as-at. Raises: BadDate when it cannot be read."""
        return day_or_none(self.as_at, "--as-at")

    @property
    def today(self) -> date:
        """The day given, else the practice day of a practice store, else today."""
        from stockroom.service.database import day_for

        return day_for(self.path, self.given_day)


def at_a_terminal() -> bool:
    """Whether somebody sits there who can be asked: no script is ever kept waiting."""
    return all(stream is not None and stream.isatty() for stream in (sys.stdin, sys.stderr))


def of(ctx: typer.Context) -> Shared:
    """The shared options of the command line this command stood in."""
    found = ctx.find_root().obj
    return found if isinstance(found, Shared) else Shared()


def pull(
    words: Sequence[str], value_options: Mapping[str, frozenset[str]]
) -> tuple[Shared, list[str]]:
    """The shared options out of a command line, and the words that are left, in order.

    `value_options` names, for each command, the options that a value follows:
    in `--note --json` the note is "--json". Nothing after `--` is touched.
    Raises: BadInput when a value is missing or an option is given two values, but
    for the options in `SEVERAL`.
    """
    found: dict[str, str] = {}
    own: dict[str, str] = {}
    left: list[str] = []
    takes: frozenset[str] | None = None
    several: frozenset[str] = frozenset()
    rest = iter(words)
    for word in rest:
        if word == "--":
            return _shared(found), [*left, word, *rest]
        if word == "--json" or word.partition("=")[0] in WITH_VALUE:
            _keep(found, word, rest)
        elif word.partition("=")[0] in (takes or ()):
            given = [word] if "=" in word else [word, *_next(rest)]
            _once(own, given, several)
            left += given
        else:
            # the first word that is no option names the command
            if _names(word, takes):
                takes = value_options.get(word, frozenset())
                several = SEVERAL.get(word, frozenset())
            left.append(_shielded(word))
    return _shared(found), left


def _names(word: str, takes: frozenset[str] | None) -> bool:
    return takes is None and not word.startswith("-")


def _next(rest: Iterator[str]) -> list[str]:
    value = next(rest, None)
    return [] if value is None else [value]


def _once(own: dict[str, str], given: list[str], several: frozenset[str]) -> None:
    name, _, value = "=".join(given).partition("=")
    if name not in several:
        _one_value(own, name, value)


def _one_value(found: dict[str, str], name: str, value: str) -> None:
    if found.setdefault(name, value) != value:
        raise BadInput(f"{name} is given twice: {found[name]!r} and {value!r}.", "Give one.")


def _keep(found: dict[str, str], word: str, rest: Iterator[str]) -> None:
    name, equals, value = word.partition("=")
    if name == "--json":
        found[name] = "yes"
        return
    if not equals:
        value = next(rest, "")
    if not value or value.startswith("--"):
        after = f", not {value!r}" if value else ""
        raise BadInput(f"{name} wants {WITH_VALUE[name]} after it{after}.", "See stockroom --help.")
    _one_value(found, name, value)


def _shielded(word: str) -> str:
    # "-5 cm3" is an amount to be refused in words, not a row of unknown options
    return f" {word}" if re.match(r"-[\d.]", word) else word


def _shared(found: Mapping[str, str]) -> Shared:
    return Shared(found.get("--store"), found.get("--as-at"), found.get("--by"), "--json" in found)
