"""What is refused, as a page or as a problem in JSON (RFC 9457), with the status that fits."""

from __future__ import annotations

from http import HTTPStatus
from typing import Any

from fastapi import FastAPI, Request
from fastapi.exceptions import RequestValidationError
from fastapi.responses import JSONResponse
from starlette.exceptions import HTTPException
from starlette.responses import Response

from stockroom.errors import BadInput, BrokenPlan, StockroomError, StoreTrouble, UnknownName

# the first that fits decides
_STATUS: tuple[tuple[type[StockroomError], int], ...] = (
    (UnknownName, 404),
    (BadInput, 422),
    (StoreTrouble, 503),
    (BrokenPlan, 500),
)


def status_of(error: StockroomError) -> int:
    """422 for what cannot be read, 404 for a name not known, 409 for what is refused."""
    return next((status for kind, status in _STATUS if isinstance(error, kind)), 409)


def problem(status: int, message: str, hint: str = "", **more: Any) -> JSONResponse:
    """One refusal as JSON: `title`, `status`, `detail`, and `hint`, what to do next."""
    title = HTTPStatus(status).phrase
    said = {"title": title, "status": status, "detail": message, "hint": hint} | more
    return JSONResponse(said, status, media_type="application/problem+json")


def listen_for(app: FastAPI) -> None:
    """Answer every refusal in the words of the house, and never with a traceback."""

    @app.exception_handler(StockroomError)
    def refused(request: Request, error: StockroomError) -> Response:
        return answer(request, status_of(error), error.message, error.hint, inside=True)

    @app.exception_handler(HTTPException)
    def turned_away(request: Request, error: HTTPException) -> Response:
        if error.status_code == 303 and error.headers:
            return Response(status_code=303, headers=error.headers)
        detail, headers = str(error.detail), error.headers
        return answer(request, error.status_code, detail, headers=headers, inside=True)

    @app.exception_handler(RequestValidationError)
    def unreadable(request: Request, error: RequestValidationError) -> Response:
        first = error.errors()[0]
        where = ".".join(str(part) for part in first["loc"][1:])
        return answer(request, 422, f"{where}: {first['msg']}.", inside=True)


def answer(
    request: Request,
    status: int,
    message: str,
    hint: str = "",
    headers: Any = None,
    *,
    inside: bool = False,
) -> Response:
    """One refusal as whoever asked can read it: a page, or a problem in JSON under /api/.

    `inside` says that the request came as far as the pages: then the top of a page is shown too.
    """
    if request.url.path.startswith("/api/"):
        # loaded here: the forms are a part of the pages, and these words of neither
        from stockroom.web.hints import for_programs

        refused: Response = problem(status, message, for_programs(hint))
    else:
        from stockroom.web.showing import refusal_page

        refused = refusal_page(request, status, message, hint, inside=inside)
    refused.headers.update(headers or {})
    return refused
