"""Batches as numbers: how many, how big and on which day, at the least cost.

Knows no bottles, recipes or calendars: days are whole numbers, volumes cm³, work minutes.
`model.py` has what is asked and what is answered, `objective.py` what counts and how much;
`arrange.py` is the file to open first.
Imports nothing of ours but the root's errors; `exact.py` alone needs the optional solver.
"""
