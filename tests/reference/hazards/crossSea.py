"""Makes crossSea.json for crossSea.test.ts: energy across and along an axis by integrating spreading functions with numpy.

Run: python3 crossSea.py > crossSea.json (numpy 2.4, scipy 1.17).
Spreading is cos^2s((theta - theta0) / 2) with s = 2 / sigma^2 - 1, integrated by the trapezoidal rule on 72 000 directions; nothing of the
program's closed forms is used. Angles are radians anticlockwise from east.
"""
import json
import numpy as np

theta = np.linspace(-np.pi, np.pi, 72_001)
degree = np.pi / 180


def spreading(mean, spread):
    s = 2 / spread**2 - 1
    d = np.abs(np.cos((theta - mean) / 2)) ** (2 * s)
    return d / np.trapezoid(d, theta)


def from_east(bearing):
    return (90 - bearing) * degree


def share_across(mean, spread, axis):
    return float(np.trapezoid(spreading(mean, spread) * np.sin(theta - axis) ** 2, theta))


shares = [
    {"toward": toward, "spread": spread, "axis": axis, "across": share_across(from_east(toward), spread * degree, from_east(axis))}
    for toward, spread, axis in [
        (61, 13, 38), (108, 35, 38), (38, 13, 38), (38, 0.5, 38), (128, 20, 38), (218, 40, 38), (350, 70, 190), (10, 60, 300), (45, 24.4, 0),
    ]
]

# Two systems over frequency: JONSWAP shapes (gamma 3.3) of given height, period, heading and spread.
frequency = np.linspace(0.03, 0.5, 4701)


def jonswap(height, period):
    fp = 1 / period
    sigma = np.where(frequency <= fp, 0.07, 0.09)
    s = frequency**-5.0 * np.exp(-1.25 * (frequency / fp) ** -4.0) * 3.3 ** np.exp(-((frequency / fp - 1) ** 2) / (2 * sigma**2))
    return s * (height / 4) ** 2 / np.trapezoid(s, frequency)


swell, wind_sea, axis = (1.9, 12.5, 61, 13), (0.9, 5.6, 108, 35), 38
across = along = 0
for height, period, toward, spread in (swell, wind_sea):
    density = jonswap(height, period)[:, None] * spreading(from_east(toward), spread * degree)[None, ::40]
    coarse = theta[::40]
    across += np.trapezoid(np.trapezoid(density * np.sin(coarse - from_east(axis)) ** 2, coarse), frequency)
    along += np.trapezoid(np.trapezoid(density * np.cos(coarse - from_east(axis)) ** 2, coarse), frequency)

print(json.dumps({
    "shares": shares,
    "sea": {"across": float(4 * np.sqrt(across)), "along": float(4 * np.sqrt(along))},
}, indent=1))
