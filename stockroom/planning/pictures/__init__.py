"""Day-by-day figures that pictures are drawn from, worked out as the plan works them out."""
