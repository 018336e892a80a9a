"""Clock times with and without a date; a night with a clock change has 23 or 25 hours."""

from __future__ import annotations

from zoneinfo import ZoneInfo

import pytest

from scheduler.errors import UsageError
from scheduler.heating.moment import Moment

DUBLIN = ZoneInfo("Europe/Dublin")


def test_without_a_date_days_are_counted() -> None:
    start = Moment.parse("16:40", DUBLIN, "--steam-on")
    assert start.words == "16:40"
    assert start.plus(60 * 10).words == "02:40 +1 d"
    assert start.plus(-60 * 20).words == "20:40 -1 d"
    assert (start.plus(-60 * 20).of_day, start.month, start.iso) == (20 * 60 + 40, None, "16:40")


@pytest.mark.parametrize("text", ["2027-01-12 16:40", "2027-01-12T16:40"])
def test_with_a_date_the_weekday_is_known(text: str) -> None:
    start = Moment.parse(text, DUBLIN, "--steam-on")
    assert (start.words, start.month) == ("Tue 12 Jan 16:40", 1)
    assert start.iso == "2027-01-12T16:40:00+00:00"
    assert start.plus(12 * 60).words == "Wed 13 Jan 04:40"


def test_nights_of_clock_changes() -> None:
    """28 March 2027 loses an hour in Dublin, 31 October 2027 gains one."""
    spring = Moment.parse("2027-03-27 20:00", DUBLIN, "--steam-on")
    assert spring.plus(12 * 60).words == "Sun 28 Mar 09:00"
    autumn = Moment.parse("2027-10-30 20:00", DUBLIN, "--steam-on")
    assert autumn.plus(12 * 60).words == "Sun 31 Oct 07:00"
    end = Moment.parse("2027-10-31 07:00", DUBLIN, "--unload-by")
    assert end.plus(-12 * 60).words == "Sat 30 Oct 20:00"


@pytest.mark.parametrize("text", ["", "25:00", "7:30", "2027-02-30 10:00", "tomorrow", "2027-01-12 16:61"])
def test_other_texts_are_refused(text: str) -> None:
    with pytest.raises(UsageError, match="--steam-on: a clock time such as 16:40"):
        Moment.parse(text, DUBLIN, "--steam-on")
