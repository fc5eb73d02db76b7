"""Makes surgeReference.json for surge.test.ts: 4 sqrt(m0) over 0.004 to 0.04 Hz of an hour of level at 1 Hz, by numpy and scipy.

Run: python3 surgeReference.py > surgeReference.json (numpy 2.4, scipy 1.17).
The series are sums of sines with fixed numbers, so that the test can make them again without a random generator.
"""
import json
import numpy as np
from scipy import signal

t = np.arange(3600.0)
place = 2 * t / 3599 - 1


def series(long_waves):
    tide = 1.4 * np.sin(2 * np.pi * t / 44714 + 0.4) + 0.3 * np.sin(2 * np.pi * t / 22357)
    sea = 0.2 * np.sin(2 * np.pi * 0.083 * t) + 0.15 * np.sin(2 * np.pi * 0.11 * t + 1)
    surge = sum(a * np.sin(2 * np.pi * f * t + p) for f, a, p in [
        (0.0062, 0.04, 0.1), (0.0117, 0.06, 2.0), (0.0183, 0.05, 4.0), (0.0271, 0.03, 1.0), (0.0338, 0.02, 3.0)])
    return tide + sea + long_waves * surge


def height(x):
    flat = x - np.polyval(np.polyfit(place, x, 3), place)
    f, s = signal.welch(flat, fs=1.0, window='hann', nperseg=1024, noverlap=512, detrend='linear', scaling='density')
    band = (f >= 0.004) & (f <= 0.04)
    return 4 * np.sqrt(s[band].sum() * f[1])


print(json.dumps(dict(surge=height(series(1)), calm=height(series(0)))))
