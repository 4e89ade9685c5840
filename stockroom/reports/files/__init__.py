"""Files: the plan as other programs read it, and as plain text for a phone or a mailer.

Lives here: one file per format or text: frozen decisions in, bytes or text out.
May import: what `reports` may, and the library of its format, where it is used.
Pure: the command writes the files.
"""
