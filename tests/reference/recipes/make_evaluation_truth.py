# Writes ../evaluation.json: networks, requirements and the figures an evaluation must find, computed with numpy alone.
#
# Run with Debian's python:  /usr/bin/python3 tests/reference/recipes/make_evaluation_truth.py
#
# The way is independent of the product's: networks come from a ladder of lossy resonators by ABCD matrices; every figure
# is a brute-force search over a dense grid merged with all samples, band edges and breakpoints; windows are tried at
# every start of a dense grid; group delay by numpy.unwrap and slices; the line through the phase by numpy.polyfit;
# crossings by a scan of the densely interpolated curve refined with numpy.interp on the bracketing pair.
import json
import math
import pathlib

import numpy as np

OUT = pathlib.Path(__file__).resolve().parent.parent / "evaluation.json"


# ---- networks ------------------------------------------------------------------------------------------------------
def ladder(f, f0, bandwidth, order, ripple_db, q, z1=50.0, z2=50.0):
    """S of a Chebyshev band-pass ladder (series first), all resonators of unloaded Q `q`, between z1 and z2 ohm."""
    beta = math.log(1 / math.tanh(ripple_db / 17.37))
    gamma = math.sinh(beta / (2 * order))
    a = [math.sin((2 * k - 1) * math.pi / (2 * order)) for k in range(1, order + 1)]
    b = [gamma**2 + math.sin(k * math.pi / order) ** 2 for k in range(1, order + 1)]
    g = [2 * a[0] / gamma]
    for k in range(1, order):
        g.append(4 * a[k - 1] * a[k] / (b[k - 1] * g[k - 1]))
    delta = bandwidth / f0
    omega = f / f0 - f0 / f
    m = np.tile(np.eye(2, dtype=complex), (len(f), 1, 1))
    for k, gk in enumerate(g):
        x = gk / delta * (1j * omega + 1 / q)
        e = np.tile(np.eye(2, dtype=complex), (len(f), 1, 1))
        if k % 2 == 0:
            e[:, 0, 1] = 50 * x
        else:
            e[:, 1, 0] = x / 50
        m = m @ e
    return to_s(m, z1, z2)


def to_s(m, z1, z2):
    a, b, c, d = m[:, 0, 0], m[:, 0, 1], m[:, 1, 0], m[:, 1, 1]
    den = a * z2 + b + c * z1 * z2 + d * z1
    s = np.empty((len(a), 2, 2), dtype=complex)
    s[:, 0, 0] = (a * z2 + b - c * z1 * z2 - d * z1) / den
    s[:, 1, 0] = 2 * math.sqrt(z1 * z2) / den
    s[:, 0, 1] = 2 * math.sqrt(z1 * z2) * (a * d - b * c) / den
    s[:, 1, 1] = (-a * z2 + b - c * z1 * z2 + d * z1) / den
    return s


def rough(s, seed, size=2e-4):
    """The same S with a little complex noise, so that samples are not on a smooth curve."""
    r = np.random.default_rng(seed)
    return s + size * (r.normal(size=s.shape) + 1j * r.normal(size=s.shape))


def make_networks():
    f = np.round(np.linspace(1.80e9, 2.10e9, 301))
    uneven = np.unique(np.round(np.concatenate([np.linspace(1.80e9, 1.90e9, 23), np.linspace(1.90e9, 2.00e9, 187), np.linspace(2.00e9, 2.10e9, 31)])))
    chebyshev = lambda grid, **k: ladder(grid, 1.95e9, 62e6, 5, 0.05, 1500.0, **k)
    null = rough(chebyshev(f), 3)
    null[40, 1, 0] = 0
    coarse = np.round(np.linspace(1.80e9, 2.10e9, 31))
    return {
        "fine": (f, rough(chebyshev(f), 1), (50, 50)),
        "uneven": (uneven, rough(chebyshev(uneven), 2, 2e-3), (50, 50)),
        "null": (f, null, (50, 50)),
        "coarse": (coarse, chebyshev(coarse), (50, 50)),
        "clean": (f, chebyshev(f), (50, 50)),
        # the same ladder seen between 75 and 60 ohm: what "clean" renormalised to 75 and 60 must be
        "clean-75-60": (f, chebyshev(f, z1=75.0, z2=60.0), (75, 60)),
    }


