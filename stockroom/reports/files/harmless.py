"""Text cells made harmless: a program that opens a file must not run what somebody typed."""

from __future__ import annotations

RUNS = ("=", "+", "-", "@", "\t", "\r")
"""First characters by which programs take a text for a formula, or for what it is not."""

QUOTE = "'"


def harmless(text: str) -> str:
    """The text, with an apostrophe before it where a program might run it as a formula.

    Looked at is the first character after spaces; a tab or carriage return counts as one. A
    lone "-" is marked too: one rule, without exceptions to remember. A dash ("\u2013") starts no
    formula and stays. Numbers are no text: give them to the file as numbers, never through here.
    Source: the rule is common practice for CSV files; the apostrophe is our choice.
    """
    return f"{QUOTE}{text}" if text.lstrip(" ").startswith(RUNS) else text
