"""The planner: frozen facts in, decisions with their reasons out.

May import lots, keeping, safety, chemistry, measure and the root's errors and findings;
knows nothing of the store. Open `plan.py` first: it names the steps in order (explode,
net, batch, buy, tell). Folders: `choosing/` which bottle serves whom, `making/` batches
and their cards, `buying/`, `checking/`, `replaying/` the check of a finished plan,
`changing/` a plan kept against the plan now, `whys/` the reasons asked for. Beside the
plan: `cautious.py` turns the facts to the safe side, `learn.py` and `spare.py` tell what
checks and classes have taught, `proof.py` how near the best the makes are.
"""
