"""The published geodesics of the package geographiclib, for tests/geodesics.rs, digits as its authors wrote them.

    pip install geographiclib
    python3 tests/outside/geodesics.py > tests/data/geodtest/geodtest-20.dat

One line a case: lat1 lon1 azi1 lat2 lon2 azi2 s12 a12 m12 M12 M21 S12.
"""

import inspect
import re

from geographiclib.test import test_geodesic

source = inspect.getsource(test_geodesic)
table = source[source.index("testcases = [") : source.index("]]")]
numbers = re.findall(r"-?\d+(?:\.\d+)?(?:e-?\d+)?", table)
for first in range(0, len(numbers), 12):
    print(*numbers[first : first + 12])
