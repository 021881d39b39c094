# A lossy coupled-resonator band-pass ladder, analysed by ngspice: element values, netlist, AC runs, S-parameters.
"""The filter is a chain of shunt LC resonators joined by series capacitors and tapped into 50 ohm by series capacitors.

Element values: Chebyshev prototype and capacitive J-inverters, after Matthaei, Young & Jones, "Microwave Filters,
Impedance-Matching Networks, and Coupling Structures", 1964, sections 4.05 and 8.11 (section numbers from memory).
Loss: a resistance in series with each inductor, r = 2 pi f0 L / Q. ngspice solves the circuit; Python only
writes the netlist and reads the raw file.
"""

import math
import os
import re
import subprocess
import tempfile
from dataclasses import dataclass, replace

import numpy

REFERENCE_OHM = 50.0
RESONATOR_INDUCTANCE = 1e-9  # H; sets the impedance level of the resonators, not the response
COPPER_PER_KELVIN = 0.0039  # temperature coefficient of copper's resistance, common practice
AMBIENT = 25.0  # degrees C


@dataclass(frozen=True)
class Design:
    order: int
    return_loss: float  # dB, of the lossless prototype in its equal-ripple band
    lower: float  # Hz, lower edge of the equal-ripple band
    upper: float  # Hz
    quality: float  # unloaded Q at ambient
    drift: float  # ppm/K of every resonance; negative moves down when warm


@dataclass(frozen=True)
class Circuit:
    """Element values in H, F and ohm; n inductors, n shunt capacitors, n + 1 series capacitors."""

    inductance: tuple
    resistance: tuple
    shunt: tuple
    series: tuple


def prototype(order, return_loss):
    """Chebyshev g1 .. g(n+1), equal ripple from the return loss in dB."""
    ripple = -10 * math.log10(1 - 10 ** (-return_loss / 10))
    beta = math.log(1 / math.tanh(ripple / (40 / math.log(10))))
    gamma = math.sinh(beta / (2 * order))
    a = [math.sin((2 * k - 1) * math.pi / (2 * order)) for k in range(1, order + 1)]
    b = [gamma**2 + math.sin(k * math.pi / order) ** 2 for k in range(1, order + 1)]
    g = [2 * a[0] / gamma]
    for k in range(1, order):
        g.append(4 * a[k - 1] * a[k] / (b[k - 1] * g[k - 1]))
    g.append(1.0 if order % 2 else 1 / math.tanh(beta / 4) ** 2)
    return g


def nominal_circuit(design):
    g = prototype(design.order, design.return_loss)
    centre = math.sqrt(design.lower * design.upper)
    fraction = (design.upper - design.lower) / centre
    omega = 2 * math.pi * centre
    inductance = RESONATOR_INDUCTANCE
    slope = 1 / (omega * inductance)  # susceptance slope of a resonator, S
    conductance = 1 / REFERENCE_OHM
    n = design.order
    end_first = math.sqrt(conductance * slope * fraction / g[0])
    end_last = math.sqrt(conductance * slope * fraction / (g[n - 1] * g[n]))
    inner = [fraction * slope / math.sqrt(g[k] * g[k + 1]) for k in range(n - 1)]

    def end_capacitor(inverter):
        series = inverter / (omega * math.sqrt(1 - (inverter / conductance) ** 2))
        return series, series / (1 + (omega * series / conductance) ** 2)

    first, first_effective = end_capacitor(end_first)
    last, last_effective = end_capacitor(end_last)
    series = [first] + [j / omega for j in inner] + [last]
    loading = [first_effective] + series[1:-1] + [last_effective]
    total = 1 / (omega**2 * inductance)
    shunt = [total - loading[k] - loading[k + 1] for k in range(n)]
    return Circuit(
        inductance=(inductance,) * n,
        resistance=(omega * inductance / design.quality,) * n,
        shunt=tuple(shunt),
        series=tuple(series),
    )


