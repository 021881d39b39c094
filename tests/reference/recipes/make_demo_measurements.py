# Makes the measured S2P files of the demo scenario and the 10,001-point file of the timing script, from ngspice runs.
"""Usage: /usr/bin/python3 make_demo_measurements.py [output root]      (default: the project's root)

Writes db/seeds/demo-data/<supplier>/*.s2p and tests/reference/journey/wide-10001.s2p under the output root. Every seed
is fixed in the tables below: two runs give the same bytes.

Each file is one unit of a supplier's design at one temperature. On the circuit's S-parameters lie
- trace noise: each reading times (1 + complex normal, 1e-4 rms), about 0.001 dB;
- a noise floor: complex normal added to S21 and S12, -110 dB rms, about -101 dB at its highest over a sweep;
- reflection noise: complex normal added to S11 and S22, -80 dB rms.
"""

import os
import sys
from dataclasses import dataclass
from decimal import Decimal

sys.dont_write_bytecode = True

import numpy

from filter_ladder import Design, build_unit, scattering

ROOT = os.path.normpath(os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "..", ".."))
TRACE_NOISE = 1e-4
TRANSMISSION_NOISE = 10 ** (-110 / 20)
REFLECTION_NOISE = 10 ** (-80 / 20)


@dataclass(frozen=True)
class Unit:
    serial: str
    seed: int
    offset: float  # relative offset of every resonance left by tuning
    temperatures: tuple  # degrees C


@dataclass(frozen=True)
class Supplier:
    folder: str
    name: str
    design: Design
    tuning: float  # standard deviation of the resonances, relative
    units: tuple
    start: str  # MHz, exact decimals
    step: str  # MHz
    points: int
    style: str  # dialect of the file: db, ma or ri
    date: str


HALDEN = Supplier(
    folder="halden-resonator-works",
    name="Halden Resonator Works",
    design=Design(order=7, return_loss=20.0, lower=1.9143e9, upper=1.9850e9, quality=2400, drift=-3.0),
    tuning=4e-5,
    units=(
        Unit("HR2-0411", 411, 0.0, (-30, 25, 70)),
        Unit("HR2-0412", 412, 1e-4, (-30, 25, 70)),
        Unit("HR2-0415", 415, -1e-4, (-30, 25, 70)),
    ),
    start="1700",
    step="0.3125",
    points=1601,
    style="db",
    date="2026-11-12",
)

# The grid is set so that the passband's corners, 1920 and 1980 MHz, are not samples: the last sample inside the band is
# 1979.52 MHz, the next 1980.02 MHz. Unit 0207 is tuned low, and warm it moves lower still.
KESTREL = Supplier(
    folder="kestrel-cavity-filters",
    name="Kestrel Cavity Filters",
    design=Design(order=6, return_loss=17.5, lower=1.9160e9, upper=1.9805e9, quality=2200, drift=-6.0),
    tuning=2.5e-5,
    units=(
        Unit("KCF-0205", 205, 0.0, (-30, 25, 70)),
        Unit("KCF-0206", 206, 1e-4, (-30, 25, 70)),
        Unit("KCF-0207", 207, -3.7e-4, (-30, 25, 70)),
    ),
    start="1700.02",
    step="0.5",
    points=1001,
    style="ma",
    date="2026-11-17",
)

ORME = Supplier(
    folder="orme-microwave",
    name="Orme Microwave",
    design=Design(order=6, return_loss=20.0, lower=1.9153e9, upper=1.9810e9, quality=2000, drift=-5.0),
    tuning=4e-5,
    units=(Unit("OM-0031", 31, 0.0, (25,)),),
    start="1700",
    step="0.25",
    points=2001,
    style="ri",
    date="2026-11-19",
)

SUPPLIERS = (HALDEN, KESTREL, ORME)


def with_noise(parameters, generator):
    """The four S-parameters as an instrument reads them."""

    def noise(scale, count):
        parts = generator.normal(0, scale / numpy.sqrt(2), (2, count))
        return parts[0] + 1j * parts[1]

    read = []
    for index, parameter in enumerate(parameters):
        additive = REFLECTION_NOISE if index in (0, 3) else TRANSMISSION_NOISE
        count = len(parameter)
        read.append(parameter * (1 + noise(TRACE_NOISE, count)) + noise(additive, count))
    return read


def measure(supplier, unit, temperature, start, step, points):
    stop = Decimal(start) + Decimal(step) * (points - 1)
    circuit = build_unit(supplier.design, unit.seed, temperature, unit.offset, supplier.tuning)
    parameters = scattering(circuit, float(Decimal(start) * 10**6), float(stop * 10**6), points)
    return with_noise(parameters, numpy.random.default_rng((unit.seed, temperature + 100)))


def columns(style, value):
    """One complex reading as the style's two columns."""
    if style == "db":
        return f"{20 * numpy.log10(abs(value)):.5f} {numpy.degrees(numpy.angle(value)):.4f}"
    if style == "ma":
        return f"{abs(value):.6e} {numpy.degrees(numpy.angle(value)):.4f}"
    return f"{value.real:.6e} {value.imag:.6e}"


def touchstone(supplier, unit, temperature, start, step, points):
    """The text of a version 1 two-port file in the supplier's dialect: order 11 21 12 22."""
    read = measure(supplier, unit, temperature, start, step, points)
    option, exponent, places, line_end = {
        "db": ("# MHz S dB R 50", 0, 4, "\n"),
        "ma": ("# GHZ S MA R 50", -3, 6, "\r\n"),
        "ri": ("# hz s ri r 50", 6, 0, "\n"),
    }[supplier.style]
    lines = [
        f"! {supplier.name}",
        f"! Serial {unit.serial}",
        f"! Temperature {temperature:+d} degC",
        f"! Measured {supplier.date}, two-port network analyser, 100 Hz IF bandwidth, 0 dBm, full two-port calibration",
        f"! {points} points, {Decimal(step)} MHz steps",
        option,
    ]
    if supplier.style == "db":
        lines.append("! MHz  dB S11 ang  dB S21 ang  dB S12 ang  dB S22 ang")
    for index in range(points):
        frequency = (Decimal(start) + Decimal(step) * index).scaleb(exponent)
        numbers = " ".join(columns(supplier.style, parameter[index]) for parameter in read)
        lines.append(f"{frequency:.{places}f} {numbers}")
    return line_end.join(lines) + line_end


def file_name(supplier, unit, temperature):
    sign = "+" if supplier is KESTREL and temperature > 0 else ""
    return f"{unit.serial}_{sign}{temperature}C.s2p"


def write(path, text):
    os.makedirs(os.path.dirname(path), exist_ok=True)
    with open(path, "wb") as file:
        file.write(text.encode("ascii"))


def main():
    root = sys.argv[1] if len(sys.argv) > 1 else ROOT
    for supplier in SUPPLIERS:
        for unit in supplier.units:
            for temperature in unit.temperatures:
                text = touchstone(supplier, unit, temperature, supplier.start, supplier.step, supplier.points)
                path = os.path.join("db/seeds/demo-data", supplier.folder, file_name(supplier, unit, temperature))
                write(os.path.join(root, path), text)
                print(path, len(text))
    wide = touchstone(HALDEN, HALDEN.units[0], 25, "1700", "0.05", 10001)
    write(os.path.join(root, "tests/reference/journey/wide-10001.s2p"), wide)
    print("tests/reference/journey/wide-10001.s2p", len(wide))


if __name__ == "__main__":
    main()
