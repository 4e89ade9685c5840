"""The planner: frozen facts in, decisions with their reasons out.

May import keeping, safety, chemistry, measure and the root's errors and
findings; knows nothing of the store. Open `plan.py` first: it names the steps
in order (explode, net, batch, buy, tell) and each has a file of its own.
"""