def build_unit(design, seed, temperature, offset=0.0, tuning=1e-4, coupling=5e-3):
    """One built unit: `offset` moves every resonance (relative), `tuning` and `coupling` are the spread left after
    tuning (relative, standard deviation of resonances and of coupling capacitors); at `temperature` in degrees C every
    reactance moves by the drift and every resistance as copper does, by the skin effect with the root."""
    generator = numpy.random.default_rng(seed)
    moved = replace(design, lower=design.lower * (1 + offset), upper=design.upper * (1 + offset))
    circuit = nominal_circuit(moved)
    resonances = generator.normal(0, tuning, design.order)
    couplings = generator.normal(0, coupling, design.order + 1)
    rise = temperature - AMBIENT
    stretch = 1 / (1 + design.drift * 1e-6 * rise)
    heat = math.sqrt(1 + COPPER_PER_KELVIN * rise)
    total = 1 / ((2 * math.pi) ** 2 * moved.lower * moved.upper * RESONATOR_INDUCTANCE)
    return Circuit(
        inductance=tuple(value * stretch for value in circuit.inductance),
        resistance=tuple(value * heat for value in circuit.resistance),
        shunt=tuple((value - 2 * error * total) * stretch for value, error in zip(circuit.shunt, resonances)),
        series=tuple(value * (1 + error) * stretch for value, error in zip(circuit.series, couplings)),
    )


def netlist(circuit, driven_port, start, stop, points):
    """The deck of one AC run: 2 V behind 50 ohm at the driven port, 50 ohm at the other."""
    n = len(circuit.inductance)
    lines = ["coupled-resonator band-pass ladder"]
    for port, node in ((1, "port1"), (2, "port2")):
        lines.append(f"v{port} source{port} 0 dc 0 ac {2 if port == driven_port else 0}")
        lines.append(f"rs{port} source{port} {node} {REFERENCE_OHM!r}")
    nodes = ["port1"] + [f"n{k}" for k in range(1, n + 1)] + ["port2"]
    for k in range(n + 1):
        lines.append(f"cs{k} {nodes[k]} {nodes[k + 1]} {float(circuit.series[k])!r}")
    for k in range(n):
        lines.append(f"l{k + 1} n{k + 1} m{k + 1} {float(circuit.inductance[k])!r}")
        lines.append(f"r{k + 1} m{k + 1} 0 {float(circuit.resistance[k])!r}")
        lines.append(f"cp{k + 1} n{k + 1} 0 {float(circuit.shunt[k])!r}")
    lines += [
        ".options reltol=1e-9 abstol=1e-15 vntol=1e-12 gmin=1e-18",
        f".ac lin {points} {float(start)!r} {float(stop)!r}",
        ".save v(port1) v(port2)",
        ".end",
    ]
    return "\n".join(lines) + "\n"


def read_raw(path):
    """Complex binary raw file of ngspice: {variable name: complex array}."""
    with open(path, "rb") as file:
        content = file.read()
    mark = b"Binary:\n"
    head = content[: content.index(mark)].decode("ascii")
    count = int(re.search(r"No\. Points:\s*(\d+)", head).group(1))
    names = re.findall(r"^\s+\d+\s+(\S+)\s+\S+", head[head.index("Variables:\n") :], re.MULTILINE)
    start = content.index(mark) + len(mark)
    table = numpy.frombuffer(content, dtype="<c16", count=count * len(names), offset=start).reshape(count, len(names))
    return {name: table[:, column] for column, name in enumerate(names)}


def run_ngspice(deck):
    with tempfile.TemporaryDirectory() as folder:
        deck_path, raw_path = os.path.join(folder, "deck.cir"), os.path.join(folder, "out.raw")
        with open(deck_path, "w", encoding="ascii") as file:
            file.write(deck)
        # -n: no start-up file of the user's; the result depends on the deck alone
        done = subprocess.run(
            ["ngspice", "-n", "-b", "-r", raw_path, deck_path], capture_output=True, text=True, check=False
        )
        if done.returncode != 0 or not os.path.exists(raw_path):
            raise RuntimeError(f"ngspice failed: {done.stdout}\n{done.stderr}")
        return read_raw(raw_path)


def scattering(circuit, start, stop, points):
    """S-parameters at 50 ohm on `points` equal steps: (s11, s21, s12, s22). With 2 V behind 50 ohm the incident wave
    is 1 V: S11 = V1 - 1, S21 = V2."""
    forward = run_ngspice(netlist(circuit, 1, start, stop, points))
    backward = run_ngspice(netlist(circuit, 2, start, stop, points))
    grid = numpy.linspace(start, stop, points)
    for run in (forward, backward):
        if len(run["frequency"]) != points or numpy.max(abs(run["frequency"].real / grid - 1)) > 1e-9:
            raise RuntimeError("ngspice swept another grid than asked for")
    return forward["v(port1)"] - 1, forward["v(port2)"], backward["v(port1)"], backward["v(port2)"] - 1
