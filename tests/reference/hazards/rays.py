"""Makes rays.json for refraction.test.ts and arrival.test.ts: wave rays over a plane beach by the ray equations, with scipy.

Run: python3 rays.py > rays.json (numpy 2.4, scipy 1.17).
The bed slopes evenly from the first depth to the last over 2000 m. Nothing of Snell's law is used: the angle comes from
d(angle)/ds = -(1/c) dc/dn, the height from the spacing of two neighbouring rays and the flux of energy, the time from ds/Cg and ds/c.
c by a root finder on the dispersion relation. x is onshore, y along the shore, g = 9.81.
"""
import json
import numpy as np
from scipy.integrate import solve_ivp, quad
from scipy.optimize import brentq

g, length = 9.81, 2000.0


def speeds(period, depth):
    w = 2 * np.pi / period
    k = brentq(lambda k: g * k * np.tanh(k * depth) - w * w, 1e-6, 10, xtol=1e-15, rtol=1e-14)
    return w / k, w / k * 0.5 * (1 + 2 * k * depth / np.sinh(2 * k * depth))


def trace(angle, period, first, last):
    depth = lambda x: first + (last - first) * x / length

    def step(_s, state):
        x, _y, a = state
        c, _ = speeds(period, depth(x))
        h = 0.01
        dcdx = (speeds(period, depth(x + h))[0] - speeds(period, depth(x - h))[0]) / (2 * h)
        return [np.cos(a), np.sin(a), np.sin(a) / c * dcdx]

    reach = lambda _s, state: state[0] - length
    reach.terminal = True
    path = solve_ivp(step, [0, 20 * length], [0, 0, angle], events=reach, rtol=1e-10, atol=1e-10)
    return path.y[:, -1]


out = []
for degrees, period, first, last in [(30, 10, 20, 5), (-20, 12.5, 11.6, 3), (55, 8, 15, 2), (5, 16, 30, 4), (40, 6, 12, 6)]:
    a = np.radians(degrees)
    x, y, end = trace(a, period, first, last)
    # Neighbouring rays start side by side along the shore and stay a copy shifted along it, so their spacing is cos(angle) of it.
    spacing = np.cos(end) / np.cos(a)
    ratio = np.sqrt(speeds(period, first)[1] / speeds(period, last)[1] / spacing)
    out.append({"angle": degrees, "period": period, "from": first, "to": last, "endAngle": float(np.degrees(end)), "heightRatio": float(ratio)})

# Arrival, 12 m to 4 m evenly over 1500 m, T = 10 s: the integral of dx / Cg and dx / c by adaptive quadrature.
depth = lambda x: 12 - 8 * x / 1500
arrival = {
    "byGroup": quad(lambda x: 1 / speeds(10, depth(x))[1], 0, 1500)[0],
    "byCrest": quad(lambda x: 1 / speeds(10, depth(x))[0], 0, 1500)[0],
}
print(json.dumps({"rays": out, "arrival": arrival}, indent=1))
