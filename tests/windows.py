"""A window on a store of one's own: pages asked for and forms sent in, without a browser."""

from __future__ import annotations

import html
import re
import secrets
from dataclasses import dataclass, replace
from datetime import date
from typing import Any

from starlette.testclient import TestClient

from stockroom.web.app import house_app
from stockroom.web.door.session import cookie_name, form_token, read
from stockroom.web.house import House

FIRST_DAY = date(2027, 1, 4)
KEY = b"a key for tests only, 32 bytes.."


@dataclass(frozen=True)
class Answer:
    """A page as it came: its status, its HTML, and its words with the tags taken out."""

    status: int
    html: str
    at: str

    @property
    def text(self) -> str:
        """What a person reads, on one line."""
        shown = re.sub(r"(?s)<(script|style)\b.*?</\1>", " ", self.html)
        shown = html.unescape(re.sub(r"<[^>]+>", " ", shown))
        return " ".join(shown.replace("\u00a0", " ").split())

    def field(self, name: str) -> str:
        """What stands in the field of that name."""
        found = re.search(rf'<input[^>]*name="{name}"[^>]*value="([^"]*)"', self.html)
        assert found, f"no field {name} with a value"
        return html.unescape(found[1])


@dataclass
class Window:
    """`window.get("/week")`, `window.enter("draw", bottle="S13", amount="100 cm3")`."""

    house: House
    client: TestClient

    def get(self, path: str, **query: str) -> Answer:
        """A page, followed to where it leads."""
        came = self.client.get(path, params=query or None)
        return Answer(came.status_code, came.text, str(came.url))

    def post(self, path: str, **fields: str) -> Answer:
        """A form of ours sent to an address, followed to where it leads."""
        sent = {
            "form_token": self._token(),
            "once": secrets.token_urlsafe(9),
            "back": "/week",
        } | fields
        came = self.client.post(path, data=sent)
        return Answer(came.status_code, came.text, str(came.url))

    def _token(self) -> str:
        """What every form of this visit carries; that pages write it so, the tests of forms see."""
        cookie = self.client.cookies.get(cookie_name(self.house))
        session = read(self.house, cookie) if cookie else None
        if session is None:
            return self.get("/enter").field("form_token")
        return form_token(self.house, session)

    def enter(self, form: str, **fields: str) -> Answer:
        """One event, in the initials T1 where nobody else is said."""
        return self.post(f"/do/{form}", **({"by": "T1"} | fields))

    def api(self, path: str, **query: str) -> Any:
        """An answer of the API as data."""
        return self.client.get(path, params=query or None).json()

    def on(self, day: date) -> Window:
        """The same store looked at on another day."""
        return window_on(replace(self.house, given=day))


def window_on(house: House) -> Window:
    """A window on a house. Redirects are followed, and faults of the program are let through."""
    client = TestClient(house_app(house), base_url="http://127.0.0.1")
    return Window(house, client)
