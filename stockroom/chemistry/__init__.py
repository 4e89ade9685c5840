"""`chemistry`: molar masses, strengths turned into one another, making up, and how good it is.

Plain numbers in g, cm³ and mol/dm³ in and out; rounding to what a person can
measure is left to whoever prints. Pure. May import `measure` and the root
(`errors`, `findings`). Open `strength.py` first, where every unit meets; what it looks
up is in `normality`, `peroxide`, `solubility` and `densities/`.
Making up: `making`, `mixing`, `ethanol`; too little to weigh: `weighing`, then `steps`,
whose search is `ways`. How good it is: `uncertainty`, with the doubts of each piece in
`glassware` and `made`. Titres to a strength: `reactions`, then `titration`.
"""
