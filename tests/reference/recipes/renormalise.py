# Renormalises two-ports with scikit-rf in two ways of its own and prints both as JSON.
"""Usage: /usr/bin/python3 renormalise.py < cases      cases: [{s, from, to}], s[k][i][j] as {re, im}, ohm

Prints [{cascade, through_z}]: S at the new references
- cascade: impedance steps of zero length connected to either port, wave by wave (skrf.impedance_mismatch, connect_s);
- through_z: skrf.renormalize_s, which goes through Z and so loses digits where 1 - S is nearly singular.
"""

import json
import sys

import numpy
from scikit_rf import from_plain, plain, skrf


def step(first, second, points):
    return skrf.network.impedance_mismatch(first * numpy.ones(points), second * numpy.ones(points))


def cascade(s, old, new):
    points = len(s)
    left = skrf.network.connect_s(step(new[0], old[0], points), 1, s, 0)
    return skrf.network.connect_s(left, 1, step(old[1], new[1], points), 0)


def through_z(s, old, new):
    grid = numpy.ones((len(s), 1))
    return skrf.network.renormalize_s(s, numpy.array(old) * grid, numpy.array(new) * grid)


def renormalise(case):
    s = from_plain(case["s"])
    result = {"cascade": plain(cascade(s, case["from"], case["to"]))}
    if case.get("through_z", True):
        result["through_z"] = plain(through_z(s, case["from"], case["to"]))
    return result


if __name__ == "__main__":
    json.dump([renormalise(case) for case in json.load(sys.stdin)], sys.stdout)
