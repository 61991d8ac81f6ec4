"""Writes chi-square-many.json: quantiles of chi-square with many degrees of freedom, where series and expansions part.

Run: python3 test/reference/scripts/chi_square_many.py > test/reference/chi-square-many.json
"""
import json

import scipy
from scipy import stats

DOF = [900, 1499, 1501, 1754.4, 2254.1, 3000, 15600.5, 1e5, 1e6]
P = [0.001, 0.0918, 0.25, 0.5, 0.75, 0.95, 0.999, 1 - 1e-6, 1 - 1e-9]

print(
    json.dumps(
        {
            "id": "chi2.many",
            "quantity": "chi-square quantiles; rows dof, columns p",
            "inputs": {"dof": DOF, "p": P},
            "expected": [[float(stats.chi2.ppf(p, dof)) for p in P] for dof in DOF],
            "tolerance": {"rel": 1e-9},
            "source": "scipy.stats.chi2.ppf",
            "provenance": f"computed with scipy {scipy.__version__}",
        }
    )
)
