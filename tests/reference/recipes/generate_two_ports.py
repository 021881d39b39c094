# Generates two-ports, writes them in every format and unit, and prints what scikit-rf makes of them as JSON.
"""Usage: /usr/bin/python3 generate_two_ports.py < {"seed", "count"}

Prints {networks, files}.
- networks: [{kind, f_hz, s, z0, to, renormalised, z?, delay}]: random passive two-ports scaled below one by their
  largest singular value, and lossy LC ladders by chain matrices (skrf.a2s); `renormalised` at the references `to` by
  impedance steps (renormalise.py), `z` by skrf.network.s2z, null where 1 - S is nearly singular, `delay` of S21 by
  Network.group_delay, s.
- files: [{name, text, f_hz, s, z0}]: a network in DB, MA or RI and in Hz, kHz, MHz or GHz as skrf writes it, with what
  skrf reads back from that text; and as Z, Y, H and G of version 1, from skrf's s2z, s2y and s2h (G is the inverse of H), with the S they are of.
"""

import contextlib
import json
import os
import sys
import tempfile
import warnings

import numpy
from renormalise import cascade
from scikit_rf import plain, skrf

POINTS = 25
WELL_CONDITIONED = 1e3
FORMS = ("db", "ma", "ri")
UNITS = ("hz", "khz", "mhz", "ghz")


def grid(random):
    """Uneven steps, so that a delay over equal ones would show."""
    return 1e9 * random.uniform(0.1, 10) + numpy.cumsum(random.uniform(1e5, 5e6, POINTS)).round()


def passive(random):
    s = random.normal(size=(POINTS, 2, 2)) + 1j * random.normal(size=(POINTS, 2, 2))
    largest = numpy.linalg.svd(s, compute_uv=False)[:, 0]
    return s / (largest * random.uniform(1.0001, 3, POINTS))[:, None, None]


def ladder(random, f, z0):
    """Series inductors and shunt capacitors with losses, by chain matrices."""
    omega = 2 * numpy.pi * f
    centre = omega[len(f) // 2]
    one, zero = numpy.ones(len(f), complex), numpy.zeros(len(f), complex)
    chain = numpy.array([[one, zero], [zero, one]]).transpose(2, 0, 1)
    for k in range(random.integers(3, 8)):
        size = random.uniform(0.2, 2)
        if k % 2:
            arm = [[one, (0.3 + 1j * size * 50 * omega / centre)], [zero, one]]
        else:
            arm = [[one, zero], [(1e-4 + 1j * size / 50 * omega / centre), one]]
        chain = chain @ numpy.array([[numpy.broadcast_to(x, len(f)) for x in row] for row in arm]).transpose(2, 0, 1)
    return skrf.network.a2s(chain, numpy.array(z0) * numpy.ones((len(f), 1)))


def network_of(f, s, z0):
    frequency = skrf.Frequency.from_f(f, unit="hz")
    return skrf.Network(frequency=frequency, s=s, z0=numpy.array(z0) * numpy.ones((len(f), 1)), name="generated")


def describe(kind, f, s, z0, to):
    conditions = numpy.linalg.cond(numpy.eye(2) - s)
    z = plain(skrf.network.s2z(s, numpy.array(z0) * numpy.ones((len(f), 1))))
    return {
        "kind": kind,
        "f_hz": f.tolist(),
        "s": plain(s),
        "z0": z0,
        "to": to,
        "renormalised": plain(cascade(s, z0, to)),
        "z": [matrix if condition < WELL_CONDITIONED else None for matrix, condition in zip(z, conditions)],
        "delay": network_of(f, s, z0).group_delay[:, 1, 0].real.tolist(),
    }


def written(folder, network, form, unit):
    network.frequency.unit = unit
    path = os.path.join(folder, f"{form}-{unit}.s2p")
    network.write_touchstone(path, form=form)
    with open(path, encoding="ascii") as file:
        text = file.read()
    read = skrf.Network(path)
    return {
        "name": f"{form.upper()} in {unit}",
        "text": text,
        "f_hz": read.f.tolist(),
        "s": plain(read.s),
        "z0": [float(z.real) for z in read.z0[0]],
    }


def immittance(parameter, convert, f, s, ohm):
    """Version 1 normalises to R: Z/R, Y R; h11/R and h22 R; g11 R and g22/R."""
    z0 = ohm * numpy.ones((len(f), 2))
    matrices = convert(s, z0)
    scale = {"Z": [[1 / ohm] * 2] * 2, "Y": [[ohm] * 2] * 2, "H": [[1 / ohm, 1], [1, ohm]], "G": [[ohm, 1], [1, 1 / ohm]]}
    matrices = matrices * numpy.array(scale[parameter])
    lines = [f"# Hz {parameter} RI R {ohm}"]
    for hz, m in zip(f, matrices):
        numbers = [x for pair in (m[0, 0], m[1, 0], m[0, 1], m[1, 1]) for x in (pair.real, pair.imag)]
        lines.append(" ".join(repr(float(x)) for x in [hz, *numbers]))
    text = "\n".join(lines) + "\n"
    return {"name": f"{parameter} at {ohm} ohm", "text": text, "f_hz": f.tolist(), "s": plain(s), "z0": [ohm, ohm]}


def s2g(s, z0):
    return numpy.linalg.inv(skrf.network.s2h(s, z0))


CONVERSIONS = {"Z": skrf.network.s2z, "Y": skrf.network.s2y, "H": skrf.network.s2h, "G": s2g}


def generate(seed, count):
    random = numpy.random.default_rng(seed)
    networks, files = [], []
    with tempfile.TemporaryDirectory() as folder:
        for k in range(count):
            f = grid(random)
            z0, to = ([float(10 ** random.uniform(0.7, 2.7)) for _ in range(2)] for _ in range(2))
            kind = "ladder" if k % 2 else "passive"
            s = ladder(random, f, z0) if k % 2 else passive(random)
            networks.append(describe(kind, f, s, z0, to))
            same = [50.0, 50.0] if k % 3 else [75.0, 75.0]
            if k < len(FORMS) * len(UNITS) * 2:
                form, unit = FORMS[k // 2 % 3], UNITS[k // 6 % 4]
                files.append(written(folder, network_of(f, s, same), form, unit))
            bounded = 0.5 * passive(random)
            for parameter, convert in CONVERSIONS.items():
                files.append(immittance(parameter, convert, f, bounded, same[0]))
    return {"networks": networks, "files": files}


if __name__ == "__main__":
    warnings.simplefilter("ignore")
    wanted = json.load(sys.stdin)
    with contextlib.redirect_stdout(sys.stderr):
        generated = generate(wanted["seed"], wanted["count"])
    json.dump(generated, sys.stdout)
