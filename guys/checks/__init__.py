"""From equilibria to findings: factors against the allowables, what is alarming, and two self-checks made apart from the solver."""
