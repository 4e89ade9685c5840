"""How things age: rules, decay laws, and the verdict on one bottle on one day.

May import chemistry, measure and the root's errors and findings. Pure: "today"
always comes in as an argument. Open `verdict.py` first; `record.py` says what is
known of a bottle, `rules.py` what the house says of its kind, `strength.py` how strong
it is by then.
Laws: `laws`, `hypochlorite`, `typed_law`; warmth: `arrhenius`, `temperatures` (what a
logger wrote; its file is read by `logger_file`), `warming`. What checks teach: `series`,
`fits`, `pooling`, `learnt`; and a plan on the safe side: `safe_side`, `caution`.
"""
