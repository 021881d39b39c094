# Makes the files of tests/fixtures that the upload must refuse: not Touchstone, three ports, empty, decimal comma.
"""Usage: /usr/bin/python3 make_bad_input_fixtures.py [output root]      (default: the project's root)"""

import os
import sys

import numpy

ROOT = os.path.normpath(os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "..", ".."))


def not_touchstone():
    """Head and tail of a PDF around 4,096 random bytes (seed 7), NUL and line ends among them."""
    stream = numpy.random.default_rng(7).bytes(4096)
    head = b"%PDF-1.7\n%\xe2\xe3\xcf\xd3\n1 0 obj\n<< /Length 4096 /Filter /FlateDecode >>\nstream\n"
    return head + stream + b"\nendstream\nendobj\ntrailer\n<< /Size 2 >>\n%%EOF\n"


def three_port():
    """Version 1 three-port data, one matrix row a line: a star junction of three 50 ohm lines, Sii = -1/3, Sij = 2/3, with
    5 mm of air line at each port."""
    lines = ["! Three-port star junction", "# GHz S MA R 50"]
    for step in range(11):
        frequency = 1.9 + 0.01 * step
        phase = -360 * frequency * 1e9 * 2 * 0.005 / 299792458
        for row in range(3):
            cells = [
                f"0.333333 {phase - 180:.3f}" if row == column else f"0.666667 {phase:.3f}" for column in range(3)
            ]
            lines.append((f"{frequency:.3f} " if row == 0 else "      ") + " ".join(cells))
    return ("\n".join(lines) + "\n").encode("ascii")


def decimal_comma():
    """Eleven points of a matched 0.5 dB pad, every number with a comma for the decimal point, as a spreadsheet under a
    European locale writes it."""
    lines = ["! Exported from a spreadsheet", "# MHz S DB R 50"]
    for step in range(11):
        cells = [f"{1920 + 6 * step:.1f}"]
        for level in (-32.0, -0.5, -0.5, -32.0):
            cells += [f"{level:.2f}", f"{-12.5 * step:.1f}"]
        lines.append(" ".join(cells).replace(".", ","))
    return ("\n".join(lines) + "\n").encode("ascii")


def main():
    root = sys.argv[1] if len(sys.argv) > 1 else ROOT
    folder = os.path.join(root, "tests/fixtures")
    os.makedirs(folder, exist_ok=True)
    for name, content in (
        ("not-touchstone.s2p", not_touchstone()),
        ("three-port.s3p", three_port()),
        ("three-port-renamed.s2p", three_port()),
        ("empty.s2p", b""),
        ("decimal-comma.s2p", decimal_comma()),
    ):
        with open(os.path.join(folder, name), "wb") as file:
            file.write(content)
        print(f"tests/fixtures/{name}", len(content))


if __name__ == "__main__":
    main()
