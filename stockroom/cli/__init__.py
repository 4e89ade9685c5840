"""The command line: words to values, one service call, one report.

Lives here: `main` (the list of commands, and every error's way out), `shared`
(the options that may stand anywhere), `printing` (both streams), `values` (words to
values), and one file of commands per subject: `plan`, `stock`, `checks`, `diary`,
`bookings`, `database`; `fades`, `learn`, `logger`, `hazards`, `house_rules`; the bench
sums `bench_strength`, `bench_weigh`, `bench_dilute`, `titrate`. May import: service,
reports, measure, errors, settings, clock.
Each command imports its service and its report when it runs, so that `--help`
and the reading commands start at once.
Open first: `main.py`.
"""
