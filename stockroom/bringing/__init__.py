"""The old spreadsheet, as values: what its columns are, what each row says, what must be asked.

Pure: bytes and the house's own names in; rows accepted, asked about or refused out, each with
its reason. May import keeping, chemistry, measure and the root.
"""
