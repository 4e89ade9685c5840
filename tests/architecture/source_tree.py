"""Reads a tree of Python files: what each module imports, and which outside names it uses.

Only the text is read (`ast`); nothing of the tree is run, so a module that would
fail, or load half the world, is judged all the same.
"""

from __future__ import annotations

import ast
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path

# names by which a module can be loaded without an import statement
LOADERS = frozenset({"__import__", "importlib.import_module", "importlib.__import__"})


@dataclass(frozen=True)
class Import:
    """One import: the dotted name as written in full, the line, and when it happens.

    `maybe_attribute` is true where the last part may be a module or a thing inside
    one (`from a import b`). `at_load` is false inside functions and type checks.
    """

    name: str
    line: int
    maybe_attribute: bool
    at_load: bool


@dataclass(frozen=True)
class Use:
    """One use of a name that comes from outside the module, written out in full."""

    name: str
    line: int
    called: bool


@dataclass(frozen=True)
class Module:
    """One file of the tree, under its dotted name."""

    name: str
    path: Path
    is_package: bool

    @cached_property
    def tree(self) -> ast.Module:
        """The parsed file. Raises SyntaxError where it is not Python."""
        return ast.parse(self.path.read_text(encoding="utf-8"), str(self.path))

    @cached_property
    def imports(self) -> tuple[Import, ...]:
        """Every import in the file, also in functions and under TYPE_CHECKING."""
        found = list(_walk_imports(self.tree, self, at_load=True))
        found += _loaded_by_name(self)
        return tuple(sorted(found, key=lambda each: (each.line, each.name)))

    @cached_property
    def uses(self) -> tuple[Use, ...]:
        """Every outside name read in the file, with aliases written out."""
        return tuple(_uses(self.tree, _aliases(self.tree)))

    @property
    def parent(self) -> str:
        """The package that relative imports start from."""
        return self.name if self.is_package else self.name.rpartition(".")[0]


def read_tree(package: Path) -> dict[str, Module]:
    """All modules of the package folder by dotted name, in order of name."""
    modules = (_module(package, path) for path in sorted(package.rglob("*.py")))
    return {module.name: module for module in modules}


def _module(package: Path, path: Path) -> Module:
    parts = path.relative_to(package.parent).with_suffix("").parts
    is_package = parts[-1] == "__init__"
    return Module(".".join(parts[:-1] if is_package else parts), path, is_package)


def _walk_imports(node: ast.AST, module: Module, *, at_load: bool) -> Iterator[Import]:
    if isinstance(node, ast.Import):
        for alias in node.names:
            yield Import(alias.name, node.lineno, False, at_load)
    elif isinstance(node, ast.ImportFrom):
        source = _absolute(node, module)
        for alias in node.names:
            name = source if alias.name == "*" else f"{source}.{alias.name}"
            yield Import(name, node.lineno, alias.name != "*", at_load)
    elif isinstance(node, ast.If) and "TYPE_CHECKING" in ast.dump(node.test):
        yield from _walk_all(node.body, module, at_load=False)
        yield from _walk_all(node.orelse, module, at_load=at_load)
    else:
        later = isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef | ast.Lambda)
        children = list(ast.iter_child_nodes(node))
        yield from _walk_all(children, module, at_load=at_load and not later)


def _walk_all(
    nodes: list[ast.stmt] | list[ast.AST], module: Module, *, at_load: bool
) -> Iterator[Import]:
    for node in nodes:
        yield from _walk_imports(node, module, at_load=at_load)


def _absolute(node: ast.ImportFrom, module: Module) -> str:
    if not node.level:
        return node.module or ""
    base = module.parent.split(".")
    # one dot is the package itself, each further dot one step up
    kept = base[: len(base) - node.level + 1]
    return ".".join([*kept, *([node.module] if node.module else [])])


def _loaded_by_name(module: Module) -> Iterator[Import]:
    # a name worked out at run time reads as "?", which no rule allows
    aliases = _aliases(module.tree)
    for node in ast.walk(module.tree):
        if isinstance(node, ast.Call) and _full_name(node.func, aliases) in LOADERS:
            first = node.args[0] if node.args else None
            text = first.value if isinstance(first, ast.Constant) else None
            yield Import(text if isinstance(text, str) else "?", node.lineno, False, False)


def _aliases(tree: ast.Module) -> dict[str, str]:
    """Local name -> full name, for everything brought in from outside the tree."""
    known: dict[str, str] = {}
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            for alias in node.names:
                top = alias.name.partition(".")[0]
                known[alias.asname or top] = alias.name if alias.asname else top
        elif isinstance(node, ast.ImportFrom) and node.module and not node.level:
            for alias in node.names:
                known[alias.asname or alias.name] = f"{node.module}.{alias.name}"
    return known


def _uses(tree: ast.Module, aliases: dict[str, str]) -> Iterator[Use]:
    called = {id(node.func) for node in ast.walk(tree) if isinstance(node, ast.Call)}
    for node in ast.walk(tree):
        if isinstance(node, ast.Name | ast.Attribute) and isinstance(node.ctx, ast.Load):
            name = _full_name(node, aliases)
            if name:
                yield Use(name, node.lineno, id(node) in called)


def _full_name(node: ast.expr, aliases: dict[str, str]) -> str:
    """`dt.datetime.now` with its aliases written out; empty for anything but dotted names."""
    if isinstance(node, ast.Name):
        return aliases.get(node.id, node.id)
    if isinstance(node, ast.Attribute):
        base = _full_name(node.value, aliases)
        return f"{base}.{node.attr}" if base else ""
    return ""
