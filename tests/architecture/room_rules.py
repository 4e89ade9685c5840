"""The rules of the house as tables, and the checks that hold a source tree to them.

Each check takes a tree (`source_tree.read_tree`) and returns what it found wrong,
one line of text each, in order of module and line. No findings: the rule holds.
"""

from __future__ import annotations

import ast
from collections.abc import Iterator
from graphlib import CycleError, TopologicalSorter
from pathlib import Path

from source_tree import Import, Module

HOUSE = "stockroom"
ROOT = "root"
ROOT_FILES = frozenset({"", "errors", "findings", "settings", "clock"})

# room -> the rooms it may import from; everybody may import from itself
MAY_IMPORT: dict[str, frozenset[str]] = {
    ROOT: frozenset(),
    "measure": frozenset({ROOT}),
    "chemistry": frozenset({"measure", ROOT}),
    "keeping": frozenset({"chemistry", "measure", ROOT}),
    "safety": frozenset({"chemistry", "measure", ROOT}),
    "lots": frozenset({ROOT}),
    "bringing": frozenset({"keeping", "chemistry", "measure", ROOT}),
    "planning": frozenset({"lots", "keeping", "safety", "chemistry", "measure", ROOT}),
    "store": frozenset({"planning", "keeping", "safety", "chemistry", "measure", ROOT}),
    "service": frozenset(
        {"store", "planning", "bringing", "keeping", "safety", "chemistry", "measure", ROOT}
    ),
    "reports": frozenset(
        {"lots", "planning", "bringing", "keeping", "safety", "chemistry", "measure", ROOT}
    ),
    "web": frozenset({"service", "reports", "measure", ROOT}),
    "cli": frozenset({"service", "reports", "measure", ROOT}),
}

# a module that may go where the rest of its room may not
ALSO_MAY_IMPORT: dict[str, frozenset[str]] = {"stockroom.cli.serve": frozenset({"web"})}

# of another room, only these modules: the store knows the planner's values and decides nothing
ONLY_MODULES: dict[tuple[str, str], frozenset[str]] = {
    ("store", "planning"): frozenset({"stockroom.planning.facts", "stockroom.planning.decisions"}),
}

PURE = frozenset(
    {"measure", "chemistry", "keeping", "safety", "lots", "planning", "bringing", "reports"}
)
PURE_SEE_OF_ROOT = frozenset({"stockroom.errors", "stockroom.findings"})

# library -> the only rooms that may import it
OUTSIDE: dict[str, frozenset[str]] = {
    "pint": frozenset({"measure"}),
    "dateutil": frozenset({"measure"}),
    "molmass": frozenset({"chemistry"}),
    "sqlmodel": frozenset({"store"}),
    "sqlalchemy": frozenset({"store"}),
    "alembic": frozenset({"store"}),
    "sqlite3": frozenset({"store"}),
    "scipy": frozenset({"chemistry", "keeping"}),
    "highspy": frozenset({"lots"}),
    "uncertainties": frozenset({"chemistry"}),
    "rapidfuzz": frozenset({"store", "service"}),
    "openpyxl": frozenset({"bringing", "reports"}),
    "charset_normalizer": frozenset({"bringing"}),
    "typst": frozenset({"reports"}),
    "segno": frozenset({"reports"}),
    "icalendar": frozenset({"reports"}),
    "matplotlib": frozenset({"reports"}),
    "psycopg": frozenset({"store"}),
    "platformdirs": frozenset({ROOT}),
    "fastapi": frozenset({"web"}),
    "starlette": frozenset({"web"}),
    "jinja2": frozenset({"web"}),
    "uvicorn": frozenset({"web"}),
    "itsdangerous": frozenset({"web"}),
    "argon2": frozenset({"web"}),
    "python_multipart": frozenset({"web"}),
    "typer": frozenset({"cli"}),
}

# what reaches a clock, a file, a process, the network or chance; datetime is allowed for its
# values (CLOCK catches the rest), io for text and bytes kept in memory
NOT_PURE = frozenset(
    "asyncio glob http importlib logging multiprocessing os pathlib pickle platform random "
    "secrets shutil signal socket sqlite3 ssl subprocess sys tempfile threading time urllib "
    "uuid webbrowser".split()
)
# a module that may open what is shipped with the code and never changes: templates, fonts, symbols
READS_ITS_OWN: dict[str, frozenset[str]] = {
    "stockroom.reports.shipped": frozenset({"importlib", "pathlib"})
}
NOT_PURE_CALLS = frozenset({"print", "open", "io.open", "input", "breakpoint", "exec", "eval"})

CLOCK = frozenset(
    "datetime.date.today datetime.datetime.now datetime.datetime.today datetime.datetime.utcnow "
    "time.time time.time_ns time.localtime time.gmtime".split()
)
CLOCK_READER = "stockroom.clock"

TOP_LEVEL = frozenset(
    {"README.md", "DEVELOPERS.md", "pyproject.toml", "stockroom", "tests", "seeds_data", "docs"}
)
# left behind by building or unpacking, and never committed
GENERATED = frozenset({"build", "dist", "__pycache__", "PKG-INFO", "stockroom.egg-info"})


