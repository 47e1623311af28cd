"""Hourly heights of two sets of harmonic constants by utide, for tests/tide_heights.rs.

    pip install utide
    python3 tests/outside/tide.py > tests/data/utide/heights.txt

Lines "constants SET NAME AMPLITUDE LAG", then lines "height SET TIME METRES" about mean level.
"""

from datetime import datetime, timedelta

import numpy as np
from utide._ut_constants import constit_index_dict
from utide.harmonics import FUV

SETS = {
    "five": "M2 .5 120 S2 .15 140 N2 .1 100 K1 .2 200 O1 .15 190",
    "many": "M2 .6 95 S2 .2 120 N2 .12 75 K2 .055 118 K1 .25 310 O1 .18 300 P1 .08 308 Q1 .035 295 M4 .04 200"
    " MS4 .02 260 MN4 .015 170 M6 .01 30 NU2 .02 80 MU2 .015 60 2N2 .01 55 L2 .015 110 T2 .01 119 SSA .03 45",
}
STARTS = [datetime(2024, 9, 22), datetime(2026, 9, 16), datetime(2028, 2, 28)]
LATITUDE = 25.0

for name, text in SETS.items():
    words = text.split()
    names, amplitudes, lags = words[0::3], np.array(words[1::3], float), np.array(words[2::3], float)
    index = np.array([constit_index_dict[n] for n in names])
    for constituent, amplitude, lag in zip(names, amplitudes, lags):
        print("constants", name, constituent, amplitude, lag)
    for start in STARTS:
        for hour in range(72):
            at = start + timedelta(hours=hour)
            day = np.array([at.toordinal() + at.hour / 24])
            f, u, v = FUV(day, day[0], index, LATITUDE, [0, 0, 0, 0])
            phase = 2 * np.pi * (v[0] + u[0]) - np.radians(lags)
            height = float(np.sum(f[0] * amplitudes * np.cos(phase)))
            print("height", name, at.strftime("%Y-%m-%dT%H:%MZ"), f"{height:.4f}")
