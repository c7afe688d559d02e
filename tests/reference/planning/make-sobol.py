"""Writes sobol.json: the first 64 points of Sobol's sequence in 10 dimensions, not scrambled, from SciPy.

Run with Debian's python3-scipy 1.10.1: /usr/bin/python3 make-sobol.py > sobol.json
"""

import json

import scipy
from scipy.stats import qmc

points = qmc.Sobol(d=10, scramble=False).random(64)
print(
    json.dumps(
        {
            "package": "scipy.stats.qmc.Sobol",
            "version": scipy.__version__,
            "made": "2026-12-01",
            "digits": "exact: multiples of 1/64",
            "points": points.tolist(),
        }
    )
)
