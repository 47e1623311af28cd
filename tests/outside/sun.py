"""Sunrise, sunset and civil twilight of 60 places and days by skyfield, for tests/daylight.rs.

    pip install skyfield skyfield-data
    python3 tests/outside/sun.py > tests/data/skyfield/sun-60.txt

One line a case: latitude, longitude, date in local mean time, then rise, set, dawn, dusk in UTC; "up" or "down" where the
sun passes the altitude at no time of that day. Rise and set: centre at -0.833 degrees; dawn and dusk: at -6.
"""

from datetime import date, datetime, timedelta, timezone

from skyfield import almanac
from skyfield.api import Loader, wgs84
from skyfield_data import get_skyfield_data_path

load = Loader(get_skyfield_data_path(), expire=False)
eph = load("de421.bsp")
ts = load.timescale(builtin=True)

PLACES = [
    (25.7743, -80.1937), (22.2855, 114.1577), (-19.25, 146.83), (18.45, -66.1), (14.6, 120.97), (-18.13, 178.43),
    (-13.83, -171.77), (1.87, -157.4), (-20.16, 57.5), (52.0, 4.1), (64.15, -21.95), (69.65, 18.96), (-54.8, -68.3),
    (0.0, 179.5), (0.0, -180.0),
]
DATES = [date(2026, 3, 20), date(2026, 6, 21), date(2026, 9, 17), date(2026, 12, 21)]


def cell(instant):
    return instant.strftime("%Y-%m-%dT%H:%M:%SZ")


def passes(place, start, altitude):
    """First upward and first downward passage within 24 hours of `start`."""
    t0, t1 = ts.from_datetime(start), ts.from_datetime(start + timedelta(days=1))
    is_up = almanac.risings_and_settings(eph, eph["sun"], place, horizon_degrees=altitude, radius_degrees=0)
    is_up.step_days = 0.02  # Short winter days and summer nights are not stepped over.
    times, states = almanac.find_discrete(t0, t1, is_up)
    found = {}
    for t, state in zip(times, states):
        found.setdefault(int(state), cell(t.utc_datetime() + timedelta(milliseconds=500)))
    constant = "up" if is_up(t0) else "down"
    return found.get(1, constant), found.get(0, constant)


for latitude, longitude in PLACES:
    place = wgs84.latlon(latitude, longitude)
    for day in DATES:
        start = datetime(day.year, day.month, day.day, tzinfo=timezone.utc) - timedelta(hours=longitude / 15)
        rise, set_ = passes(place, start, -0.833)
        dawn, dusk = passes(place, start, -6.0)
        print(latitude, longitude, day, rise, set_, dawn, dusk)
