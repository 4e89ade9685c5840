"""The program's front: every command with its name, and every error's way out."""

from __future__ import annotations

import contextlib
import os
import sys
from collections.abc import Sequence
from functools import cache
from typing import Annotated, Any

import typer
import typer.core

from stockroom import __version__
from stockroom.cli.commands import COMMANDS, NAMES
from stockroom.cli.shared import ANYWHERE, WITH_VALUE, pull
from stockroom.errors import StockroomError


class _PlainFlags:
    """A command whose help shows a flag by its name alone: it takes no value to tell of."""

    def get_params(self, ctx: Any) -> list[Any]:
        # here and not at each flag, so that --help is shown in the same way
        params: list[Any] = super().get_params(ctx)  # type: ignore[misc]
        for param in params:
            if getattr(param, "is_flag", False):
                param.metavar = ""
        return params


class _Command(_PlainFlags, typer.core.TyperCommand):
    """One command."""


class _Commands(_PlainFlags, typer.core.TyperGroup):
    """All of them."""


def _print_version(asked: bool) -> None:
    if asked:
        print(f"stockroom {__version__}")
        raise typer.Exit


def _front(
    store: Annotated[
        str | None,
        typer.Option(metavar="PATH", help="The store; else STOCKROOM_STORE, else the usual one."),
    ] = None,
    as_at: Annotated[
        str | None, typer.Option("--as-at", metavar="DATE", help="The day to think of as today.")
    ] = None,
    by: Annotated[
        str | None, typer.Option(metavar="INITIALS", help="Who; else STOCKROOM_BY.")
    ] = None,
    json: Annotated[bool, typer.Option("--json", help="Print data for programs.")] = False,
    version: Annotated[
        bool,
        typer.Option("--version", callback=_print_version, is_eager=True, help="Print it, leave."),
    ] = False,
) -> None:
    """What to make, check and order for every booking of a teaching laboratory's term.

    The first four options may stand before or after the command.
    """
    # declared for the help and for completion; `pull` has taken their values already


@cache
def program(names: frozenset[str] = NAMES) -> Any:
    """The front with these of its commands, or with all: built once in a process."""
    app = typer.Typer(
        name="stockroom",
        cls=_Commands,
        pretty_exceptions_enable=False,
        context_settings={"help_option_names": ["-h", "--help"]},
        epilog="Try it: stockroom demo",
    )
    for heading, commands in COMMANDS.items():
        for name, command in commands.items():
            if name in names:
                app.command(name, cls=_Command, rich_help_panel=heading, epilog=ANYWHERE)(command)
    app.callback()(_front)
    return typer.main.get_command(app)


def _wanted(words: Sequence[str]) -> frozenset[str]:
    """The commands a command line can mean: all of them unless it plainly begins with one."""
    # what a command's options are costs more to find out than most commands take
    rest = iter(words)
    for word in rest:
        if word in WITH_VALUE:
            next(rest, None)
        elif word != "--json" and word.partition("=")[0] not in WITH_VALUE:
            return NAMES & set(words) if word in NAMES else NAMES
    return NAMES


def run(argv: list[str] | None = None) -> None:
    """Run one command line; always leaves by SystemExit.

    0 done; 1 understood and not done, or something is not ready; 2 what was
    typed cannot be read; 130 stopped at the keyboard. With STOCKROOM_DEBUG set,
    a fault of the program itself is let through with its traceback.
    """
    _widen_streams()
    try:
        code = _call(sys.argv[1:] if argv is None else argv)
        if sys.stdout is not None:  # it is None when a caller closed it
            sys.stdout.flush()
    except StockroomError as trouble:
        code = _complain(trouble.message, trouble.hint, trouble.exit_code)
    except typer.TyperException as trouble:
        code = _complain(trouble.format_message(), _help_for(trouble), trouble.exit_code)
    except (KeyboardInterrupt, typer.Abort):
        code = 130
    except OSError as trouble:
        code = _unwritten(trouble)
    except Exception as fault:
        code = _own_fault(fault)
    raise SystemExit(code)


def _call(words: Sequence[str]) -> int:
    command = program(_wanted(words))
    shared, left = pull(words, value_options(command))
    code = command.main(left or ["--help"], "stockroom", standalone_mode=False, obj=shared)
    return code if isinstance(code, int) else 0


def value_options(command: object) -> dict[str, frozenset[str]]:
    """For each command, its options that a value follows: {"draw": {"--for", "--on"}}."""
    return {
        name: frozenset(
            option
            for param in each.params
            if param.param_type_name == "option" and not getattr(param, "is_flag", False)
            for option in param.opts
        )
        for name, each in getattr(command, "commands", {}).items()
    }


def _complain(message: str, hint: str, code: int) -> int:
    for line in (message, hint):
        if line:
            print(line, file=sys.stderr)
    return code


def _help_for(trouble: typer.TyperException) -> str:
    path = getattr(getattr(trouble, "ctx", None), "command_path", "stockroom")
    return f"Try: {path} --help"


def _unwritten(trouble: OSError) -> int:
    """A reader that went away (`| head`) is no trouble; anything else is said in words."""
    # what is still in the buffer would fail again, loudly, when the interpreter leaves
    with contextlib.suppress(OSError, ValueError, AttributeError):
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
    if isinstance(trouble, BrokenPipeError):
        return 1
    where = f" ({trouble.filename})" if trouble.filename else ""
    return _complain(f"Could not read or write{where}: {trouble.strerror or trouble}.", "", 1)


def _own_fault(fault: Exception) -> int:
    if os.environ.get("STOCKROOM_DEBUG"):
        raise fault
    message = f"This is a fault in stockroom itself: {type(fault).__name__}: {fault}"
    return _complain(message, "Nothing more was done. STOCKROOM_DEBUG=1 shows where.", 1)


def _widen_streams() -> None:
    """A terminal without ³ or £ gets "?" in their place, and no error."""
    for stream in (sys.stdout, sys.stderr):
        with contextlib.suppress(AttributeError):
            stream.reconfigure(errors="replace")  # type: ignore[union-attr]