# ---- readings ------------------------------------------------------------------------------------------------------
def db(x):
    with np.errstate(divide="ignore"):
        return -20 * np.log10(np.abs(x))


def between(f, y, x):
    """Linear interpolation, +inf beside a null; exact on samples."""
    x = np.atleast_1d(np.asarray(x, float))
    out = np.interp(x, f, np.where(np.isfinite(y), y, 0))
    for i, h in enumerate(x):
        hit = np.flatnonzero(f == h)
        if hit.size:
            out[i] = y[hit[0]]
        else:
            k = np.searchsorted(f, h)
            if not (np.isfinite(y[k - 1]) and np.isfinite(y[k])):
                out[i] = np.inf
    return out


def mag(loss):
    return 10 ** (-np.asarray(loss, float) / 20)


def loss_of(m):
    m = np.asarray(m, float)
    with np.errstate(divide="ignore", invalid="ignore"):
        return np.where(m > 0, -20 * np.log10(np.where(m > 0, m, 1)), np.inf)


def peak_floor(setup, n):
    if "noiseFloor" not in setup:
        return np.inf
    if setup.get("noiseFloorKind") == "rms":
        return setup["noiseFloor"] - 10 * math.log10(max(1.0, math.log(n)))
    return setup["noiseFloor"]


def transmission_ends(loss, setup, n):
    factor = 10 ** (setup.get("transmission", 0.0) / 20)
    floor = 10 ** (-peak_floor(setup, n) / 20)
    return loss_of(mag(loss) * factor + floor), loss_of(np.maximum(0, mag(loss) / factor - floor))


def reflection_ends(rl, through, setup):
    g = mag(rl)
    lin = lambda key: 10 ** (-setup[key] / 20) if key in setup else 0.0
    spread = lin("directivity") + (10 ** (setup.get("tracking", 0.0) / 20) - 1) * g + lin("sourceMatch") * g**2 + lin("loadMatch") * through
    return loss_of(np.minimum(1, g + spread)), loss_of(np.clip(g - spread, 0, 1))


# ---- limits --------------------------------------------------------------------------------------------------------
def limit_pieces(limit, band):
    """[(from, to, function)], each closed; a step appears in the piece on either side."""
    if not isinstance(limit, dict):
        return [(band[0], band[1], lambda x: np.full(np.shape(x), float(limit)))]
    axis = np.log if limit["scale"] == "log" else (lambda x: np.asarray(x, float))
    out = []
    for (h0, d0), (h1, d1) in zip(limit["points"], limit["points"][1:]):
        lo, hi = max(h0, band[0]), min(h1, band[1])
        if lo > hi:
            continue
        if h0 == h1:
            for d in (d0, d1):
                out.append((h0, h0, lambda x, d=d: np.full(np.shape(x), float(d))))
        else:
            out.append((lo, hi, lambda x, a=(h0, d0, h1, d1): a[1] + (a[3] - a[1]) * (axis(x) - axis(a[0])) / (axis(a[2]) - axis(a[0]))))
    return out


def evaluation_set(f, lo, hi):
    return np.unique(np.concatenate([[lo, hi], f[(f >= lo) & (f <= hi)]]))


def decide(low, mid, high):
    if low >= -1e-9:
        return "pass"
    if mid >= -1e-9:
        return "conditional-pass"
    return "conditional-fail" if high >= -1e-9 else "fail"


