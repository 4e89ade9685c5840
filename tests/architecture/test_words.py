"""The words people read are the trade's own, and no text points into somebody's machine."""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import Path

import pytest

REPOSITORY = Path(__file__).parents[2]
READ = frozenset(".py .md .txt .html .jinja .css .js .svg .toml .typ .mako .ini .sh".split())

# what we say instead -> whole words and phrases to avoid, in any case; * stands for any ending
AVOID = {
    "draw, lend, turned up": "check-out, check-in, checkout, checkouts, checkin, "
    "checked out, checked-out",
    "pencilled, firm, done, dropped": "requisition*, approver*, approval*, fulfil, fulfill*, "
    "fulfils, fulfilled, fulfilling, fulfilment*",
    "this week, before the day, term's buying": "dashboard*, kanban, wizard*, mascot*",
    "stock, shelf, what to order": "basket*, trolley*, catalogue*, catalog, catalogs, inventory, "
    "inventories, wishlist*, wish list, shopping cart",
    "set aside": "quarantine*",
    "falls below the line on DAY": "low stock, low-stock, running low, critically low, "
    "dangerously low, nearly out",
    "in use, gone": "archive, archives, archived, archiving, unarchive*, inactive, deactivate*",
    "a mark with its word": "traffic light*, traffic-light*, heat map*, heat-map*, heatmap*, "
    "ring chart*, pie chart*, donut*, doughnut*",
    "the store": "lims, eln, lab notebook*, laboratory notebook*, digital notebook*, "
    "electronic notebook*",
    "the plan, its reasons": "smart, assistant*, insight, insights",
}
# git's own words, which a note or a script for developers may need
ALLOWED = re.compile(r"git checkout|\"git\", \"archive\"")

# an absolute path into a home, a work folder or a drive; a placeholder in <> passes
MACHINE_PATH = re.compile(
    r"(?<![\w.~>/-])/(?:home|Users|root|work|opt|tmp|srv|mnt)/[\w.]"
    r"|(?<![A-Za-z])[A-Z]:\\\\?[A-Za-z]"
)


def _pattern(word: str) -> str:
    return re.escape(word).replace(r"\ ", r"\s+").replace(r"\*", "[a-z]*")


ALL = "|".join(_pattern(word) for words in AVOID.values() for word in words.split(", "))
# an underscore ends a word, so that names in the code are read too
WORDS = re.compile(f"(?<![a-z])(?:{ALL})(?![a-z])", re.IGNORECASE)


def texts(*places: Path) -> Iterator[tuple[Path, str]]:
    """Every file people or programmers read in these places, with its text."""
    for place in places:
        for path in sorted(place.rglob("*")) if place.is_dir() else [place]:
            if path.is_file() and path.suffix in READ:
                yield path, path.read_text(encoding="utf-8")


def found(pattern: re.Pattern[str], *places: Path) -> list[str]:
    """Each match as `file:line: words`, in order; `git checkout` is not looked at."""
    told = []
    for path, text in texts(*places):
        seen = ALLOWED.sub(lambda match: " " * len(match[0]), text)
        told += [
            f"{path.name}:{seen.count(chr(10), 0, match.start()) + 1}: {match[0]}"
            for match in pattern.finditer(seen)
        ]
    return told


def places(*names: str) -> list[Path]:
    """The named files and folders of the repository that are there (an sdist may lack some)."""
    return [REPOSITORY / name for name in names if (REPOSITORY / name).exists()]


SHOWN = ("stockroom", "docs", "README.md", "DEVELOPERS.md")


def test_there_is_something_to_read() -> None:
    assert len(list(texts(*places(*SHOWN)))) > 5


def test_only_words_of_the_trade_are_used() -> None:
    assert found(WORDS, *places(*SHOWN)) == []


def test_no_text_points_into_a_machine() -> None:
    assert found(MACHINE_PATH, *places(*SHOWN, "tests", "seeds_data")) == []


@pytest.mark.parametrize(
    "text",
    [
        "The Dashboard of the term",
        "def requisition_of(booking): ...",
        "low\nstock since Monday",
        "B12 was quarantined",
        "ARCHIVED = 3",
        "put it in the basket",
        "inventory_rows = []",
        "checked out by T1",
        "a supplier's catalogue",
    ],
)
def test_a_planted_word_is_caught(tmp_path: Path, text: str) -> None:
    (tmp_path / "bad.py").write_text(text, encoding="utf-8")
    assert len(found(WORDS, tmp_path)) == 1


@pytest.mark.parametrize(
    "text",
    [
        "git checkout main",
        "a check in the fume cupboard, set aside",
        "smarter than a card index",
        "limestone, elnora, Limspitze",
    ],
)
def test_a_word_of_the_trade_passes(tmp_path: Path, text: str) -> None:
    (tmp_path / "good.md").write_text(text, encoding="utf-8")
    assert found(WORDS, tmp_path) == []


# put together here, so that this file passes its own test
@pytest.mark.parametrize("parts", [("/ho", "me/ann/x"), ("/wo", "rk/x"), ("C:", "\\Users")])
def test_a_planted_machine_path_is_caught(tmp_path: Path, parts: tuple[str, str]) -> None:
    (tmp_path / "bad.md").write_text(f"see {''.join(parts)}", encoding="utf-8")
    assert len(found(MACHINE_PATH, tmp_path)) == 1


@pytest.mark.parametrize("text", ["kg/home/h", "https://example.org/home/x", "see ~/home/x"])
def test_a_path_of_no_machine_passes(tmp_path: Path, text: str) -> None:
    (tmp_path / "good.md").write_text(text, encoding="utf-8")
    assert found(MACHINE_PATH, tmp_path) == []
