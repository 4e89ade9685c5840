"""Files: the plan as other programs read it, and as plain text for a phone or a mailer.

Lives here: one file per format or text: frozen decisions in, bytes or text out.
May import: what `reports` may, and the library of its own format, inside the function that needs it.
Pure: the command writes the files.
"""
