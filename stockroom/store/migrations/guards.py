"""Guards: triggers that keep what was written as it was written, said once for every engine.

A guard refuses a change of a table, always or only where a condition holds. Its words
begin with KEPT (or NOTENOUGH), which `store/trouble.py` turns into our own errors.
"""

from __future__ import annotations

from dataclasses import dataclass

from alembic import op


@dataclass(frozen=True, slots=True)
class Guard:
    """One trigger: before `action` on `table`, where `only` holds, refused with `words`.

    `only` is a condition in SQL that both engines read, over NEW and OLD; "" means always.
    """

    name: str
    table: str
    action: str
    words: str
    only: str = ""

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
        body = f"IF {self.only} THEN {refuse} END IF;" if self.only else refuse
        return (
            f"CREATE FUNCTION {self.name}() RETURNS trigger LANGUAGE plpgsql AS"
            f" $guard$ BEGIN {body} RETURN {back}; END $guard$",
            f"CREATE TRIGGER {self.name} BEFORE {self.action} ON {self.table}"
            f" FOR EACH ROW EXECUTE FUNCTION {self.name}()",
        )


def put_up(*guards: Guard) -> None:
    """Make the triggers, in the words of the engine the migration runs on."""
    on_server = op.get_bind().dialect.name == "postgresql"
    for guard in guards:
        for statement in guard.postgresql if on_server else (guard.sqlite,):
            op.execute(statement)


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
