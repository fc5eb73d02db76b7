"""Makes propagation.json for uncertain.test.ts: standard deviations by Monte Carlo with numpy instead of differences.

Run: python3 propagation.py > propagation.json (numpy 2.4). 2 000 000 draws, normal inputs; the formulas are written anew here.
"""
import json
import numpy as np

rng = np.random.default_rng(7)
n = 2_000_000
draw = lambda value, sd: value + sd * rng.standard_normal(n)

height, period, slope = draw(2, 0.1), draw(10, 0.3), draw(0.08, 0.008)
product = height * 9.81 * period**2 / (2 * np.pi)
run_up = 1.1 * (0.35 * slope * np.sqrt(product) + 0.5 * np.sqrt(product * (0.563 * slope**2 + 0.004)))

# Rubble mound, roughness 0.45, square on: ln of 0.09 sqrt(g H^3) exp(-(1.5 Rc / (H 0.45))^1.3).
toe, crest = draw(2, 0.05), draw(2.1, 0.03)
log_q = np.log(0.09 * np.sqrt(9.81 * toe**3)) - (1.5 * crest / (toe * 0.45)) ** 1.3

# One train across an axis: H sin of the angle, heading 23 degrees off, no spread.
swell, angle = draw(1.9, 0.1), np.radians(draw(23, 4))
across = swell * np.abs(np.sin(angle))

print(json.dumps({"runUp": run_up.std(), "logDischarge": log_q.std(), "across": across.std()}, default=float, indent=1))
