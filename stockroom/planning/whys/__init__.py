"""Why a line of the plan is as it is, and why it is not another way, in five lines or fewer."""
