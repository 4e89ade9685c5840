"""The local pages: the same store in a browser on this machine, or, shared, in the room."""

from __future__ import annotations

from typing import Annotated

import typer

from stockroom.cli.printing import tell
from stockroom.cli.shared import of
from stockroom.service.typed import whole

PORT = 8765
"""Our choice: free on most machines, and easily typed."""


def serve(
    ctx: typer.Context,
    port: Annotated[str, typer.Option(metavar="NUMBER", help="The port to listen at.")] = str(PORT),
) -> None:
    """Open the store as pages in the browser of this machine, until Ctrl-C.

    Example: stockroom serve
    """
    from stockroom.web.serving import serve_house

    shared = of(ctx)
    serve_house(shared.path, given=shared.given_day, port=whole(port, "--port"), say=tell)
