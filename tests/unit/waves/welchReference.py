"""Makes welchReference.json: Welch cross-spectra of two short series by scipy.signal, for spectrum.test.ts.

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
_, sxy = signal.csd(x, y, **options)
_, coh = signal.coherence(x, y, **{k: v for k, v in options.items() if k != 'scaling'})
print(json.dumps(dict(frequency=f.tolist(), xx=sxx.tolist(), yy=syy.tolist(), real=sxy.real.tolist(), imag=sxy.imag.tolist(), coherence=coh.tolist())))
