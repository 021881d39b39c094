# Unit matching by scikit-rf, numpy and scipy: reads {"units": [Touchstone text], "band": [from, to]}, prints the largest spread of
# |S21| in dB and of its phase in degrees over the band, as measured and with each unit's least-squares line removed.
import itertools
import json
import os
import sys
import tempfile

import numpy
from scipy import stats

import scikit_rf

asked = json.load(sys.stdin)
low, high = asked["band"]


def sweep(text):
    with tempfile.TemporaryDirectory() as folder:
        path = os.path.join(folder, "unit.s2p")
        with open(path, "w") as file:
            file.write(text)
        network = scikit_rf.skrf.Network(path)
    s21 = network.s[:, 1, 0]
    return network.f, 20 * numpy.log10(abs(s21)), numpy.rad2deg(numpy.unwrap(numpy.angle(s21)))


sweeps = [sweep(text) for text in asked["units"]]
low = max([low] + [f[0] for f, _, _ in sweeps])
high = min([high] + [f[-1] for f, _, _ in sweeps])
inside = numpy.concatenate([f for f, _, _ in sweeps] + [[low, high]])
grid = numpy.unique(inside[(inside >= low) & (inside <= high)])
levels = numpy.array([numpy.interp(grid, f, level) for f, level, _ in sweeps])
phases = numpy.array([numpy.interp(grid, f, phase) for f, _, phase in sweeps])
# About the middle: the fit is better conditioned.
removed = []
for phase in phases:
    line = stats.linregress(grid - grid.mean(), phase)
    removed.append(phase - line.intercept - line.slope * (grid - grid.mean()))


def largest(values, wraps):
    best = (-1.0, 0.0, 0, 0)
    for one, other in itertools.combinations(range(len(values)), 2):
        difference = values[one] - values[other]
        if wraps:
            difference = (difference + 180) % 360 - 180
        at = int(numpy.argmax(abs(difference)))
        if abs(difference[at]) > best[0]:
            best = (float(abs(difference[at])), float(grid[at]), one, other)
    return {"value": best[0], "frequency": best[1], "units": list(best[2:])}


print(
    json.dumps(
        {
            "points": len(grid),
            "level": largest(levels, False),
            "measured": largest(phases, True),
            "removed": largest(numpy.array(removed), True),
        }
    )
)
