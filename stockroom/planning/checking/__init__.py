"""The titrations and looks the plan leans on, and what a look is worth."""
