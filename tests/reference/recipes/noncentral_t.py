# Distribution figures by scipy: noncentral t, tolerance factors by its quantile, and the functions they rest on.
# Reads {"noncentral": [[t, degrees, noncentrality]], "factors": [[n, p, confidence]], "log_gamma": [x],
# "beta": [[x, a, b]], "normal": [z], "quantile": [p], "shares": [[n, mean over deviation, confidence]]}, each of them where
# it is wanted; prints the figures under the same names.
import json
import sys
import warnings

import numpy
from scipy import optimize, special, stats

warnings.simplefilter("ignore")  # where boost's series leaves the range of doubles it says so, and clips
asked = json.load(sys.stdin)


def columns(name):
    return numpy.array(asked[name], dtype=float).T


def factors():
    n, p, confidence = columns("factors")
    return stats.nct.ppf(confidence, n - 1, stats.norm.ppf(p) * numpy.sqrt(n)) / numpy.sqrt(n)


def share(n, ratio, confidence):
    """The share whose exact tolerance factor is the ratio."""
    excess = lambda z: stats.nct.cdf(ratio * numpy.sqrt(n), n - 1, z * numpy.sqrt(n)) - confidence
    return stats.norm.cdf(optimize.brentq(excess, -4.7, 4.7, xtol=1e-13))


def beta():
    x, a, b = columns("beta")
    return special.betainc(a, b, x)


figures = {
    "noncentral": lambda: stats.nct.cdf(*columns("noncentral")),
    "factors": factors,
    "log_gamma": lambda: special.gammaln(asked["log_gamma"]),
    "beta": beta,
    "normal": lambda: stats.norm.cdf(asked["normal"]),
    "quantile": lambda: stats.norm.ppf(asked["quantile"]),
    "shares": lambda: [share(*row) for row in asked["shares"]],
}
print(json.dumps({name: numpy.asarray(figures[name]()).tolist() for name in asked}))
