"""Run the migrations on the connection handed over by `engine.migrate`, in its transaction."""

from __future__ import annotations

from alembic import context

context.configure(connection=context.config.attributes["connection"])
context.run_migrations()
