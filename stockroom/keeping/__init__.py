"""How things age: rules, decay laws, and the verdict on one bottle on one day.

May import chemistry, measure and the root's errors and findings. Pure: "today"
always comes in as an argument. Open `verdict.py` first; `record.py` says what is
known of a bottle, `rules.py` what the house says of its kind, `laws.py` how
strength falls.
"""
