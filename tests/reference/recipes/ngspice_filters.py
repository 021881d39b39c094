# Two filters solved by ngspice: S-parameters at 50 ohm, and ngspice's own measurements between other terminations.
"""Usage: /usr/bin/python3 ngspice_filters.py      prints JSON

Filters: a low-pass Chebyshev ladder of order 5 (g values as in filter_ladder.py) and the coupled-resonator band-pass of
filter_ladder.py, both with lossy inductors. The figures (worst losses, crossings, delays) are those of ngspice's own `meas`
statements on its own vectors, taken between 50 ohm and `load`: the S-parameters at 50 ohm must give them when renormalised.
With 2 V behind R1 the incident wave is 1 V: S21 = V2 sqrt(R1/R2), S11 = V1 - 1.
"""

import json
import math
import os
import re
import subprocess
import sys
import tempfile

sys.dont_write_bytecode = True

import numpy

from filter_ladder import Design, nominal_circuit, prototype, run_ngspice

SOURCE = 50.0


def low_pass_lines():
    g = prototype(5, 20.0)
    omega = 2 * math.pi * 400e6
    lines = []
    for k in range(5):
        if k % 2 == 0:
            lines.append(f"c{k} {'port1' if k == 0 else 'port2' if k == 4 else 'middle'} 0 {g[k] / (omega * 50)!r}")
        else:
            ends = ("port1", "middle") if k == 1 else ("middle", "port2")
            inductance = g[k] * 50 / omega
            lines.append(f"l{k} {ends[0]} x{k} {inductance!r}")
            lines.append(f"r{k} x{k} {ends[1]} {omega * inductance / 150!r}")
    return lines


def band_pass_lines():
    circuit = nominal_circuit(Design(order=5, return_loss=20, lower=1.91e9, upper=1.99e9, quality=1500, drift=0))
    n = len(circuit.inductance)
    nodes = ["port1"] + [f"n{k}" for k in range(1, n + 1)] + ["port2"]
    lines = [f"cs{k} {nodes[k]} {nodes[k + 1]} {float(circuit.series[k])!r}" for k in range(n + 1)]
    for k in range(n):
        lines.append(f"l{k + 1} n{k + 1} m{k + 1} {float(circuit.inductance[k])!r}")
        lines.append(f"r{k + 1} m{k + 1} 0 {float(circuit.resistance[k])!r}")
        lines.append(f"cp{k + 1} n{k + 1} 0 {float(circuit.shunt[k])!r}")
    return lines


FILTERS = [
    {
        "name": "low-pass",
        "lines": low_pass_lines,
        "grid": (10e6, 1.01e9, 4001),
        "passband": (10e6, 350e6),
        "stopband": (700e6, 1.01e9),
        "load": 75.0,
        "sides": 1,
    },
    {
        "name": "band-pass",
        "lines": band_pass_lines,
        "grid": (1.75e9, 2.15e9, 4001),
        "passband": (1.92e9, 1.98e9),
        "stopband": (2.05e9, 2.15e9),
        "load": 62.5,
        "sides": 2,
    },
]
OPTIONS = ".options reltol=1e-9 abstol=1e-15 vntol=1e-12 gmin=1e-18"


def circuit_lines(filter_, driven, load):
    lines = [filter_["name"]]
    for port, ohm in ((1, SOURCE), (2, load)):
        lines.append(f"v{port} source{port} 0 dc 0 ac {2 if port == driven else 0}")
        lines.append(f"rs{port} source{port} port{port} {ohm!r}")
    return lines + filter_["lines"]() + [OPTIONS]


def scattering(filter_):
    start, stop, points = filter_["grid"]
    runs = []
    for driven in (1, 2):
        deck = circuit_lines(filter_, driven, SOURCE)
        deck += [f".ac lin {points} {start!r} {stop!r}", ".save v(port1) v(port2)", ".end"]
        runs.append(run_ngspice("\n".join(deck) + "\n"))
    forward, backward = runs
    columns = (forward["v(port1)"] - 1, forward["v(port2)"], backward["v(port1)"], backward["v(port2)"] - 1)
    return forward["frequency"].real, columns


def measured(filter_):
    """Name and figure of each of ngspice's measurements between 50 ohm and the load."""
    start, stop, points = filter_["grid"]
    (low, high), (stop_low, stop_high) = filter_["passband"], filter_["stopband"]
    delays = numpy.linspace(low, high, 7)[1:-1]
    control = [
        ".control",
        f"ac lin {points} {start!r} {stop!r}",
        f"let loss = -db(v(port2)) - 10*log10({SOURCE / filter_['load']!r})",
        "let match = -db(v(port1) - 1)",
        "let delay = group_delay(v(port2))",
        f"meas ac loss_max max loss from={low!r} to={high!r}",
        f"meas ac loss_min min loss from={low!r} to={high!r}",
        f"meas ac rejection_min min loss from={stop_low!r} to={stop_high!r}",
        f"meas ac match_min min match from={low!r} to={high!r}",
        "meas ac peak min loss",
        "let level3 = peak + 3",
        "let level30 = peak + 30",
    ]
    for level in (3, 30):
        control.append(f"meas ac upper{level} when loss=$&level{level} rise=last")
        if filter_["sides"] == 2:
            control.append(f"meas ac lower{level} when loss=$&level{level} fall=1")
    control += [f"meas ac delay{k} find delay at={float(hz)!r}" for k, hz in enumerate(delays)]
    control += [".endc", ".end"]
    deck = "\n".join(circuit_lines(filter_, 1, filter_["load"]) + control) + "\n"
    with tempfile.TemporaryDirectory() as folder:
        path = os.path.join(folder, "deck.cir")
        with open(path, "w", encoding="ascii") as file:
            file.write(deck)
        done = subprocess.run(
            ["ngspice", "-n", "-b", path],
            capture_output=True,
            text=True,
            check=False,
            env={**os.environ, "NGSPICE_MEAS_PRECISION": "12"},
        )
    found = dict(re.findall(r"^(\w+)\s+=\s+([-+.\deE]+)", done.stdout, re.MULTILINE))
    wanted = [line.split()[2] for line in control if line.startswith("meas ")]
    absent = [name for name in wanted if name not in found]
    if absent:
        raise RuntimeError(f"ngspice did not measure {absent}: {done.stdout}\n{done.stderr}")
    return {name: float(found[name]) for name in wanted}, [float(hz) for hz in delays]


def main():
    answers = []
    for filter_ in FILTERS:
        frequency, columns = scattering(filter_)
        figures, delays = measured(filter_)
        matrix = [
            [[{"re": c[0].real, "im": c[0].imag}, {"re": c[2].real, "im": c[2].imag}],
             [{"re": c[1].real, "im": c[1].imag}, {"re": c[3].real, "im": c[3].imag}]]
            for c in zip(*columns)
        ]  # fmt: skip
        answers.append(
            {
                "name": filter_["name"],
                "f_hz": frequency.tolist(),
                "s": matrix,
                "load": filter_["load"],
                "passband": filter_["passband"],
                "stopband": filter_["stopband"],
                "figures": figures,
                "delay_hz": delays,
            }
        )
    json.dump(answers, sys.stdout)


if __name__ == "__main__":
    main()
