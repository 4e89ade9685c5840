"""What can hurt or spoil: hazards by strength, bars, neighbours, caps, cautions at their step.

May import chemistry, measure and the root's errors and findings. Pure. What it
says is a starting point: local rules, the supplier's safety data sheet and the
employer's risk assessment come first. Open `clp.py` first: how a strength becomes a
class, by `limits` and the rules of `mixture`, `acute`, `water_life` and `physical`, and
what it is marked with by `classes`, `statements`, `precautions` and `pictograms`, and how
well each limit is known by `grounds`.
`cautions.py` holds what is said beside the work, `group_cautions.py` what is said of a
whole storage group where the house wrote nothing; `neighbours`, `kinds`, `peroxide_formers`
what must stand apart, and what is left alone.
"""
