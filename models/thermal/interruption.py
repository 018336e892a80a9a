"""A steam run whose power failed for a while: what the core did meanwhile, and when the load is ready after all."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import ceil, exp

from models.farm import Programme, Steriliser
from models.thermal.curve import CurveRow, joined, minutes_between
from models.thermal.cycle import Cycle, Setting, Surroundings, cycle_in, setting_of
from models.thermal.errors import ThermalError
from models.thermal.finish import finish
from models.thermal.generator import boil_up_seconds
from models.thermal.load import LoadPart, bag_states
from models.thermal.steaming import FIRST_PARTS, LONGEST_HEAT_UP_MIN, BagState, Trace, Vessel, step, surface_temperature

WARM_C = (30.0, 60.0)
"""Core temperatures between which a wet mix is an incubator [°C] (common practice, no source)."""
FIRST_RISE_K = 10.0
"""A vessel this little above its start gets its first steam [K]."""
WET_MIX_BELOW_C = 70.0
"""A core that has not been hotter is still a wet mix, whose souring time runs on [°C] (common practice, no source)."""


@dataclass(frozen=True, slots=True)
class Interruption:
    """A cycle with a break, beside the cycle as it was meant.

    Attributes
    ----------
    planned : Cycle
        Without the break.
    off_min, back_min : float
        Break, from steam on [min].
    core_at_break_c, core_after_c, lowest_vessel_c : float
        Slowest core when the power failed, when the generator boiled again, and the coldest the vessel was in between
        [°C].
    steam_again_min : float
        When the generator boiled again, from steam on [min].
    hold_restarts : int
        How often the hold had to begin anew.
    warm_min, warm_planned_min : float
        Time of the slowest core within `WARM_C` on its way up, with and without the break [min].
    hold_started_min, ready_to_unload_h, ready_to_inoculate_h : float
        Begin of the hold that counts [min], and the new times, from steam on [h].
    energy_kwh : float
        To the end of the hold [kWh].
    curve : tuple of CurveRow
        With the break.
    """

    planned: Cycle
    off_min: float
    back_min: float
    core_at_break_c: float
    core_after_c: float
    lowest_vessel_c: float
    steam_again_min: float
    hold_restarts: int
    warm_min: float
    warm_planned_min: float
    hold_started_min: float
    ready_to_unload_h: float
    ready_to_inoculate_h: float
    energy_kwh: float
    curve: tuple[CurveRow, ...]


def interrupted_cycle(
    around: Surroundings,
    steriliser: Steriliser,
    programme: Programme,
    load: tuple[LoadPart, ...],
    *,
    month: int,
    off_min: int,
    break_min: int,
    element_kw: float | None = None,
    start_c: float | None = None,
) -> Interruption:
    """Work out a cycle whose power fails for a while.

    Parameters
    ----------
    off_min, break_min : int
        Whole minutes from steam on until the power fails, and until it is back from there [min].
    around, steriliser, programme, load, month, element_kw, start_c
        As for `models.thermal.cycle.steam_cycle`.

    Raises
    ------
    ThermalError
        As for the cycle; or the break does not lie within the steamed part of it.

    Notes
    -----
    Without power no steam comes: bags and metal give their heat to the losses at one temperature of the vessel, and
    the bags' surface coefficient is left at that of steam. The generator cools by its own loss and must boil again.
    The hold counts only while both the coldest core and the vessel are at or above the target; if either falls below
    it, the whole hold begins anew when the core is back (common practice, no source).
    """
    setting = setting_of(around, steriliser, programme, month=month, element_kw=element_kw, start_c=start_c)
    planned = cycle_in(around, steriliser, programme, load, month=month, element_kw=element_kw, start_c=start_c)
    steamed = 60 * (planned.heat_up_h + planned.hold_h)
    if not 0 <= off_min < steamed:
        raise ThermalError(
            f"a break within the {steamed:.0f} minutes from steam on to the end of the hold was expected;"
            f" found one at minute {off_min:g}"
        )
    states = bag_states(load, steriliser)
    course = _Course(setting, states, programme, off_min, off_min + break_min)
    course.run()
    end = course.hold_from + 60 * programme.hold_h
    after = finish(
        steriliser, load, states, course.vessel_c, setting.open_c, setting.vessel.ambient_c, setting.place, end
    )
    ready = end / 60 + steriliser.vent_min / 60 + after.in_place_h
    heated = [row for row in planned.curve if row.minutes <= 60 * planned.heat_up_h]
    return Interruption(
        planned=planned,
        off_min=off_min,
        back_min=off_min + break_min,
        core_at_break_c=course.core_at(off_min),
        core_after_c=course.core_at(ceil(course.steam_again)),
        lowest_vessel_c=min(row.steam_c for row in course.rows if row.minutes >= off_min),
        steam_again_min=course.steam_again,
        hold_restarts=course.restarts,
        warm_min=minutes_between([row for row in course.rows if row.minutes <= course.hold_from], *WARM_C),
        warm_planned_min=minutes_between(heated, *WARM_C),
        hold_started_min=course.hold_from,
        ready_to_unload_h=ready,
        ready_to_inoculate_h=ready + after.in_room_h,
        energy_kwh=course.energy_kwh,
        curve=joined(course.rows, after.rows),
    )


class _Course:
    """Minute by minute from steam on to the end of a hold that counts."""

    def __init__(
        self, setting: Setting, states: Sequence[BagState], programme: Programme, off: float, back: float
    ) -> None:
        self.setting, self.states, self.off, self.back = setting, states, off, back
        self.target, self.hold_min = programme.target_core_c, 60 * programme.hold_h
        self.vessel_c = setting.start_c
        self.generator_c = min(setting.feed_c, setting.vessel.boil_c)
        self.restarts, self.hold_from, self.steam_again, self.energy_kwh = 0, -1.0, back, 0.0
        start = setting.start_c
        self.rows = [CurveRow(0.0, start, start, start, start, 0.0)]

    def _to_boil_s(self, from_c: float) -> float:
        vessel = self.setting.vessel
        return boil_up_seconds(
            self.setting.generator_kj_k, vessel.element_kw, self.setting.generator_loss_w_k, from_c, vessel.boil_c,
            vessel.ambient_c,
        )  # fmt: skip

    def core_at(self, minute: float) -> float:
        """Slowest core at a whole minute [°C]."""
        return self.rows[min(int(minute), len(self.rows) - 1)].core_c

    def run(self) -> None:
        """Fill the rows until the hold is done."""
        minute = 0
        while self.hold_from < 0 or minute < self.hold_from + self.hold_min - 1e-9:
            if minute > LONGEST_HEAT_UP_MIN + self.back + self.hold_min:
                raise ThermalError(f"the coldest core never reaches {self.target:g} °C after the break")
            before = self.rows[-1]
            self._one_minute(minute)
            self._count(before, self.rows[-1], minute)
            minute += 1
        self.energy_kwh -= self.rows[-1].element_kw / 60 * (minute - self.hold_from - self.hold_min)

    def _count(self, before: CurveRow, after: CurveRow, minute: int) -> None:
        hot = after.core_c >= self.target and after.steam_c >= self.target
        if self.hold_from >= 0 and not hot:
            self.hold_from, self.restarts = -1.0, self.restarts + 1
        elif self.hold_from < 0 and hot:
            rise = after.core_c - before.core_c
            crossed = before.core_c < self.target
            self.hold_from = minute + ((self.target - before.core_c) / rise if crossed else 1.0)

    def _one_minute(self, minute: int) -> None:
        vessel, on = self.setting.vessel, not self.off <= minute < self.back
        share = 0.0
        if on:
            seconds = self._to_boil_s(self.generator_c)
            share = max(0.0, 1 - seconds / 60)
            if share > 0 and seconds > 0 and minute >= self.back:
                self.steam_again = minute + seconds / 60
            self.generator_c = vessel.boil_c if share > 0 else self._warmed(vessel)
        else:
            self.generator_c = self._cooled()
        trace = Trace()
        first = self.vessel_c - self.setting.start_c < FIRST_RISE_K
        parts = FIRST_PARTS if first else 1
        self.vessel_c = step(vessel, self.states, self.vessel_c, trace, parts=parts, steam_kw=share * vessel.steam_kw)
        steaming_kw = trace.element_kw[0] if share > 0 else 0.0
        kw = (steaming_kw if share == 1 else (1 - share) * vessel.element_kw + share * steaming_kw) if on else 0.0
        self.energy_kwh += kw / 60
        slowest = min(self.states, key=lambda state: state.core_c(self.vessel_c))
        self.rows.append(
            CurveRow(
                float(minute + 1),
                self.vessel_c,
                surface_temperature(slowest, self.vessel_c),
                slowest.core_c(self.vessel_c),
                slowest.mean_c(self.vessel_c),
                kw,
            )
        )

    def _warmed(self, vessel: Vessel) -> float:
        """The generator after a minute at full power [°C]."""
        loss = self.setting.generator_loss_w_k / 1000
        capacity = self.setting.generator_kj_k
        if loss == 0:
            return self.generator_c + 60 * vessel.element_kw / capacity
        ends_at = vessel.ambient_c + vessel.element_kw / loss
        return ends_at + (self.generator_c - ends_at) * exp(-60 * loss / capacity)

    def _cooled(self) -> float:
        """The generator after a minute without power [°C]."""
        ambient = self.setting.vessel.ambient_c
        decay = exp(-60 * self.setting.generator_loss_w_k / 1000 / self.setting.generator_kj_k)
        return ambient + (self.generator_c - ambient) * decay


def advice(found: Interruption, *, sours_after_h: float, again_within_h: float) -> tuple[str, ...]:
    """What to do with the load, in words.

    Parameters
    ----------
    sours_after_h : float
        Longest time from mixing to steam [h].
    again_within_h : float
        Longest break after which a load is steamed again [h].

    Notes
    -----
    Rules of common practice, no source: a core that was never above 70 °C counts as wet mix; one between 30 and 60 °C
    for hours is an incubator; a hold that was broken begins anew; a load is steamed again once only.
    """
    words = []
    gap_h = (found.steam_again_min - found.off_min) / 60
    if gap_h > again_within_h:
        words.append(
            f"Discard the load: steam was away for {gap_h:.1f} h, longer than the {again_within_h:g} h after which it"
            " may be steamed again."
        )
    elif found.core_at_break_c < WET_MIX_BELOW_C and gap_h + found.off_min / 60 > sours_after_h:
        words.append(
            f"The core had only {found.core_at_break_c:.0f} °C when the power failed: count the load as wet mix, which"
            f" sours within {sours_after_h:g} h of mixing. Smell it, and discard it if in doubt."
        )
    if found.warm_min - found.warm_planned_min > 60:
        words.append(
            f"The core was between {WARM_C[0]:g} and {WARM_C[1]:g} °C for {found.warm_min / 60:.1f} h instead of"
            f" {found.warm_planned_min / 60:.1f} h, warm enough for what is alive in it to grow."
        )
    if found.hold_restarts:
        words.append("The hold was broken: count the whole hold again from when the coldest core is back at target.")
    elif found.off_min / 60 >= found.planned.heat_up_h:
        words.append("Core and steam stayed at target: the hold goes on.")
    else:
        words.append("The hold had not begun: count all of it from when the coldest core is at target.")
    words.append("Go by a probe in the core of the slowest bag, not by these figures. Steam a load again once only.")
    return tuple(words)
