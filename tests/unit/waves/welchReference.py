"""Makes welchReference.json for spectrum.test.ts: Welch spectra of two short series by scipy.signal, and the cross-spectrum of the
whole tapered record averaged over groups of bins by numpy.

Run: python3 welchReference.py > welchReference.json (numpy 2.4, scipy 1.17).
The series are sums of sines with fixed numbers, so that the test can make them again without a random generator.
"""
import json
import numpy as np
from scipy import signal

fs, n, length = 4.0, 640, 128
t = np.arange(n) / fs
x = 0.8 * np.sin(2 * np.pi * 0.11 * t + 0.3) + 0.3 * np.cos(2 * np.pi * 0.27 * t) + 0.002 * t + 0.05 * np.sin(37.0 * t * t / 100)
y = 0.7 * np.sin(2 * np.pi * 0.11 * (t - 1.3) + 0.3) + 0.2 * np.cos(2 * np.pi * 0.27 * t + 0.9) + 0.04 * np.cos(53.0 * t * t / 90)
options = dict(fs=fs, window='hann', nperseg=length, noverlap=length // 2, detrend='linear', scaling='density')
f, sxx = signal.welch(x, **options)
_, syy = signal.welch(y, **options)

edge = int(0.04 * n)
taper = np.ones(n)
rise = 0.5 - 0.5 * np.cos(np.pi * (np.arange(edge) + 0.5) / edge)
taper[:edge] = rise
taper[-edge:] = rise[::-1]
g, whole = signal.csd(x, y, fs=fs, window=taper, nperseg=n, noverlap=0, nfft=1024, detrend=False, scaling='density')
edges = [20, 26, 33, 60, 80]
groups = [whole[a:b].mean() for a, b in zip(edges, edges[1:])]
print(json.dumps(dict(
    frequency=f.tolist(), xx=sxx.tolist(), yy=syy.tolist(),
    edges=[float(g[e]) for e in edges], real=[v.real for v in groups], imag=[v.imag for v in groups])))
