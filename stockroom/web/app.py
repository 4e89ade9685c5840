"""The application: every page and every question of the API, behind one door."""

from __future__ import annotations

from collections.abc import AsyncIterator
from contextlib import asynccontextmanager

from fastapi import FastAPI
from fastapi.responses import RedirectResponse
from starlette.staticfiles import StaticFiles

from stockroom import __version__
from stockroom.service.kept import answers_kept
from stockroom.web.api import doing, planning, sheets, standing
from stockroom.web.door.guards import guard
from stockroom.web.held_files import sweep_lists
from stockroom.web.house import House
from stockroom.web.pages import (
    bottle,
    bring_in,
    buying,
    changed,
    come_in,
    day,
    enter,
    line,
    names,
    paper,
    picture,
    recipe,
    rules,
    shelf,
    term,
    use,
    week,
    what_if,
    why,
)
from stockroom.web.refusals import listen_for
from stockroom.web.static_files import STATIC, faces

ROUTERS = (
    come_in.router,
    week.router,
    term.router,
    enter.router,
    line.router,
    names.router,
    recipe.router,
    rules.router,
    bring_in.router,
    buying.router,
    shelf.router,
    bottle.router,
    picture.router,
    day.router,
    why.router,
    paper.router,
    use.router,
    what_if.router,
    changed.router,
    planning.router,
    standing.router,
    sheets.router,
    doing.router,
)
"""The pages, then the questions and events of the API, each with its file."""


@asynccontextmanager
async def _serving(app: FastAPI) -> AsyncIterator[None]:
    """What was worked out is kept for the next who asks, as long as the server runs."""
    sweep_lists()
    with answers_kept():
        yield
    sweep_lists()


def house_app(house: House) -> FastAPI:
    """The application for one house: what it keeps between requests never moves."""
    app = FastAPI(
        title="stockroom",
        version=__version__,
        openapi_url="/api/openapi.json",
        # both fetch their own scripts from elsewhere
        docs_url=None,
        redoc_url=None,
        lifespan=_serving,
    )
    app.state.house = house
    guard(app, house)
    listen_for(app)
    for router in ROUTERS:
        app.include_router(router)
    app.include_router(faces)
    app.mount("/static", StaticFiles(directory=STATIC))

    @app.get("/", include_in_schema=False)
    def home() -> RedirectResponse:
        return RedirectResponse("/week", 303)

    return app