def first_least(x, y):
    """Least y and its lowest x among equals within 1e-9."""
    order = np.argsort(x, kind="stable")
    x, y = np.asarray(x)[order], np.asarray(y)[order]
    least = y.min()
    if np.isinf(least):
        return least, x[np.flatnonzero(y == least)[0]]
    return least, x[np.flatnonzero(y <= least + 1e-9)[0]]


def pointwise(f, limit, band, upper, read, ends):
    xs, vs, ls, los, his = [], [], [], [], []
    for lo, hi, fn in limit_pieces(limit, band):
        x = evaluation_set(f, lo, hi)
        v = read(x)
        a, b = ends(x, v)
        xs.append(x), vs.append(v), ls.append(fn(x)), los.append(a), his.append(b)
    x, v, lim, lo, hi = map(np.concatenate, (xs, vs, ls, los, his))
    m, l, u = (lim - v, lim - hi, lim - lo) if upper else (v - lim, lo - lim, hi - lim)
    margin, at = first_least(x, m)
    k = min((i for i in np.flatnonzero(x == at)), key=lambda i: m[i])
    lmin, lat = first_least(x, l)
    umin, uat = first_least(x, u)
    verdict = decide(lmin, margin, umin)
    return result(verdict, v[k], at, lim[k], margin, (lo[k], hi[k]), (lmin, umin), uat if verdict == "fail" else lat)


def result(verdict, value, frequency, limit, margin, interval, margin_interval, deciding):
    num = lambda x: "inf" if x == np.inf else "-inf" if x == -np.inf else float(x)
    return {
        "verdict": verdict,
        "value": num(value),
        "frequency": num(frequency),
        "limit": num(limit),
        "margin": num(margin),
        "interval": [num(e) for e in interval],
        "marginInterval": [num(e) for e in margin_interval],
        "decidingFrequency": num(deciding),
    }


# ---- requirements --------------------------------------------------------------------------------------------------
def expect(name, f, s, r, setup):
    n = len(f)
    s21, s12 = db(s[:, 1, 0]), db(s[:, 0, 1])
    trans = lambda y: ((lambda x: between(f, y, x)), (lambda x, v: transmission_ends(v, setup, n)))
    kind = r["kind"]
    if kind == "insertion-loss":
        read, ends = trans(s21)
        return pointwise(f, r["max"], r["band"], True, read, ends)
    if kind == "reverse-isolation":
        read, ends = trans(s12)
        return pointwise(f, r["min"], r["band"], False, read, ends)
    if kind == "return-loss":
        k = r["port"] - 1
        rl = db(s[:, k, k])
        read = lambda x: between(f, rl, x)
        through = lambda x: mag(between(f, s21, x)) * mag(between(f, s12, x))
        return pointwise(f, r["min"], r["band"], False, read, lambda x, v: reflection_ends(v, through(x), setup))
    if kind == "rejection":
        read, ends = trans(s21)
        if "relativeTo" not in r:
            return pointwise(f, r["min"], r["band"], False, read, ends)
        x = evaluation_set(f, *r["relativeTo"])
        ref = read(x)
        if "transmissionRelative" in setup:
            u = setup["transmissionRelative"]
            return pointwise(f, r["min"], r["band"], False, lambda x: read(x) - ref.min(), lambda x, v: (v - u, v + u))
        lo, hi = ends(x, ref)
        relative_ends = lambda x, v: (ends(x, v + ref.min())[0] - hi.min(), ends(x, v + ref.min())[1] - lo.min())
        return pointwise(f, r["min"], r["band"], False, lambda x: read(x) - ref.min(), relative_ends)
    if kind == "ripple":
        return spread(f, s21, r, setup, n)
    if kind in ("group-delay", "group-delay-variation"):
        return delay(f, s, r, setup)
    if kind == "phase-linearity":
        return linearity(f, s, r, setup)
    return crossings(f, s21, r, setup)


