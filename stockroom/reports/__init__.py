"""Reports: decisions turned to words, tables and JSON.

Lives here: one file per thing people read, `SUBJECT_text.py` (`plan_text`, `makes_text`,
`past_text`, `ready_text`, `bench_text`, `fades_text`, `hazards_text`, `learn_text`...),
each with the same answer as data where it is not in `json_plan`; `words` for days,
amounts and marks, `sheet` for the headings, wrapping and foot they all share.
May import: planning, keeping, safety, chemistry, measure, errors, findings.
Pure: values in, text or dictionaries out; the width is an argument.
Open first: `plan_text.py`.
"""
