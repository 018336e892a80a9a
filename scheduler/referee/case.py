"""The plan under examination, with the little arithmetic that all checks share."""

from __future__ import annotations

from datetime import date, datetime, timedelta
from functools import cached_property
from zoneinfo import ZoneInfo

from models.calendar import Week
from models.farm import Crew, Farm, Order, Room, StockLot, Strain
from models.growth.flush import flush_days
from models.plan import Lot, Plan, Run
from scheduler.referee.verdict import Verdict, Violation

TOLERANCE = 1e-6
SMALL = 0.005


class Case:
    """A plan, what it was made for, and the violations found so far."""

    def __init__(self, farm: Farm, orders: tuple[Order, ...], stock: tuple[StockLot, ...], plan: Plan) -> None:
        self.farm = farm
        self.orders = orders
        self.stock = stock
        self.plan = plan
        self.zone = ZoneInfo(farm.site.timezone)
        self.first = plan.first_week.monday
        self.days = 7 * (plan.weeks + plan.look_ahead_weeks)
        self.last = self.first + timedelta(days=self.days - 1)
        self._checked = 0
        self._violations: list[Violation] = []
        self._shifts: dict[tuple[date, str], tuple[tuple[Crew, int, int], ...]] = {}

    # --- saying -----------------------------------------------------------------------------------------------------

    def expect(self, rule: str, where: str, ok: bool, found: object, limit: object, unit: str = "") -> None:
        """Count a comparison, and note a violation where it fails."""
        self._checked += 1
        if not ok:
            self._violations.append(Violation(rule, where, str(found), str(limit), unit))

    def at_most(self, rule: str, where: str, found: float, limit: float, unit: str = "", slack: float = SMALL) -> None:
        """Expect a number not above a limit."""
        ok = found <= limit + max(slack, TOLERANCE * abs(limit))
        self.expect(rule, where, ok, f"{found:g}", f"at most {limit:g}", unit)

    def equal(self, rule: str, where: str, found: float, right: float, unit: str = "", slack: float = SMALL) -> None:
        """Expect two numbers to agree."""
        ok = abs(found - right) <= max(slack, TOLERANCE * abs(right))
        self.expect(rule, where, ok, f"{found:g}", f"{right:g}", unit)

    def fail(self, rule: str, where: str, found: str, limit: str) -> None:
        """Note a violation outright."""
        self.expect(rule, where, ok=False, found=found, limit=limit)

    def verdict(self) -> Verdict:
        """The outcome so far."""
        return Verdict(self._checked, tuple(self._violations))

    # --- time -------------------------------------------------------------------------------------------------------

    @cached_property
    def _zero(self) -> float:
        return datetime(self.first.year, self.first.month, self.first.day, tzinfo=self.zone).timestamp()

    def local(self, minute: float) -> datetime:
        """Local time of a moment."""
        return datetime.fromtimestamp(self._zero + 60 * minute, tz=self.zone)

    def moment(self, day: date, minutes: int) -> int:
        """Moment of a clock time, as minutes after midnight, on a day [min]."""
        day += timedelta(days=minutes // 1440)
        clock = datetime(day.year, day.month, day.day, minutes % 1440 // 60, minutes % 60, tzinfo=self.zone)
        return round((clock.timestamp() - self._zero) / 60)

    def shifts(self, day: date, skill: str) -> tuple[tuple[Crew, int, int], ...]:
        """Crews with a skill that work on a day, with start and end of their shift [min]."""
        key = (day, skill)
        if key not in self._shifts:
            found = []
            for crew in self.farm.crew:
                span = crew.shift_on(day) if skill in crew.skills else None
                if span is not None:
                    found.append((crew, self.moment(day, span[0]), self.moment(day, span[1])))
            self._shifts[key] = tuple(found)
        return self._shifts[key]

    def works(self, day: date, skill: str) -> bool:
        """Whether anybody with a skill works on a day."""
        return bool(self.shifts(day, skill))

    def next_working(self, day: date, skill: str) -> date:
        """First day from a day on when somebody with a skill works (a year ahead where nobody does)."""
        for offset in range(366):
            if self.works(day + timedelta(days=offset), skill):
                return day + timedelta(days=offset)
        return day + timedelta(days=366)

    def inside(self, day: date) -> bool:
        """Whether a day lies in the plan."""
        return self.first <= day <= self.last

    def week_of_moment(self, minute: float) -> Week:
        """ISO week of a moment."""
        return Week.of(self.local(minute).date())

    # --- things -----------------------------------------------------------------------------------------------------

    @cached_property
    def lots(self) -> dict[str, Lot]:
        """Lots by code."""
        return {lot.code: lot for lot in self.plan.lots}

    @cached_property
    def runs(self) -> dict[str, Run]:
        """Runs by code."""
        return {run.code: run for run in self.plan.runs}

    @cached_property
    def stock_lots(self) -> dict[str, StockLot]:
        """Stock lots by code."""
        return {lot.lot: lot for lot in self.stock}

    def strain_of(self, lot: str) -> Strain:
        """Strain of a lot."""
        return self.farm.strain_called(self.lots[lot].strain)

    def flush_kg(self, strain: Strain, picked: int = 0) -> list[float]:
        """Kilograms expected in each flush, over the bags that stand when flush ``picked`` + 1 is due [kg]."""
        dry = self.farm.bag_of(strain).wet_kg * (1 - self.farm.recipe_of(strain).water_pct / 100)
        whole = [dry * strain.be_pct / 100 * share for share in strain.flush_share]
        lost = strain.flush_loss_pct / 100
        return [kg * (1 - lost) ** max(0, flush - picked) for flush, kg in enumerate(whole)]

    def after_opening(self, strain: Strain, room: Room) -> list[timedelta]:
        """Time from opening in a room until each flush is ripe."""
        return [timedelta(days=days) for days in flush_days(strain, room.temp_c)]

    def fruiting_rooms(self, strain: Strain) -> list[Room]:
        """Fruiting rooms whose temperature suits a strain, in file order."""
        low, high = strain.fruiting_temp_c
        return [room for room in self.farm.rooms_of("fruiting") if low <= room.temp_c <= high]
