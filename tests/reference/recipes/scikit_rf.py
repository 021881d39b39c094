# Brings in Debian's scikit-rf 0.15.4, which needs numpy's old names, and keeps its messages off standard output.
import contextlib
import sys

import numpy

numpy.complex, numpy.float, numpy.int, numpy.bool = complex, float, int, bool

with contextlib.redirect_stdout(sys.stderr):
    import skrf  # noqa: E402


def plain(matrices):
    """An array (points, 2, 2) as nested lists of {re, im}."""
    return [[[{"re": float(x.real), "im": float(x.imag)} for x in row] for row in matrix] for matrix in matrices]


def from_plain(matrices):
    """The other way round."""
    return numpy.array([[[complex(x["re"], x["im"]) for x in row] for row in matrix] for matrix in matrices])
