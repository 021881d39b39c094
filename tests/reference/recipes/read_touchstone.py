# Reads one Touchstone file with scikit-rf and prints its numbers as JSON.
"""Usage: /usr/bin/python3 read_touchstone.py FILE       prints {path, name, f_hz, s, z0}, see read_scikit_rf_files.py"""

import contextlib
import json
import sys

from read_scikit_rf_files import read

if __name__ == "__main__":
    with contextlib.redirect_stdout(sys.stderr):
        network = read(sys.argv[1])
    json.dump(network, sys.stdout)