def room_of(name: str) -> str:
    """The room a dotted name of ours belongs to; the files at the top are the root."""
    first = name.split(".")[1] if "." in name else ""
    return ROOT if first in ROOT_FILES else first


def wrong_rooms(tree: dict[str, Module]) -> list[str]:
    """Modules in rooms the table does not know, and imports that cross it."""
    unknown = [
        f"{name}: no room of that name in the table" for name in tree if not _known(room_of(name))
    ]
    return unknown + [
        _line(module, each, target)
        for module, each, target in _ours(tree)
        if not _allowed(module.name, target)
    ]


def _known(room: str) -> bool:
    return room in MAY_IMPORT


def _allowed(name: str, target: str) -> bool:
    room, other = room_of(name), room_of(target)
    if room == other:
        return True
    if room in PURE and other == ROOT:
        return target in PURE_SEE_OF_ROOT
    only = ONLY_MODULES.get((room, other))
    if only is not None:
        return target in only
    return other in MAY_IMPORT.get(room, frozenset()) | ALSO_MAY_IMPORT.get(name, frozenset())


def wrong_libraries(tree: dict[str, Module]) -> list[str]:
    """Outside libraries imported in a room that is not theirs, and imports nobody can read."""
    return [
        _line(module, each, each.name)
        for module in tree.values()
        for each in module.imports
        if each.name == "?" or room_of(module.name) not in _rooms_for(each.name)
    ]


def _rooms_for(name: str) -> frozenset[str]:
    return OUTSIDE.get(name.partition(".")[0], frozenset(MAY_IMPORT) | {HOUSE})


def impure(tree: dict[str, Module]) -> list[str]:
    """Pure rooms that import or call what reaches beyond their arguments."""
    found: list[str] = []
    for module in tree.values():
        if room_of(module.name) in PURE:
            found += [
                _line(module, each, each.name)
                for each in module.imports
                if each.name.partition(".")[0] in NOT_PURE - _own(module.name)
            ]
            found += [
                f"{module.name}:{use.line} calls {use.name}"
                for use in module.uses
                if use.called and use.name in NOT_PURE_CALLS
            ]
    return found


def _own(name: str) -> frozenset[str]:
    return READS_ITS_OWN.get(name, frozenset())


def clock_readers(tree: dict[str, Module]) -> list[str]:
    """Places outside clock.py that read the clock, or hand on a function that does."""
    return [
        f"{module.name}:{use.line} reads the clock: {use.name}"
        for module in tree.values()
        for use in module.uses
        if use.name in CLOCK and module.name != CLOCK_READER
    ]


def load_cycles(tree: dict[str, Module]) -> list[str]:
    """The first circle of imports made while loading, written as a chain; or nothing.

    Only the module that is named counts: its package's door sign is not part of the chain.
    """
    graph: dict[str, set[str]] = {name: set() for name in tree}
    for module, each, target in _ours(tree):
        if each.at_load and target != module.name:
            graph[module.name].add(target)
    try:
        TopologicalSorter({name: sorted(graph[name]) for name in sorted(graph)}).prepare()
    except CycleError as circle:
        return [" <- ".join(circle.args[1])]
    return []


def unsigned_doors(tree: dict[str, Module]) -> list[str]:
    """Packages without an `__init__.py`, and those whose `__init__.py` opens without words."""
    # alembic loads each step by its path, so its folder is no package
    folders = {each.path.parent for each in tree.values() if ".versions." not in each.name}
    signed = {
        module.path.parent
        for module in tree.values()
        if module.is_package and (ast.get_docstring(module.tree) or "").strip()
    }
    return [
        f"{folder.name}/__init__.py: no words on the door" for folder in sorted(folders - signed)
    ]


def strangers(repository: Path) -> list[str]:
    """Names at the top of the repository that do not belong there; dotfiles may stay."""
    names = sorted(path.name for path in repository.iterdir())
    return [name for name in names if name not in TOP_LEVEL | GENERATED and name[0] != "."]


def _ours(tree: dict[str, Module]) -> Iterator[tuple[Module, Import, str]]:
    """Each import of one of our own modules, with the module it really names."""
    for module in tree.values():
        for each in module.imports:
            if each.name.partition(".")[0] == HOUSE:
                yield module, each, _target(each, tree)


def _target(each: Import, tree: dict[str, Module]) -> str:
    """`from stockroom.measure import amounts` names a module, `... import Amount` its package."""
    inside = each.maybe_attribute and each.name not in tree
    # a folder not written yet, as in `from stockroom import web`, is still the room it names
    if inside and not _is_room(each.name):
        return each.name.rpartition(".")[0]
    return each.name


def _is_room(name: str) -> bool:
    return name.count(".") == 1 and name.split(".")[1] in MAY_IMPORT


def _line(module: Module, each: Import, what: str) -> str:
    return f"{module.name}:{each.line} imports {what}"
