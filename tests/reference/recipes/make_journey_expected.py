# Scores the demo's S2P files against the demo's specification with numpy alone: expected.json of the browser test.
"""Usage: /usr/bin/python3 make_journey_expected.py [output root]      (default: the project's root)

Reads db/seeds/demo-data and writes tests/reference/journey/specification.json and expected.json. Independent of the
product: its own reader, its own evaluation. Definitions:
- loss = -20 log10 |S|; between neighbouring samples linear in dB against frequency;
- evaluation set of a band: the samples inside, and the interpolated values at its edges and at a limit's breakpoints;
- the reported point has the least margin, of equals (within 1e-9) the lowest frequency;
- transmission: |S| 10^(+-Ut/20) +- L, L = 10^(-noise floor/20); reflection: |G| +- (D + T|G| + M|G|^2 + K|S21||S12|),
  T = 10^(tracking/20) - 1, clipped to [0, 1] (EURAMET cg-12, ripple technique, with the two-port term);
- decision by guard band (JCGM 106:2012; ILAC-G8:09/2019, w = U), each minimum of the margin's ends on its own.

Values are written to 1e-9 dB: beyond that numpy's vector routines may differ by a last digit from run to run.
"""

import json
import os
import re
import sys
from decimal import Decimal

sys.dont_write_bytecode = True

import numpy

ROOT = os.path.normpath(os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "..", ".."))
PASSBAND = [1.92e9, 1.98e9]
SETUP = {
    "transmission": 0.1,
    "noiseFloor": 90,
    "noiseFloorKind": "peak",
    "directivity": 36,
    "sourceMatch": 32,
    "loadMatch": 36,
    "tracking": 0.1,
}
REQUIREMENTS = [
    {"id": "2.1", "kind": "insertion-loss", "band": PASSBAND, "max": 1.2},
    {"id": "2.2", "kind": "ripple", "band": PASSBAND, "max": 0.8},
    {"id": "3.1", "kind": "rejection", "band": [1.76e9, 1.87e9], "min": 55},
    {
        "id": "3.2",
        "kind": "rejection",
        "band": [1.87e9, 1.895e9],
        "min": {"points": [[1.87e9, 55], [1.895e9, 30]], "scale": "linear"},
    },
    {"id": "3.3", "kind": "rejection", "band": [2.005e9, 2.04e9], "min": 30},
    {"id": "3.4", "kind": "rejection", "band": [2.04e9, 2.14e9], "min": 50},
    {"id": "3.5", "kind": "rejection", "band": [2.01e9, 2.03e9], "min": 28, "relativeTo": PASSBAND},
    {"id": "3.6", "kind": "reverse-isolation", "band": [2.06e9, 2.14e9], "min": 50},
    {"id": "4.1", "kind": "return-loss", "port": 1, "band": PASSBAND, "min": 15},
    {"id": "4.2", "kind": "return-loss", "port": 2, "band": PASSBAND, "min": 15},
]
SPECIFICATION = {
    "title": "Receive band-pass, 1.92 to 1.98 GHz",
    "impedance": [50, 50],
    "range": [-30, 70],
    "ambient": 25,
    "requirements": REQUIREMENTS,
    "declared": [
        {"id": "6.1", "kind": "declared", "name": "Input power, continuous", "limit": "min 20 W"},
        {"id": "6.2", "kind": "declared", "name": "Connectors", "limit": "SMA female, both ports"},
    ],
    "assumedSetup": SETUP,
    "unitsAsked": 3,
    "unitsOverRange": 1,
}
SUPPLIERS = [
    ("halden-resonator-works", "Halden Resonator Works"),
    ("kestrel-cavity-filters", "Kestrel Cavity Filters"),
    ("orme-microwave", "Orme Microwave"),
]
# Worst first: the order in which a roll-up takes them.
ORDER = ["fail", "not-covered", "conditional-fail", "conditional-pass", "pass"]
# Margin that earns full credit, per kind: puts margins in different units side by side.
FULL_CREDIT = {"insertion-loss": 0.2, "ripple": 0.1, "rejection": 3, "return-loss": 2, "reverse-isolation": 3}


def read_file(path):
    """(frequency in Hz, {name: complex array}) of a version 1 two-port file; the frequency is the double nearest to the
    decimal as written."""
    with open(path, encoding="ascii", newline=None) as file:
        lines = [line.split("!")[0].split() for line in file.read().splitlines()]
    lines = [line for line in lines if line]
    option = [word.lower() for word in lines[0]]
    assert option[0] == "#" and option[2] == "s" and option[4:] == ["r", "50"], option
    scale = {"hz": 1, "khz": 10**3, "mhz": 10**6, "ghz": 10**9}[option[1]]
    frequency = numpy.array([float(Decimal(line[0]) * scale) for line in lines[1:]])
    table = numpy.array([[float(word) for word in line[1:]] for line in lines[1:]])
    first, second = table[:, 0::2], table[:, 1::2]
    if option[3] == "ri":
        value = first + 1j * second
    else:
        value = (first if option[3] == "ma" else 10 ** (first / 20)) * numpy.exp(1j * numpy.radians(second))
    return frequency, dict(zip(("s11", "s21", "s12", "s22"), value.T))


