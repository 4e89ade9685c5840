"""Tables as CSV: read back by the library's own reader, byte by byte where RFC 4180 is strict."""

from __future__ import annotations

import csv
import io
from datetime import date
from typing import TYPE_CHECKING

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.reports.files.csv_out import (
    BUYING,
    PAST,
    USAGE,
    buying_csv,
    csv_bytes,
    past_csv,
    usage_csv,
)
from stockroom.reports.files.harmless import harmless

if TYPE_CHECKING:
    from stockroom.planning.decisions import Plan


def _read(content: bytes) -> list[list[str]]:
    return list(csv.reader(io.StringIO(content.decode("utf-8"), newline="")))


@pytest.mark.parametrize(
    "text", ["=1+1", "+44", "-5", "@SUM", "\t=1", "\r=1", "  =1", "-", "=" * 99]
)
def test_what_a_program_might_run_is_made_harmless(text: str) -> None:
    assert harmless(text) == f"'{text}'"[:-1]


@pytest.mark.parametrize("text", ["", "a=b", "–", "3-methylbutan-1-ol", "'=1", "£5", "2027-01-04"])
def test_what_no_program_runs_is_left_alone(text: str) -> None:
    assert harmless(text) == text


@given(st.text(alphabet=" =+-@\t\r\n,\"'aé³", max_size=12))
@settings(max_examples=60)
def test_any_text_comes_back_from_a_table_and_never_begins_a_formula(text: str) -> None:
    content = csv_bytes(("one", "two"), [(text, "end")])
    assert _read(content)[1] == [harmless(text), "end"]
    assert not _read(content)[1][0].lstrip(" ").startswith(("=", "+", "-", "@", "\t", "\r"))


def test_numbers_days_and_nothing_are_written_as_themselves() -> None:
    content = csv_bytes(("a", "b", "c", "d"), [(-5, 0.25, date(2027, 1, 4), None)])
    assert content == b"a,b,c,d\r\n-5,0.25,2027-01-04,\r\n"


def test_quotes_commas_and_lines_follow_the_standard() -> None:
    assert (
        csv_bytes(("a",), [('say "no", twice\nor so',)]) == b'a\r\n"say ""no"", twice\nor so"\r\n'
    )


def test_a_mark_stands_before_it_only_when_asked_for() -> None:
    plain, marked = csv_bytes(("³",), []), csv_bytes(("³",), [], bom=True)
    assert (plain, marked) == ("³\r\n".encode(), b"\xef\xbb\xbf" + plain)


def test_the_terms_orders_are_a_row_each_order_by_first_and_the_reason_last(term: Plan) -> None:
    head, *rows = _read(buying_csv(term))
    assert tuple(head) == BUYING
    assert (head[0], head[-1], len(rows)) == ("order_by", "why", len(term.orders))
    first = dict(zip(head, rows[0], strict=True))
    assert (first["order_by"], first["late_open_days"], first["item"]) == (
        "2026-12-11", "6", "lithium chloride",
    )  # fmt: skip
    assert (first["need_by"], first["cost"], first["pack"]) == ("2027-01-12", "14.50", "100 g")
    assert "B28 not found" in first["why"]
    assert sum(round(100 * float(row[6])) for row in rows) == sum(o.pence for o in term.orders)


def test_shares_in_the_table_add_up_to_each_cost_to_the_penny(term: Plan) -> None:
    head, *rows = _read(buying_csv(term))
    for row in rows:
        told = dict(zip(head, row, strict=True))
        shares = [float(each.split()[-1]) for each in told["departments"].split(", ")]
        assert f"{sum(shares):.2f}" == told["cost"]


def test_usage_and_past_are_tables_too(term: Plan) -> None:
    head, *rows = _read(usage_csv(term))
    assert tuple(head) == USAGE
    iodide = next(row for row in rows if row[:2] == ["bought", "potassium iodide"])
    assert float(iodide[3]) == pytest.approx(84.46, abs=0.01)
    assert (iodide[4], float(iodide[6])) == ("g", 61)
    head, *rows = _read(past_csv(term))
    assert tuple(head) == PAST
    assert ["B28", "lithium chloride", "not found"] in [row[:3] for row in rows]
    assert not any("\u00a0" in cell for row in rows for cell in row)
