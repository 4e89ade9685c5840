"""Pages as values: what a template shows, worked out in the words of the sheets.

Pure, like every report: facts and plans in, frozen values of text out. A file carries the
name of its page; what several share is in `parts.py`.
"""

from __future__ import annotations
