# Analogue filters by scipy.signal as two-ports, with scipy's own figures of them, taken from poles and zeros and not from samples.
"""Usage: /usr/bin/python3 scipy_filters.py      prints JSON

S21 is the filter's transfer function; S11 = S22 has the magnitude that a lossless network must have, sqrt(1 - |S21|^2), in
quadrature with S21 (a symmetric lossless two-port). Figures: levels at band edges from freqs_zpk; crossings of a level by
scipy.optimize.brentq on the continuous response; delays from poles and zeros: -d arg H/dw is the sum over the poles of
Re(1/(jw - p)) less the same sum over the zeros.
"""

import json
import math
import sys

import numpy
from scipy import optimize, signal

POINTS = 4001
CASES = [
    {"name": "Butterworth 3", "kind": "butter", "order": 3, "edges": (1.92e9, 1.98e9), "rp": None, "rs": None},
    {"name": "Butterworth 6", "kind": "butter", "order": 6, "edges": (1.90e9, 2.00e9), "rp": None, "rs": None},
    {"name": "Chebyshev 5", "kind": "cheby1", "order": 5, "edges": (1.91e9, 1.99e9), "rp": 0.1, "rs": None},
    {"name": "Chebyshev 7", "kind": "cheby1", "order": 7, "edges": (1.92e9, 1.98e9), "rp": 0.5, "rs": None},
    {"name": "elliptic 4", "kind": "ellip", "order": 4, "edges": (1.90e9, 2.00e9), "rp": 0.2, "rs": 40},
    {"name": "elliptic 5", "kind": "ellip", "order": 5, "edges": (1.91e9, 1.99e9), "rp": 0.1, "rs": 50},
]
SPAN = (1.70e9, 2.20e9)


def design(case):
    edges = [2 * math.pi * hz for hz in case["edges"]]
    options = {"btype": "bandpass", "analog": True, "output": "zpk"}
    if case["kind"] == "butter":
        return signal.butter(case["order"], edges, **options)
    if case["kind"] == "cheby1":
        return signal.cheby1(case["order"], case["rp"], edges, **options)
    return signal.ellip(case["order"], case["rp"], case["rs"], edges, **options)


def response(zpk, hz):
    return signal.freqs_zpk(*zpk, worN=2 * numpy.pi * numpy.atleast_1d(hz))[1]


def loss(zpk, hz):
    return float(-20 * math.log10(abs(response(zpk, hz)[0])))


def delay(zpk, hz):
    zeros, poles, _ = zpk
    jw = 2j * math.pi * hz
    return float(numpy.sum((1 / (jw - poles)).real) - numpy.sum((1 / (jw - zeros)).real))


def least_loss(zpk, low, high):
    """The least loss of the continuous response: scipy's bounded search about the best of many samples."""
    grid = numpy.linspace(low, high, 20001)
    best = int(numpy.argmax(abs(response(zpk, grid))))
    around = (grid[max(0, best - 1)], grid[min(len(grid) - 1, best + 1)])
    found = optimize.minimize_scalar(lambda hz: loss(zpk, hz), bounds=around, method="bounded", options={"xatol": 1.0})
    return min(found.fun, loss(zpk, grid[best]))


def crossing(zpk, level, start, step):
    """Outwards from `start` the first place of a level, to a few hertz."""
    hz = start
    while loss(zpk, hz + step) < level:
        hz += step
    return float(optimize.brentq(lambda f: loss(zpk, f) - level, *sorted((hz, hz + step)), xtol=1.0))


def answer(case):
    zpk = design(case)
    grid = numpy.linspace(*SPAN, POINTS)
    s21 = response(zpk, grid)
    s11 = 1j * s21 / abs(s21) * numpy.sqrt(numpy.maximum(0, 1 - abs(s21) ** 2))
    low, high = case["edges"]
    peak = least_loss(zpk, low, high)
    inner = (low + 0.1 * (high - low), high - 0.1 * (high - low))
    crossings = {}
    for level in (3, 20):
        middle = math.sqrt(low * high)
        crossings[level] = [crossing(zpk, peak + level, middle, step) for step in (-20e3, 20e3)]
    delays = numpy.linspace(*inner, 9)
    # Of an elliptic filter from where the designed attenuation is reached; of the others clear of the skirt.
    edge = high + 1.5 * (high - low)
    if case["rs"] is not None:
        edge = crossing(zpk, case["rs"], math.sqrt(low * high), 20e3)
    stop = (edge, SPAN[1])
    return {
        "name": case["name"],
        "edges": case["edges"],
        "ripple": case["rp"],
        "attenuation": case["rs"],
        "f_hz": grid.tolist(),
        "s21": [{"re": v.real, "im": v.imag} for v in s21],
        "s11": [{"re": v.real, "im": v.imag} for v in s11],
        "peak": peak,
        "edge_loss": [loss(zpk, low), loss(zpk, high)],
        "stop": stop,
        "stop_loss": loss(zpk, stop[0]),
        "crossings": crossings,
        "delays": [[float(hz), delay(zpk, hz)] for hz in delays],
    }


if __name__ == "__main__":
    json.dump([answer(case) for case in CASES], sys.stdout)
