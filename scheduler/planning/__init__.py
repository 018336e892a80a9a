"""The weekly plan: a run network with stocks and flows, solved for money with a proven gap."""

from scheduler.planning.solve import SolveLimits, plan_weeks

__all__ = ["SolveLimits", "plan_weeks"]
