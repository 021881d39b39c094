# The coupled-resonator band-pass of filter_ladder.py with resonators of any Q, solved by ngspice: lossy filters without a pad.
"""Usage: /usr/bin/python3 lossy_filters.py      JSON on standard input: {"quality": [...]}; prints JSON"""

import json
import sys

sys.dont_write_bytecode = True

import numpy

from filter_ladder import Design, nominal_circuit, scattering

GRID = (1.85e9, 2.05e9, 1001)


def answer(quality):
    circuit = nominal_circuit(Design(order=5, return_loss=20, lower=1.91e9, upper=1.99e9, quality=quality, drift=0))
    columns = scattering(circuit, *GRID)
    number = lambda value: {"re": float(value.real), "im": float(value.imag)}  # noqa: E731
    matrix = [[[number(c[0]), number(c[2])], [number(c[1]), number(c[3])]] for c in zip(*columns)]
    return {"quality": quality, "f_hz": numpy.linspace(*GRID).tolist(), "s": matrix}


if __name__ == "__main__":
    json.dump([answer(quality) for quality in json.load(sys.stdin)["quality"]], sys.stdout)
