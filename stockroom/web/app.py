"""The application: every page and every question of the API, behind one door."""

from __future__ import annotations

from fastapi import FastAPI
from fastapi.responses import RedirectResponse
from starlette.staticfiles import StaticFiles

from stockroom import __version__
from stockroom.web.door.entering import Sessions
from stockroom.web.house import House
from stockroom.web.pages import enter, week
from stockroom.web.refusals import listen_for
from stockroom.web.static_files import STATIC, faces

ROUTERS = (week.router, enter.router)
"""The pages, each with its file."""


def house_app(house: House) -> FastAPI:
    """The application for one house: what it keeps between requests never moves."""
    app = FastAPI(
        title="stockroom",
        version=__version__,
        openapi_url="/api/openapi.json",
        # both fetch their own scripts from elsewhere
        docs_url=None,
        redoc_url=None,
    )
    app.state.house = house
    app.add_middleware(Sessions, house=house)
    listen_for(app)
    for router in ROUTERS:
        app.include_router(router)
    app.include_router(faces)
    app.mount("/static", StaticFiles(directory=STATIC))

    @app.get("/", include_in_schema=False)
    def home() -> RedirectResponse:
        return RedirectResponse("/week", 303)

    return app
