"""What nobody sends by accident: every answer is a refusal in words, and never a fault."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from stockroom.web.door.session import cookie_name

if TYPE_CHECKING:
    from pathlib import Path

    from windows import Window

FORM = "application/x-www-form-urlencoded"


@pytest.mark.parametrize(
    "path",
    [
        "/static/../app.py",
        "/static/%2e%2e/app.py",
        "/static/..%2fapp.py",
        "/static/..%5capp.py",
        "/static//etc/passwd",
        "/static/%2fetc%2fpasswd",
        "/face/../static_files.ttf",
        "/face/..%2f..%2fapp.ttf",
        "/face/regular%00.ttf",
        "/face/light.ttf",
        "/do/..%2fweek",
        "/do/__class__",
    ],
)
def test_no_file_is_had_by_a_path_that_climbs(onlooker: Window, path: str) -> None:
    came = onlooker.client.get(path, follow_redirects=False)
    assert came.status_code in (307, 400, 404)
    assert "import annotations" not in came.text
    assert "root:" not in came.text


@pytest.mark.parametrize(
    "cookie", ["", "x", "=", "a.b.c", "\xff\xfe", ".eJw.x.y", "x" * 8000, '"quoted"; Path=/evil']
)
def test_a_cookie_of_anybodys_making_counts_as_none(onlooker: Window, cookie: str) -> None:
    onlooker.client.cookies.clear()
    headers = {"cookie": f"{cookie_name(onlooker.house)}={cookie}".encode("latin-1")}
    came = onlooker.client.get("/enter", headers=headers)  # type: ignore[arg-type]
    assert came.status_code == 200
    assert "set-cookie" in came.headers


@pytest.mark.parametrize(
    ("kind", "body"),
    [
        (FORM, b"\xff\xfe\xfa=\xff"),
        (FORM, b"form_token=%FF%FE&bottle=%ED%A0%80"),
        (FORM, b"&&&===&"),
        (FORM, b"form_token=a&form_token=b"),
        ("multipart/form-data", b"no boundary"),
        ("multipart/form-data; boundary=x", b"--x\r\nnonsense"),
        ('multipart/form-data; boundary="', b"--"),
        (
            "multipart/form-data; boundary=x; charset=none",
            b'--x\r\nContent-Disposition: form-data; name="form_token"\r\n\r\n\xff\r\n--x--',
        ),
        ("application/json", b"{}"),
        ("", b"form_token=x"),
    ],
)
def test_a_form_nobody_could_have_filled_in_is_refused(
    onlooker: Window, kind: str, body: bytes
) -> None:
    refused = onlooker.client.post("/do/draw", content=body, headers={"content-type": kind})
    assert refused.status_code in (400, 403)


TYPED = (
    "<script>alert(1)</script>",
    '"><img src=x onerror=alert(1)>',
    "{{ 7 * 7 }}{% raw %}",
    "'; DROP TABLE entry; --",
    "S13' OR '1'='1",
    "\u202etxet",
    "🧪" * 100,
    "S13\r\nSet-Cookie: a=b",
)


@pytest.mark.file
def test_what_is_typed_is_never_markup_a_template_or_a_question_to_the_store(
    window: Window, own: Path
) -> None:
    before = own.read_bytes()
    for value in TYPED:
        refused = window.enter("draw", bottle=value, amount="1 g")
        assert refused.status in (404, 409, 422), value
        assert "<script>alert" not in refused.html
        assert "<img src=x" not in refused.html
        assert "49" not in refused.field("bottle")
        assert own.read_bytes() == before, value
    assert "30 cm³ left" in window.enter("draw", bottle="S13", amount="100 cm3").text


@pytest.mark.parametrize("method", ["PUT", "DELETE", "PATCH", "TRACE", "PROPFIND"])
def test_a_method_nobody_asked_for_is_refused(onlooker: Window, method: str) -> None:
    assert onlooker.client.request(method, "/week").status_code == 405


def test_a_way_back_that_leads_elsewhere_is_no_link(onlooker: Window) -> None:
    for back in ("javascript:alert(1)", "https://elsewhere.example/", "//elsewhere.example"):
        page = onlooker.get("/do/draw", back=back).html
        assert f'href="{back}"' not in page


def test_no_answer_says_what_serves_it(onlooker: Window) -> None:
    headers = onlooker.client.get("/week").headers
    assert not {"server", "x-powered-by"} & set(headers)