def spread(f, y, r, setup, n):
    lo, hi = r["band"]
    windows = [(lo, hi)]
    if "window" in r:
        w = r["window"]
        x = evaluation_set(f, lo, hi)
        starts = np.unique(np.concatenate([np.linspace(lo, hi - w, 5001), x, x - w, [hi - w]]))
        windows = [(a, a + w) for a in starts if lo <= a <= hi - w]
    rows = []
    for a, b in windows:
        x = evaluation_set(f, a, min(b, hi))
        v = between(f, y, x)
        value = v.max() - v.min()
        if "transmissionRelative" in setup:
            u = setup["transmissionRelative"]
            ends = (max(0, value - u), value + u)
        else:
            l, h = transmission_ends(v, setup, n)
            ends = (max(0, l.max() - h.min()), h.max() - l.min())
        rows.append((a if "window" in r else x[np.flatnonzero(v >= v.max() - 1e-9)[0]], value, *ends))
    x, v, l, h = map(np.array, zip(*rows))
    margin, at = first_least(x, r["max"] - v)
    k = np.flatnonzero(x == at)[0]
    lmin, lat = first_least(x, r["max"] - h)
    umin, uat = first_least(x, r["max"] - l)
    verdict = decide(lmin, margin, umin)
    return result(verdict, v[k], at, r["max"], margin, (l[k], h[k]), (lmin, umin), uat if verdict == "fail" else lat)


def delay(f, s, r, setup):
    phase = np.unwrap(np.angle(s[:, 1, 0]))
    lo, hi = r["band"]
    x = evaluation_set(f, lo, hi)
    if "aperture" in r:
        a = r["aperture"]
        tau = -(np.interp(x + a / 2, f, phase) - np.interp(x - a / 2, f, phase)) / (2 * math.pi * a)
    else:
        t = np.empty(len(f))
        t[1:-1] = -(phase[2:] - phase[:-2]) / (2 * math.pi * (f[2:] - f[:-2]))
        t[0] = -(phase[1] - phase[0]) / (2 * math.pi * (f[1] - f[0]))
        t[-1] = -(phase[-1] - phase[-2]) / (2 * math.pi * (f[-1] - f[-2]))
        tau = np.interp(x, f, t)
    u = setup.get("groupDelay", 0.0)
    if r["kind"] == "group-delay":
        k = int(np.argmax(tau))
        value, ends = tau[k], (tau[k] - u, tau[k] + u)
    else:
        k = int(np.argmax(tau))
        value = tau.max() - tau.min()
        ends = (max(0, value - math.sqrt(2) * u), value + math.sqrt(2) * u)
    m, l, h = r["max"] - value, r["max"] - ends[1], r["max"] - ends[0]
    return result(decide(l, m, h), value, x[k], r["max"], m, ends, (l, h), x[k])


def linearity(f, s, r, setup):
    phase = np.degrees(np.unwrap(np.angle(s[:, 1, 0])))
    inside = (f >= r["band"][0]) & (f <= r["band"][1])
    x, y = f[inside], phase[inside]
    c = x.mean()
    line = np.polyfit((x - c) / 1e6, y, 1)
    off = np.abs(y - np.polyval(line, (x - c) / 1e6))
    k = int(np.argmax(off))
    u = setup.get("phase", 0.0)
    ends = (max(0, off[k] - u), off[k] + u)
    m, l, h = r["max"] - off[k], r["max"] - ends[1], r["max"] - ends[0]
    return result(decide(l, m, h), off[k], x[k], r["max"], m, ends, (l, h), x[k])


def edges(f, y, level, within):
    """First crossings outwards of the level below the peak: a scan of a dense grid, then interp on the bracket."""
    inside = np.flatnonzero((f >= within[0]) & (f <= within[1]))
    p = inside[np.argmin(y[inside])]
    target = y[p] + level
    dense = np.unique(np.concatenate([np.linspace(f[0], f[-1], 30001), f]))
    yd = np.interp(dense, f, y)
    j = int(np.flatnonzero(dense == f[p])[0])
    up = next(i for i in range(j, len(dense)) if yd[i] >= target)
    down = next(i for i in range(j, -1, -1) if yd[i] >= target)
    upper = np.interp(target, [yd[up - 1], yd[up]], [dense[up - 1], dense[up]])
    lower = np.interp(target, [yd[down + 1], yd[down]], [dense[down + 1], dense[down]])
    return lower, upper


