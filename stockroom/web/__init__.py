"""The local pages and the API: the same house through a window.

A page is words to values, one call into `service/`, one value from `reports/` into a template;
the JSON API gives what `--json` gives. May import service, reports, measure and the root files;
FastAPI, Jinja, uvicorn and the rest of the pages' libraries live here only. `house.py` is the
store that is served, `door/` who may come in, `visit.py` one request, `forms/` what can be
entered, `pages/` and `api/` what can be asked. Open `app.py` first.
"""

from __future__ import annotations
