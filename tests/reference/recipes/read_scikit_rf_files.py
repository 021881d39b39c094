# Reads every two-port file that python3-scikit-rf ships with scikit-rf itself and prints the numbers as JSON.
"""Usage: /usr/bin/python3 read_scikit_rf_files.py

Prints [{path, name, f_hz, s, z0}]: path on this machine, name within the package, s[k][i][j], z0[k][port] as {re, im}.
"""

import contextlib
import json
import os
import sys
import warnings

from scikit_rf import plain, skrf

ROOT = os.path.dirname(os.path.abspath(skrf.__file__))


def two_port_files():
    for folder, _, names in sorted(os.walk(ROOT)):
        for name in sorted(names):
            if name.lower().endswith((".s2p", ".ts")):
                yield os.path.join(folder, name)


def read(path):
    network = skrf.Network(path)
    return {
        "path": path,
        "name": os.path.relpath(path, ROOT),
        "f_hz": [float(f) for f in network.f],
        "s": plain(network.s),
        "z0": [[{"re": float(z.real), "im": float(z.imag)} for z in row] for row in network.z0],
    }


if __name__ == "__main__":
    warnings.simplefilter("ignore")
    with contextlib.redirect_stdout(sys.stderr):
        networks = [read(path) for path in two_port_files()]
    json.dump(networks, sys.stdout)