def loss(value):
    return -20 * numpy.log10(value)


def transmission_ends(level, setup):
    """Lower and upper end of a loss in dB."""
    magnitude = 10 ** (-level / 20)
    floor = 10 ** (-setup["noiseFloor"] / 20)
    factor = 10 ** (setup["transmission"] / 20)
    with numpy.errstate(divide="ignore"):
        return loss(magnitude * factor + floor), loss(numpy.maximum(0, magnitude / factor - floor))


def reflection_ends(level, through, setup):
    """Lower and upper end of a return loss in dB; `through` is |S21||S12|."""
    magnitude = 10 ** (-level / 20)
    directivity, source, load = (10 ** (-setup[key] / 20) for key in ("directivity", "sourceMatch", "loadMatch"))
    tracking = 10 ** (setup["tracking"] / 20) - 1
    spread = directivity + tracking * magnitude + source * magnitude**2 + load * through
    with numpy.errstate(divide="ignore"):
        return loss(numpy.minimum(1, magnitude + spread)), loss(numpy.maximum(0, magnitude - spread))


def evaluation_set(frequency, requirement, key):
    low, high = requirement[key]
    limit = requirement.get("min", requirement.get("max"))
    corners = [low, high]
    if isinstance(limit, dict) and key == "band":
        corners += [hertz for hertz, _ in limit["points"] if low <= hertz <= high]
    inside = frequency[(frequency >= low) & (frequency <= high)]
    return numpy.unique(numpy.concatenate([inside, corners]))


def first_least(margin):
    return int(numpy.flatnonzero(margin <= margin.min() + 1e-9)[0])


def decide(lower, margin, upper):
    if upper < 0:
        return "fail"
    if margin < 0:
        return "conditional-fail"
    return "conditional-pass" if lower < 0 else "pass"


def evaluate(frequency, parameters, requirement, setup):
    """One requirement on one sweep that reaches all of its band."""
    levels = {name: loss(abs(value)) for name, value in parameters.items()}
    kind = requirement["kind"]
    points = evaluation_set(frequency, requirement, "band")
    assert frequency[0] <= points[0] and points[-1] <= frequency[-1]
    at = lambda name, where: numpy.interp(where, frequency, levels[name])

    if kind == "ripple":
        value = at("s21", points)
        low, high = transmission_ends(value, setup)
        worst, ripple = first_least(-value), value.max() - value.min()
        interval = [max(0, low.max() - high.min()), high.max() - low.min()]
        margins = (requirement["max"] - interval[1], requirement["max"] - ripple, requirement["max"] - interval[0])
        return report(requirement, ripple, points[worst], requirement["max"], margins, interval, points[worst])

    if kind == "return-loss":
        value = at("s11" if requirement["port"] == 1 else "s22", points)
        low, high = reflection_ends(value, 10 ** (-(at("s21", points) + at("s12", points)) / 20), setup)
    else:
        value = at("s12" if kind == "reverse-isolation" else "s21", points)
        low, high = transmission_ends(value, setup)
        if "relativeTo" in requirement:
            reference = at("s21", evaluation_set(frequency, requirement, "relativeTo"))
            reference_low, reference_high = transmission_ends(reference, setup)
            value, low, high = value - reference.min(), low - reference_high.min(), high - reference_low.min()
    limit = requirement.get("min", requirement.get("max"))
    if isinstance(limit, dict):
        limit = numpy.interp(points, *zip(*limit["points"]))
    limit = numpy.broadcast_to(numpy.asarray(limit, float), points.shape)
    sign = 1 if "min" in requirement else -1
    margin = sign * (value - limit)
    ends = (low - limit, high - limit) if sign == 1 else (limit - high, limit - low)
    worst = first_least(margin)
    margins = (ends[0].min(), margin.min(), ends[1].min())
    deciding = ends[1] if margins[2] < 0 else ends[0]
    return report(
        requirement, value[worst], points[worst], limit[worst], margins, [low[worst], high[worst]],
        points[first_least(deciding)],
    )


def report(requirement, value, frequency, limit, margins, interval, deciding):
    lower, margin, upper = (0.0 if abs(end) < 1e-9 else float(end) for end in margins)
    return {
        "id": requirement["id"],
        "verdict": decide(lower, margin, upper),
        "value": float(value),
        "frequency": float(frequency),
        "limit": float(limit),
        "margin": margin,
        "interval": [float(end) for end in interval],
        "marginInterval": [lower, upper],
        "decidingFrequency": float(deciding),
    }