def crossings(f, y, r, setup):
    within = r.get("within", (f[0], f[-1]))
    d = setup.get("transmissionRelative", 2 * setup.get("transmission", 0.0))
    levels = r["levels"] if "levels" in r else [r["level"]]
    e = [[edges(f, y, level + k * d, within) for k in (-1, 0, 1)] for level in levels]
    width = lambda pair: pair[1] - pair[0]
    centre = sum(e[0][1]) / 2
    if r["kind"] == "centre-frequency":
        ends = ((e[0][2][0] + e[0][0][1]) / 2, (e[0][0][0] + e[0][2][1]) / 2)
        away = lambda c: abs(c - r["nominal"])
        candidates = np.linspace(ends[0], ends[1], 200001)
        m = r["tolerance"] - away(centre)
        l = r["tolerance"] - max(away(ends[0]), away(ends[1]))
        h = r["tolerance"] - (0.0 if ends[0] <= r["nominal"] <= ends[1] else np.abs(candidates - r["nominal"]).min())
        return result(decide(l, m, h), centre, centre, r["tolerance"], m, ends, (l, h), centre)
    if r["kind"] == "bandwidth":
        v = width(e[0][1])
        ends = (width(e[0][0]), width(e[0][2]))
        sides = []
        if "min" in r:
            sides.append((v - r["min"], ends[0] - r["min"], ends[1] - r["min"], r["min"]))
        if "max" in r:
            sides.append((r["max"] - v, r["max"] - ends[1], r["max"] - ends[0], r["max"]))
        m, l, h = (min(side[k] for side in sides) for k in range(3))
        lim = min(sides)[3]
        return result(decide(l, m, h), v, centre, lim, m, ends, (l, h), centre)
    v = width(e[1][1]) / width(e[0][1])
    ends = (width(e[1][0]) / width(e[0][2]), width(e[1][2]) / width(e[0][0]))
    m, l, h = r["max"] - v, r["max"] - ends[1], r["max"] - ends[0]
    return result(decide(l, m, h), v, centre, r["max"], m, ends, (l, h), centre)


# ---- cases ---------------------------------------------------------------------------------------------------------
PASSBAND = [1.9253e9, 1.9747e9]
ASSUMED = {"transmission": 0.1, "directivity": 36, "sourceMatch": 32, "loadMatch": 36, "tracking": 0.1, "noiseFloor": 90, "noiseFloorKind": "peak"}


