"""Paper: the sheets people pin up, carry and stick on bottles, as values and as text.

Lives here: one file per sheet (`strip`, `week`, `day`...): frozen values, how they come from a
plan, their text, and at its end one `Kind` that ties them to the template of the same name in
`reports/templates/`. Beside them `head` (top, foot, what changed since the last copy), `data`
(values as JSON holds them) and `kinds`. `reports/typesetting.py` makes paper of them.
May import: what `reports` may.
Pure: values in, values and text out; the command writes the files.
Open first: `strip.py`, the shortest.
"""
