"""What can hurt or spoil: bars, swaps, neighbours, caps, cautions at their step.

May import chemistry, measure and the root's errors and findings. Pure. What it
says is a starting point: local rules, the supplier's safety data sheet and the
employer's risk assessment come first. Open `cautions.py` first.
"""
