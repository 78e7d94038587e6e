# Makes transients.json: three transients with noise, and what scipy's curve_fit finds in them.
# The model is written anew here: two bodies with constant coefficients, solved by the matrix exponential of scipy.linalg,
# so that neither the equations' solution nor the least squares are the project's. Run once: python3 two_body_reference.py
import json

import numpy as np
import scipy
from scipy.linalg import expm
from scipy.optimize import curve_fit

CASES = [
    # name, interval, before, after, pulse, power, body, liquid, link, boundary, drift, noise, seed
    ("a strong link, a fast boundary", 0.5, 100, 200, 10, 8e-7, 2e-4, 6e-4, 1.2e-5, 2e-3, -1e-6, 2e-5, 1),
    ("a weak link, a slow boundary", 0.5, 100, 250, 10, 9e-7, 2e-4, 6e-4, 5e-8, 8e-6, 2e-7, 1e-5, 2),
    ("both", 0.25, 80, 240, 8, 1e-6, 3e-4, 5e-4, 4e-6, 3e-5, 1e-6, 2e-5, 3),
]
T0 = 0.4


def response(t, C, link, boundary_s, drift, start, body, pulse, power):
    """Body temperature at times t; the liquid rests in the drift at first."""
    liquid = C - body
    G = body * liquid / (C * boundary_s)
    A = np.array([[-(link + G) / body, G / body], [G / liquid, -G / liquid]])
    # Net heat without the heater: what keeps the drift going at the start.
    leak = drift * C
    x = np.array([0.0, -liquid * drift / G])

    def advance(x, h, heat):
        wide = np.zeros((3, 3))
        wide[:2, :2] = A
        wide[0, 2] = heat / body
        return (expm(wide * h) @ np.append(x, 1.0))[:2]

    out = []
    now = t[0]
    for to in t:
        for edge, heat in ((0.0, leak), (pulse, leak + power), (np.inf, leak)):
            if now >= edge:
                continue
            h = min(edge, to) - now
            if h > 0:
                x = advance(x, h, heat)
                now = min(edge, to)
            if now >= to:
                break
        out.append(start + x[0])
    return np.array(out)


transients = []
for name, dt, before, after, pulse, power, body, liquid, link, boundary, drift, noise, seed in CASES:
    rng = np.random.default_rng(seed)
    t = np.arange(-before, pulse + after, dt) + 0.37 * dt
    tau = body * liquid / ((body + liquid) * boundary)
    truth = (body + liquid, link, tau, drift, T0)
    T = np.round(response(t, *truth, body, pulse, power) + noise * rng.standard_normal(len(t)), 8)
    fixed = lambda t, C, link, tau, drift, start: response(t, C * 1e-4, link * 1e-6, tau, drift * 1e-6, start, body, pulse, power)
    guess = (10 * (body + liquid) * 1e3, link * 1e6, tau, drift * 1e6, T0)
    value, covariance = curve_fit(fixed, t, T, p0=guess, sigma=np.full(len(t), noise), absolute_sigma=True, xtol=1e-12, ftol=1e-12)
    u = np.sqrt(np.diag(covariance))
    transients.append(
        {
            "name": name,
            "interval_s": dt,
            "duration_s": pulse,
            "power_W": power,
            "body_J_per_K": body,
            "noise_K": noise,
            "time_s": [round(float(x), 6) for x in t],
            "temperature_K": [float(x) for x in T],
            "fit": {
                "C_J_per_K": value[0] * 1e-4,
                "u_C_J_per_K": u[0] * 1e-4,
                "link_W_per_K": value[1] * 1e-6,
                "u_link_W_per_K": u[1] * 1e-6,
                "boundary_s": value[2],
                "u_boundary_s": u[2],
            },
        }
    )
    print(name, value, u)
with open("transients.json", "w") as out:
    json.dump({"made_by": f"two_body_reference.py, scipy {scipy.__version__}, numpy {np.__version__}", "transients": transients}, out)
    out.write("\n")
