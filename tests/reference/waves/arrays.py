"""Makes arrays.json for arrays.test.ts: what a spread sea does to an array, by numpy and scipy.

Run: python3 arrays.py > arrays.json (numpy 2.4, scipy 1.17).
Coherence matrix by scipy's adaptive quadrature over cos^2s (Longuet-Higgins, Cartwright & Smith 1963); conventional beam (Barber 1963),
Capon (1969) and IMLM (Pawka 1983) by numpy's linear algebra; the Cramer-Rao bound by Slepian (1954) and Bangs (1971) with central
differences of the quadrature; conditional means and quantiles of Rayleigh's distribution by scipy.stats.
"""
import json
import numpy as np
from scipy import integrate, optimize, stats

g = 9.81
positions = np.array([[-14.0, -9.0], [13.0, -12.0], [-2.0, 19.0], [3.0, 1.0], [21.0, 9.0]])
x, y = positions[:, 0], positions[:, 1]
m = len(positions)


def wave_number(omega, depth):
    return optimize.brentq(lambda k: g * k * np.tanh(k * depth) - omega**2, 1e-6, 50, xtol=1e-15, rtol=1e-14)


def over_directions(spread, function):
    """Integral of D(delta) function(delta) by quadrature, D normalised likewise."""
    s = 2 / spread**2 - 1
    density = lambda d: np.abs(np.cos(d / 2)) ** (2 * s)
    edge = min(np.pi, 9 * spread)
    total = integrate.quad(density, -edge, edge, epsabs=1e-13, epsrel=1e-12, limit=400)[0]
    part = lambda p: integrate.quad_vec(lambda d: density(d) * p(function(d)), -edge, edge, epsabs=1e-11, epsrel=1e-11)[0]
    return (part(np.real) + 1j * part(np.imag)) / total


def coherences(k, direction, spread):
    def outer(d):
        a = np.exp(-1j * k * (x * np.cos(direction + d) + y * np.sin(direction + d)))
        return np.outer(a, a.conj())

    return over_directions(spread, outer)


k, direction, spread, noise = 0.11, np.deg2rad(35.0), np.deg2rad(22.0), 0.05
gamma = coherences(k, direction, spread)
matrix = gamma + noise * np.eye(m)
angles = 2 * np.pi * np.arange(72) / 72
steer = np.exp(-1j * k * (np.outer(np.cos(angles), x) + np.outer(np.sin(angles), y)))
share = lambda power: power / power.sum()
form = lambda a: np.real(np.einsum('di,ij,dj->d', steer.conj(), a, steer))
capon = lambda c: share(1 / form(np.linalg.inv(c)))

target = capon(matrix)
found = target
steps = 0
for steps in range(1, 41):
    model = np.einsum('d,di,dj->ij', found, steer, steer.conj()) + noise * np.eye(m)
    off = 1 - capon(model) / target
    if (found * np.abs(off)).sum() < 0.03:
        break
    found = share(found * np.maximum(0.2, 1 + off / 2))

# The Cramer-Rao bound of one spread train.
depth, seconds, peak, height, sensor_noise = 11.0, 1200.0, 0.11, 1.3, 0.02
jonswap = lambda f: f**-5 * np.exp(-1.25 * (peak / f) ** 4) * 3.3 ** np.exp(
    -0.5 * ((f / peak - 1) / (0.07 if f <= peak else 0.09)) ** 2)
scale = height**2 / 16 / integrate.quad(jonswap, 0.3 * peak, 8 * peak, points=[peak], limit=400)[0]


def information(f):
    """Information of direction, ln speed and ln spread per Hz and second, the density at f unknown."""
    k = wave_number(2 * np.pi * f, depth)
    h = 1e-5
    s = scale * jonswap(f)
    at = lambda a, b, c: coherences(k * np.exp(b), direction + a, spread * np.exp(c))
    change = [at(0, 0, 0)] + [
        (at(*(h * e)) - at(*(-h * e))) / (2 * h) for e in np.eye(3)]
    inverse = np.linalg.inv(s * change[0] + sensor_noise * np.eye(m))
    p = [inverse @ (s * c) for c in change]
    j = np.array([[np.real(np.trace(a @ b)) for b in p] for a in p])
    return j[1:, 1:] - np.outer(j[1:, 0], j[0, 1:]) / j[0, 0]


nodes, weights = np.polynomial.legendre.leggauss(24)
middle, half = 1.3 * peak, 0.6 * peak
total = sum(half * w * information(middle + half * n) for n, w in zip(nodes, weights)) * seconds
bound = np.sqrt(np.diag(np.linalg.inv(total)))

rayleigh = stats.rayleigh(scale=2)  # heights of a narrow sea with m0 = 1 m2 (Longuet-Higgins 1952)
third = rayleigh.expect(lambda h: h, lb=rayleigh.ppf(2 / 3), conditional=True)
waves = 600
print(json.dumps(dict(
    positions=positions.tolist(), k=k, direction=direction, spread=spread, noise=noise,
    real=gamma.real.ravel().tolist(), imag=gamma.imag.ravel().tolist(),
    conventional=share(form(matrix)).tolist(), capon=target.tolist(), iterated=found.tolist(), steps=steps,
    bound=dict(depth=depth, seconds=seconds, peak=peak, height=height, noise=sensor_noise,
               headingDegrees=float(np.rad2deg(bound[0])), logSpeed=float(bound[1])),
    rayleigh=dict(third=float(third), heights=[round(float(v), 6) for v in rayleigh.ppf((np.arange(waves) + 0.5) / waves)]))))
