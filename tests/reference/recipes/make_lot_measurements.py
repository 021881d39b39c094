# Makes a lot of five units at three temperatures in two sweeps each, from ngspice runs, with what numpy reads from it.
"""Usage: /usr/bin/python3 make_lot_measurements.py <output folder>

Writes 30 S2P files and expected.json. Every seed is fixed: two runs give the same readings. Each unit at each temperature is
swept finely over the passband and coarsely over the whole range, as is usual. Unit LF-605 is tuned low, so that warm its
upper corner is the worst of the lot; the wide sweep of unit LF-603 at -30 degrees C lacks a stretch of the upper stopband.

expected.json: for each unit and temperature the largest loss over 1.92 to 1.98 GHz, dB, where it lies, and its expanded
uncertainty, |S21| 10^(+-U/20) +- 10^(-floor/20).
"""

import json
import math
import os
import sys

sys.dont_write_bytecode = True

import numpy

from filter_ladder import Design, build_unit, scattering
from make_demo_measurements import with_noise

DESIGN = Design(order=7, return_loss=20.0, lower=1.9130e9, upper=1.9842e9, quality=2000, drift=-5.0)
UNITS = (("LF-601", 601, 0.0), ("LF-602", 602, 8e-5), ("LF-603", 603, -8e-5), ("LF-604", 604, 1.2e-4), ("LF-605", 605, -4.4e-4))
TEMPERATURES = (-30, 25, 70)
# start and step in kHz, points
SWEEPS = (("fine", 1_900_000, 250, 401), ("wide", 1_700_000, 1_250, 401))
HOLE = ("LF-603", -30, "wide", 2.06e9, 2.08e9)
PASSBAND = (1.92e9, 1.98e9)
TRANSMISSION = 0.05  # dB, k = 2
FLOOR = 95.0  # dB below a through, peak


def read_unit(seed, offset, temperature, start, step, points, sweep):
    circuit = build_unit(DESIGN, seed, temperature, offset, 4e-5)
    parameters = scattering(circuit, start * 1e3, (start + step * (points - 1)) * 1e3, points)
    return with_noise(parameters, numpy.random.default_rng((seed, temperature + 100, len(sweep), points + step)))


def touchstone(serial, temperature, frequencies, read):
    lines = [f"! Serial {serial}", f"! Temperature {temperature:+d} degC", "# kHz S RI R 50"]
    for index, kilohertz in enumerate(frequencies):
        numbers = " ".join(f"{part[index].real:.6e} {part[index].imag:.6e}" for part in read)
        lines.append(f"{kilohertz} {numbers}")
    return "\n".join(lines) + "\n"


def worst_loss(sweeps):
    """Largest loss over the passband, dB, and where; straight lines between the samples at the band's edges."""
    worst = (-math.inf, math.nan)
    for kilohertz, read in sweeps:
        frequency = kilohertz * 1e3
        loss = -20 * numpy.log10(abs(read[1]))
        inside = (frequency >= PASSBAND[0]) & (frequency <= PASSBAND[1])
        at = numpy.concatenate(([PASSBAND[0]], frequency[inside], [PASSBAND[1]]))
        value = numpy.interp(at, frequency, loss)
        index = int(numpy.argmax(value))
        if value[index] > worst[0]:
            worst = (float(value[index]), float(at[index]))
    return worst


def main():
    folder = sys.argv[1]
    os.makedirs(folder, exist_ok=True)
    expected = []
    for serial, seed, offset in UNITS:
        for temperature in TEMPERATURES:
            sweeps = []
            for name, start, step, points in SWEEPS:
                read = read_unit(seed, offset, temperature, start, step, points, name)
                kilohertz = start + step * numpy.arange(points)
                if (serial, temperature, name) == HOLE[:3]:
                    kept = (kilohertz * 1e3 <= HOLE[3]) | (kilohertz * 1e3 >= HOLE[4])
                    kilohertz, read = kilohertz[kept], [part[kept] for part in read]
                text = touchstone(serial, temperature, kilohertz, read)
                with open(os.path.join(folder, f"{serial}_{temperature:+d}C_{name}.s2p"), "wb") as file:
                    file.write(text.encode("ascii"))
                # as printed: the reader sees seven digits
                printed = numpy.array([[float(f"{v.real:.6e}") + 1j * float(f"{v.imag:.6e}") for v in part] for part in read])
                sweeps.append((kilohertz, printed))
            value, frequency = worst_loss(sweeps)
            magnitude = 10 ** (-value / 20)
            floor = 10 ** (-FLOOR / 20)
            low = -20 * math.log10(magnitude * 10 ** (TRANSMISSION / 20) + floor)
            high = -20 * math.log10(magnitude * 10 ** (-TRANSMISSION / 20) - floor)
            expected.append(
                {"unit": serial, "temperature": temperature, "loss": value, "frequency": frequency, "interval": [low, high]}
            )
    with open(os.path.join(folder, "expected.json"), "w", encoding="ascii") as file:
        json.dump(expected, file, indent=1)


if __name__ == "__main__":
    main()
