"""Reports: decisions turned to words, tables and JSON.

Lives here: one file per thing people read (`plan_text`, `makes_text`,
`past_text`, `usage_text`, `buying_text`, `ready_text`, `diary_text`), `json_plan` for the
same answers as data, `words` for days, amounts and marks, `sheet` for the
headings, wrapping and foot they all share.
May import: planning, keeping, safety, chemistry, measure, errors, findings.
Pure: values in, text or dictionaries out; the width is an argument.
Open first: `plan_text.py`.
"""
