"""Guards: triggers that keep what was written as it was written, said once for every engine.

A guard refuses a change of a table, always or only where a condition holds. Its words
begin with KEPT (or NOTENOUGH), which `store/trouble.py` turns into our own errors.
A keeper writes in another table what follows from a row that was added.
"""

from __future__ import annotations

from dataclasses import dataclass

from alembic import op

_AT_ONCE = "_at_once"
"""What the name of the second trigger ends with that guards a table from being emptied."""


@dataclass(frozen=True, slots=True)
class Guard:
    """One trigger: before `action` on `table`, where `only` holds, refused with `words`.

    `only` is a condition in SQL that both engines read, over NEW and OLD; "" means always.
    `on_server` takes its place on PostgreSQL, where a keeper has written before it is asked.
    """

    name: str
    table: str
    action: str
    words: str
    only: str = ""
    on_server: str = ""

    @property
    def sqlite(self) -> str:
        """The trigger as SQLite has it."""
        when = f" WHEN {self.only}" if self.only else ""
        return (
            f"CREATE TRIGGER {self.name} BEFORE {self.action} ON {self.table}{when}"
            f" BEGIN SELECT RAISE(ABORT, '{self.words}'); END"
        )

    @property
    def postgresql(self) -> tuple[str, ...]:
        """The function and the trigger that calls it, as PostgreSQL has them."""
        back = "OLD" if self.action == "DELETE" else "NEW"
        refuse = f"RAISE EXCEPTION '{self.words}';"
        only = self.on_server or self.only
        body = f"IF {only} THEN {refuse} END IF;" if only else refuse
        made = _on_server(self.name, f"BEFORE {self.action} ON {self.table}", body, back)
        return (*made, *self._not_all_at_once()) if self.action == "DELETE" else made

    def _not_all_at_once(self) -> tuple[str, ...]:
        # TRUNCATE would empty the table without waking the trigger of any row
        when, name = f"BEFORE TRUNCATE ON {self.table}", f"{self.name}{_AT_ONCE}"
        return _on_server(name, when, f"RAISE EXCEPTION '{self.words}';", "NULL", "STATEMENT")


@dataclass(frozen=True, slots=True)
class Keeper:
    """One trigger that writes: with `action` on `table`, the one statement `does`.

    `does` is SQL that both engines read, over NEW and OLD. PostgreSQL asks the triggers of
    a row by name, so a guard that leans on a keeper has a name that comes after.
    """

    name: str
    table: str
    action: str
    does: str

    @property
    def sqlite(self) -> str:
        """The trigger as SQLite has it."""
        return (
            f"CREATE TRIGGER {self.name} AFTER {self.action} ON {self.table} BEGIN {self.does}; END"
        )

    @property
    def postgresql(self) -> tuple[str, ...]:
        """The function and the trigger that calls it, as PostgreSQL has them."""
        # BEFORE: what comes after waits there for the end of the statement, and of two rows
        # in one the second would be judged by a figure from before the first
        when = f"BEFORE {self.action} ON {self.table}"
        return _on_server(self.name, when, f"{self.does};", "NEW")


def _on_server(name: str, when: str, body: str, back: str, each: str = "ROW") -> tuple[str, ...]:
    return (
        f"CREATE FUNCTION {name}() RETURNS trigger LANGUAGE plpgsql AS"
        f" $guard$ BEGIN {body} RETURN {back}; END $guard$",
        f"CREATE TRIGGER {name} {when} FOR EACH {each} EXECUTE FUNCTION {name}()",
    )


def put_up(*guards: Guard | Keeper) -> None:
    """Make the triggers, in the words of the engine the migration runs on."""
    for guard in guards:
        for statement in guard.postgresql if _is_server() else (guard.sqlite,):
            op.execute(statement)


def take_down(name: str) -> None:
    """Remove a trigger, to make it anew with other words. Nothing when it is not there."""
    if _is_server():
        # the trigger goes with the function it calls
        op.execute(f"DROP FUNCTION IF EXISTS {name}() CASCADE")
        op.execute(f"DROP FUNCTION IF EXISTS {name}{_AT_ONCE}() CASCADE")
    else:
        op.execute(f"DROP TRIGGER IF EXISTS {name}")


def _is_server() -> bool:
    return bool(op.get_bind().dialect.name == "postgresql")


def kept(table: str, what: str, alike: str = "id = NEW.id") -> tuple[Guard, ...]:
    """The three guards of a table that is only ever added to.

    `alike` says which row that stands a new one would be written over.
    """
    return (
        Guard(f"{table}_no_update", table, "UPDATE", f"KEPT {what} is never altered."),
        Guard(f"{table}_no_delete", table, "DELETE", f"KEPT {what} is never removed."),
        # INSERT OR REPLACE would remove the old row without waking the DELETE trigger
        Guard(
            f"{table}_no_overwrite",
            table,
            "INSERT",
            f"KEPT {what} is never written over.",
            f"EXISTS (SELECT 1 FROM {table} WHERE {alike})",
        ),
    )