def worst_of(cells):
    return min(cells, key=lambda cell: (ORDER.index(cell["verdict"]), cell["margin"]))


def score_supplier(root, folder, name):
    place = f"db/seeds/demo-data/{folder}"
    names = [re.fullmatch(r"(.+)_([+-]?\d+)C\.s2p", entry) for entry in os.listdir(os.path.join(root, place))]
    files = []
    for unit, temperature, file_name in sorted((match[1], int(match[2]), match[0]) for match in names):
        frequency, parameters = read_file(os.path.join(root, place, file_name))
        results = [evaluate(frequency, parameters, requirement, SETUP) for requirement in REQUIREMENTS]
        files.append(
            {
                "path": f"{place}/{file_name}", "unit": unit, "temperature": temperature,
                "points": len(frequency), "results": results,
            }
        )
    # A unit covers the range with data at both its ends and at ambient; without one, a line passes nowhere.
    temperatures = {}
    for entry in files:
        temperatures.setdefault(entry["unit"], set()).add(entry["temperature"])
    over_range = sorted(unit for unit, at in temperatures.items() if {-30, 25, 70} <= at)
    lines = []
    for index, requirement in enumerate(REQUIREMENTS):
        cells = [
            {"unit": entry["unit"], "temperature": entry["temperature"], **entry["results"][index]} for entry in files
        ]
        cell = worst_of(cells)
        covered = len(over_range) >= SPECIFICATION["unitsOverRange"] or cell["verdict"] == "fail"
        lines.append(
            {
                "id": requirement["id"],
                "verdict": cell["verdict"] if covered else "not-covered",
                "worst": cell,
                "creditedMargin": cell["margin"] / FULL_CREDIT[requirement["kind"]],
            }
        )
    worst_line = min(lines, key=lambda line: (ORDER.index(line["verdict"]), line["creditedMargin"]))
    return {
        "supplier": name, "units": sorted(temperatures), "unitsOverRange": over_range, "verdict": worst_line["verdict"],
        "worstLine": worst_line["id"], "lines": lines, "files": files,
    }


def rounded(content):
    """Every float to 1e-9; frequencies are exact doubles and stay so."""
    if isinstance(content, dict):
        return {key: rounded(value) for key, value in content.items()}
    if isinstance(content, list):
        return [rounded(value) for value in content]
    return round(content, 9) if isinstance(content, float) else content


def check_corner(root, expected):
    """The one failing cell lies at 1.98 GHz, between two samples, and no sample of the band fails by itself."""
    failing = [
        (entry, result) for supplier in expected for entry in supplier["files"] for result in entry["results"]
        if result["verdict"] not in ("pass", "conditional-pass")
    ]
    assert len(failing) == 1, [(entry["path"], result["id"]) for entry, result in failing]
    entry, result = failing[0]
    frequency, parameters = read_file(os.path.join(root, entry["path"]))
    inside = (frequency >= PASSBAND[0]) & (frequency <= PASSBAND[1])
    sampled = loss(abs(parameters["s21"][inside])).max()
    assert result["verdict"] == "fail" and result["id"] == "2.1" and result["frequency"] == PASSBAND[1]
    assert PASSBAND[1] not in frequency and sampled < result["limit"]
    print(f"{entry['unit']} {entry['temperature']:+d} C: largest sample {sampled:.3f}, corner {result['value']:.3f} dB")


def write_json(path, content):
    os.makedirs(os.path.dirname(path), exist_ok=True)
    with open(path, "w", encoding="ascii", newline="\n") as file:
        json.dump(rounded(content), file, indent=1, allow_nan=False)
        file.write("\n")


def main():
    root = sys.argv[1] if len(sys.argv) > 1 else ROOT
    expected = [score_supplier(root, folder, name) for folder, name in SUPPLIERS]
    check_corner(root, expected)
    journey = os.path.join(root, "tests/reference/journey")
    write_json(os.path.join(journey, "specification.json"), SPECIFICATION)
    write_json(os.path.join(journey, "expected.json"), {"suppliers": expected})
    for supplier in expected:
        print(supplier["supplier"], supplier["verdict"], "worst line", supplier["worstLine"])
        for line in supplier["lines"]:
            cell = line["worst"]
            print(
                f"  {line['id']} {line['verdict']:16} {cell['value']:8.3f} dB at {cell['frequency'] / 1e9:.6f} GHz,"
                f" margin {cell['margin']:+.3f} [{cell['marginInterval'][0]:+.3f}, {cell['marginInterval'][1]:+.3f}]"
                f" {cell['unit']} {cell['temperature']:+d} C"
            )


if __name__ == "__main__":
    main()
