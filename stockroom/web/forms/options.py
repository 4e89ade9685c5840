"""The options of a command as the fields of its form, for reading a hint into a page's words."""

from __future__ import annotations

from stockroom.web.forms.field import Field, Form

_FIELDS = {
    "--for": "booking",
    "--into": "size",
    "--is": "line",
    "--dept": "department",
    "--at": "time",
    "--keep-closed": "keep",
    "--good": "passed",
    "--bad": "passed",
    "--passed": "passed",
    "--failed": "passed",
    "--put-off": "order",
    "--cancel": "order",
    "--number": "number",
}
_IN_ONE = {
    ("make", "--from"): "sources",
    ("lend-back", "--from"): "whom",
    ("spill", "--why"): "note",
}


def field_of(form: Form, option: str) -> Field | None:
    """The field that stands for an option, "--why"; None where the form has none."""
    if (form.name, option) in _IN_ONE:
        return form.field(_IN_ONE[form.name, option])
    plain = option.removeprefix("--").replace("-", "_")
    return form.field(_FIELDS.get(option, plain)) or form.field(plain)