def make_requirements():
    slope = {"points": [[1.80e9, 60], [1.8502e9, 40], [1.8502e9, 30], [1.8901e9, 5]], "scale": "linear"}
    log_slope = {"points": [[2.00e9, 5], [2.0303e9, 30], [2.10e9, 62]], "scale": "log"}
    return [
        {"kind": "insertion-loss", "band": PASSBAND, "max": 1.6},
        {"kind": "insertion-loss", "band": PASSBAND, "max": {"points": [[1.92e9, 2.6], [1.9333e9, 1.4], [1.9667e9, 1.4], [1.98e9, 2.6]], "scale": "linear"}},
        {"kind": "insertion-loss", "band": [1.9447e9, 1.9447e9], "max": 0.9},
        {"kind": "ripple", "band": PASSBAND, "max": 0.9},
        {"kind": "ripple", "band": PASSBAND, "max": 0.35, "window": 7.3e6},
        {"kind": "ripple", "band": [1.8123e9, 2.0877e9], "max": 40, "window": 21.7e6},
        {"kind": "rejection", "band": [1.8003e9, 1.8505e9], "min": 44.5},
        {"kind": "rejection", "band": [2.0511e9, 2.0999e9], "min": 38},
        {"kind": "rejection", "band": [1.8003e9, 1.8505e9], "min": 43.8, "relativeTo": PASSBAND},
        {"kind": "rejection", "band": [1.8013e9, 1.8899e9], "min": slope},
        {"kind": "rejection", "band": [1.8502e9, 1.8801e9], "min": slope},
        {"kind": "rejection", "band": [2.0013e9, 2.0989e9], "min": log_slope},
        {"kind": "return-loss", "port": 1, "band": PASSBAND, "min": 15},
        {"kind": "return-loss", "port": 2, "band": PASSBAND, "min": {"points": [[1.92e9, 10], [1.95e9, 18], [1.98e9, 10]], "scale": "linear"}},
        {"kind": "reverse-isolation", "band": [2.0511e9, 2.0999e9], "min": 38},
        {"kind": "group-delay", "band": PASSBAND, "max": 25e-9},
        {"kind": "group-delay", "band": PASSBAND, "max": 25e-9, "aperture": 2.7e6},
        {"kind": "group-delay-variation", "band": PASSBAND, "max": 10e-9},
        {"kind": "phase-linearity", "band": PASSBAND, "max": 14},
        {"kind": "centre-frequency", "level": 3, "nominal": 1.95e9, "tolerance": 1e6},
        {"kind": "bandwidth", "level": 3, "min": 66e6, "max": 80e6},
        {"kind": "bandwidth", "level": 1, "min": 66e6, "within": [1.93e9, 1.97e9]},
        {"kind": "shape-factor", "levels": [3, 30], "max": 1.9},
    ]


SETUPS = {
    "none": {},
    "assumed": ASSUMED,
    "noisy": {"transmission": 0.15, "noiseFloor": 58, "noiseFloorKind": "rms", "directivity": 26, "loadMatch": 20, "groupDelay": 1e-9, "phase": 1.5},
    "relative": {"transmission": 0.2, "transmissionRelative": 0.05, "noiseFloor": 75, "directivity": 40, "sourceMatch": 35},
}


def main():
    networks = make_networks()
    cases = []
    for name in ("fine", "uneven", "null", "clean-75-60"):
        f, s, _ = networks[name]
        for r in make_requirements():
            if name == "null" and r["kind"] in ("group-delay", "group-delay-variation", "phase-linearity", "centre-frequency", "bandwidth", "shape-factor"):
                continue  # numpy.unwrap would invent a phase at the null
            if name == "null" and "window" in r:
                continue  # infinite from just above a sample on: the first such window has no start of its own
            for label, setup in SETUPS.items():
                source = "clean" if name == "clean-75-60" else name
                case = {"network": source, "requirement": {"id": f"{len(cases) + 1}", **r}, "setup": setup, "setupName": label}
                if name == "clean-75-60":
                    case["impedance"] = [75, 60]
                case["expected"] = expect(name, f, s, r, setup)
                cases.append(case)
    trace = lambda x: {"re": x.real.tolist(), "im": x.imag.tolist()}
    stored = {
        name: {"frequency": f.tolist(), "s11": trace(s[:, 0, 0]), "s21": trace(s[:, 1, 0]), "s12": trace(s[:, 0, 1]), "s22": trace(s[:, 1, 1]), "referenceImpedance": z}
        for name, (f, s, z) in networks.items()
        if name != "clean-75-60"
    }
    about = "Written by recipes/make_evaluation_truth.py; numpy only, independent of the product's code."
    OUT.write_text(json.dumps({"about": about, "numpy": np.__version__, "networks": stored, "cases": cases}) + "\n")
    counts = {}
    for case in cases:
        counts[case["expected"]["verdict"]] = counts.get(case["expected"]["verdict"], 0) + 1
    print(len(cases), "cases", counts, OUT.stat().st_size, "bytes")


main()
