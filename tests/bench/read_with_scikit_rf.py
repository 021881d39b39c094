# Times scikit-rf reading a Touchstone file again and again, and prints the milliseconds of each run as JSON.
"""Usage: /usr/bin/python3 read_with_scikit_rf.py FILE RUNS"""

import contextlib
import json
import sys
import time

import numpy

numpy.complex, numpy.float, numpy.int, numpy.bool = complex, float, int, bool

with contextlib.redirect_stdout(sys.stderr):
    import skrf

times = []
for _ in range(int(sys.argv[2])):
    begun = time.perf_counter()
    skrf.Network(sys.argv[1])
    times.append((time.perf_counter() - begun) * 1000)
print(json.dumps(times))
