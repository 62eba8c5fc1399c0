#!/usr/bin/env python3
"""Makes resonance_scipy.json: synthetic dwells and what scipy.optimize.curve_fit finds in them.

Run with Debian's python3-scipy: /usr/bin/python3 make_resonance_scipy.py
The formulas here are written out anew, in complex numbers, so that they check ours.
"""
import json
import os

import numpy as np
import scipy
from scipy.optimize import brentq, curve_fit, least_squares


def response(kind, f, gain, fn, damping):
    r = f / fn
    excitation, damping_kind = kind
    g = 2 * damping * r if damping_kind == "viscous" else damping * np.ones_like(r)
    bottom = 1 - r**2 + 1j * g
    top = {"force": 1, "spring-end": 1, "base": 1 + 1j * g, "base-relative": r**2, "unbalance": r**2}[excitation]
    return gain * top / bottom


SETS = [
    # name, model, truth (gain, fn, damping), frequencies, mode, absolute_sigma
    ("mount on a shaker, amplitude only", ("force", "viscous"), (0.31, 11.7, 0.052), np.linspace(8, 15, 11), "amplitude", True),
    ("unbalance, scatter decides", ("unbalance", "viscous"), (1.9, 6.45, 0.021), np.linspace(5.6, 7.4, 13), "amplitude", False),
    ("isolator on a slip table, with lag", ("base", "viscous"), (1.0, 3.21, 0.11), np.linspace(1.9, 6.2, 12), "complex", True),
    ("rubber mount, relative motion, with lag", ("base-relative", "structural"), (2.5, 21.3, 0.17), np.linspace(15, 30, 14), "complex", False),
    ("steel leaf spring, very lightly damped", ("force", "viscous"), (0.05, 2.2104, 0.0019), 2.2104 * (1 + 0.0019 * np.array([-9, -4, -2, -1, -0.4, 0.3, 1, 2.2, 5, 10])), "amplitude", True),
]


def profile_bounds(residuals, best, cov, rise):
    """Values of each parameter at which chi2, minimised over the others, has risen by `rise`: Brent's root search."""
    lowest = np.sum(residuals(best) ** 2)
    bounds = []
    for j in range(len(best)):
        others = [i for i in range(len(best)) if i != j]

        def excess(value):
            def held(q):
                p = np.array(best)
                p[j] = value
                p[others] = q
                return residuals(p)
            start = best[others] + cov[others, j] / cov[j, j] * (value - best[j])
            found = least_squares(held, start, x_scale=np.abs(best[others]), xtol=1e-14, ftol=1e-14, gtol=1e-14)
            return 2 * found.cost - lowest - rise
        reach = np.sqrt(rise * cov[j, j])
        bounds.append([brentq(excess, best[j] + side * 0.3 * reach, best[j] + side * 2 * reach, xtol=1e-12 * abs(best[j]))
                       for side in (-1, 1)])
    return bounds


def main():
    rng = np.random.default_rng(730)
    out = []
    for name, kind, truth, f, mode, absolute in SETS:
        exact = response(kind, f, *truth)
        u_amp = np.round(0.004 * np.max(abs(exact)) + 0.006 * abs(exact), 6)
        u_lag = np.full(len(f), 0.012)
        f = np.round(f, 6)
        exact = response(kind, f, *truth)
        amp = np.round(abs(exact) + u_amp * rng.standard_normal(len(f)), 6)
        lag = np.round(-np.angle(exact) + u_lag * rng.standard_normal(len(f)), 6)
        if mode == "amplitude":
            model = lambda x, *p: abs(response(kind, f, *p))
            y, u = amp, u_amp
        else:
            model = lambda x, *p: np.concatenate([abs(response(kind, f, *p)), -np.angle(response(kind, f, *p))])
            y, u = np.concatenate([amp, lag]), np.concatenate([u_amp, u_lag])
        best, cov = curve_fit(model, np.zeros(len(y)), y, p0=np.array(truth) * [1.02, 1.0003, 0.97], sigma=u,
                              absolute_sigma=absolute, xtol=1e-14, ftol=1e-14, gtol=1e-14, maxfev=20000)
        residuals = lambda p: (model(None, *p) - y) / u
        chi2 = float(np.sum(residuals(best) ** 2))
        bounds = profile_bounds(residuals, best, cov, 1.959963984540054**2) if absolute else None
        out.append({
            "name": name, "excitation": kind[0], "damping": kind[1], "mode": mode, "absolute_sigma": absolute,
            "truth": list(truth), "driveHz": f.tolist(), "amplitude": amp.tolist(), "u_amplitude": u_amp.tolist(),
            "lag_rad": lag.tolist() if mode == "complex" else None, "u_lag_rad": u_lag.tolist() if mode == "complex" else None,
            "fit": {"parameters": best.tolist(), "covariance": cov.tolist(), "chi2": chi2, "profile_95": bounds},
        })
    here = os.path.dirname(os.path.abspath(__file__))
    with open(os.path.join(here, "resonance_scipy.json"), "w") as file:
        json.dump({"source": "scipy %s optimize.curve_fit, numpy default_rng(730); made by make_resonance_scipy.py" % scipy.__version__,
                   "parameters": ["static gain", "natural frequency Hz", "damping ratio or loss factor"], "sets": out}, file, indent=1)
        file.write("\n")


main()
