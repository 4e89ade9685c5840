"""The planner: frozen facts in, decisions with their reasons out.

May import keeping, safety, chemistry, measure and the root's errors and
findings; knows nothing of the store. Open `plan.py` first: it names the steps
in order (explode, net, batch, buy, tell) and each has a file of its own.
Beside the plan: `cautious.py` turns the facts to the safe side, `learn.py` tells what
checks have taught of a line. `make_card.py` has the cautions and reasons of a make:
`measuring.py` what its liquids are measured with, `how_good.py` how well it will be known.
`causes.py` holds a plan that was kept against the plan now; `what_if.py` supposes a change.
"""
