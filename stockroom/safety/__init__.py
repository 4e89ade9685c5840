"""What can hurt or spoil: hazards by strength, bars, neighbours, caps, cautions at their step.

May import chemistry, measure and the root's errors and findings. Pure. What it
says is a starting point: local rules, the supplier's safety data sheet and the
employer's risk assessment come first. Open `clp.py` first: how a strength becomes a
class; `cautions.py` holds what is said beside the work.
"""
