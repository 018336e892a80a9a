"""What the harvest may be: every lot drawn many times, weekly kilograms with their spread, the chance of each order."""

from scheduler.forecast.forecast import Forecast, OrderChance, WeekRange, forecast

__all__ = ["Forecast", "OrderChance", "WeekRange", "forecast"]
