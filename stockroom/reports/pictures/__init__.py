"""Pictures: what fades, how full the days are, how a stock runs down; in black on white.

Lives here: one file per picture: frozen values worked out first, then drawn by matplotlib.
May import: what `reports` may, and matplotlib, inside the function that draws.
Pure: bytes of SVG or PNG out; the command writes the file.
"""
