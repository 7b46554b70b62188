"""Money, rounding, the documented conventions and the problems: what everything else is said in."""
