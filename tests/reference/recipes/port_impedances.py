# Prints what scikit-rf and numpy make of given two-ports: impedances at the ports, standing-wave ratios, delay over an aperture.
"""Usage: /usr/bin/python3 port_impedances.py < [{"f_hz", "s", "z0", "aperture"}]

Prints one entry a network: {terminated: [port 1, port 2], open: [port 1, port 2], vswr: [port 1, port 2], delay}.
- terminated: input impedance with the far port cascaded into its matched load (skrf `**`, then `z` of the one-port), ohm.
- open: z11 and z22 of skrf.network.s2z, ohm; null where 1 - S is nearly singular.
- vswr: Network.s_vswr of the one-port.
- delay: -Δφ/(2π A) of S21 with numpy.unwrap and numpy.interp at f ± A/2, s; null where that leaves the sweep.
"""

import contextlib
import json
import sys
import warnings

import numpy
from scikit_rf import skrf

WELL_CONDITIONED = 1e3


def complex_list(values):
    return [{"re": float(z.real), "im": float(z.imag)} for z in values]


def terminated(network, port):
    """The one-port seen at `port` with a matched load at the other."""
    near, far = (0, 1) if port == 1 else (1, 0)
    turned = network.copy() if port == 1 else network.flipped()
    load = skrf.Network(
        frequency=network.frequency, s=numpy.zeros((len(network.f), 1, 1), complex), z0=network.z0[:, far][:, None]
    )
    one = turned ** load
    one.z0 = network.z0[:, near][:, None]
    return one


def delay_over(f, s21, aperture):
    phase = numpy.unwrap(numpy.angle(s21))
    low, high = f - aperture / 2, f + aperture / 2
    inside = (low >= f[0]) & (high <= f[-1])
    delay = -(numpy.interp(high, f, phase) - numpy.interp(low, f, phase)) / (2 * numpy.pi * aperture)
    return [float(d) if ok else None for d, ok in zip(delay, inside)]


def describe(entry):
    f = numpy.array(entry["f_hz"])
    s = numpy.array([[[x["re"] + 1j * x["im"] for x in row] for row in matrix] for matrix in entry["s"]])
    z0 = numpy.array(entry["z0"]) * numpy.ones((len(f), 1))
    network = skrf.Network(frequency=skrf.Frequency.from_f(f, unit="hz"), s=s, z0=z0)
    conditions = numpy.linalg.cond(numpy.eye(2) - s)
    z = skrf.network.s2z(s, z0)
    ports = [terminated(network, 1), terminated(network, 2)]
    return {
        "terminated": [complex_list(one.z[:, 0, 0]) for one in ports],
        "open": [
            [one if ok else None for one, ok in zip(complex_list(z[:, k, k]), conditions < WELL_CONDITIONED)]
            for k in (0, 1)
        ],
        "vswr": [one.s_vswr[:, 0, 0].real.tolist() for one in ports],
        "delay": delay_over(f, s[:, 1, 0], entry["aperture"]),
    }


if __name__ == "__main__":
    warnings.simplefilter("ignore")
    entries = json.load(sys.stdin)
    with contextlib.redirect_stdout(sys.stderr):
        described = [describe(entry) for entry in entries]
    json.dump(described, sys.stdout)
