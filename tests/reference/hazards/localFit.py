"""Makes localFit.json for localFit.test.ts: observations from a seeded generator, and their fits by numpy and scipy.

Run: python3 localFit.py > localFit.json (numpy 2.4, scipy 1.17).
Heights: least squares through the origin with HC3 standard error by matrices. Sightings: the likelihood minimised by scipy's BFGS and
Newton-CG, covariance from the inverse of the information matrix. Ten stretches by numpy.array_split for cross-validation.
"""
import json
import numpy as np
from scipy.optimize import minimize

rng = np.random.default_rng(20261201)
count, parts = 160, 10
day = 86_400_000
at = (1_760_000_000_000 + np.arange(count) * day // 3).tolist()

# Heights: a place that breaks 18 % higher than predicted, scatter grows with height.
predicted = np.round(rng.gamma(6, 0.25, count), 3)
observed = np.round(np.maximum(0.05, 1.18 * predicted + 0.15 * predicted * rng.standard_normal(count)), 3)


def factor(x, y):
    x = x[:, None]
    inverse = np.linalg.inv(x.T @ x)
    b = inverse @ x.T @ y
    e = y - x @ b
    hat = np.einsum("ij,jk,ik->i", x, inverse, x)
    meat = x.T @ np.diag((e / (1 - hat)) ** 2) @ x
    return float(b[0]), float(np.sqrt((inverse @ meat @ inverse)[0, 0]))


def split(n):
    return np.array_split(np.arange(n), parts)


unseen = np.empty(count)
for fold in split(count):
    rest = np.setdiff1d(np.arange(count), fold)
    unseen[fold] = factor(predicted[rest], observed[rest])[0] * predicted[fold]


def agreement(p):
    d = p - observed
    return {"bias": d.mean(), "rmse": np.sqrt((d**2).mean()), "scatterIndex": np.sqrt((d**2).mean()) / observed.mean(), "correlation": np.corrcoef(p, observed)[0, 1]}


def gain(before, after):
    d = np.array([(before[f] - after[f]).mean() for f in split(count)])
    return {"mean": d.mean(), "standardError": d.std(ddof=1) / np.sqrt(parts)}


order = np.argsort(predicted, kind="stable")
bins = []
for members in np.array_split(order, min(10, count // 10)):
    bins.append({"from": predicted[members].min(), "to": predicted[members].max(), "count": len(members), "meanPredicted": predicted[members].mean(),
                 "meanObserved": observed[members].mean(), "standardError": observed[members].std(ddof=1) / np.sqrt(len(members))})
value, error = factor(predicted, observed)
heights = {
    "rows": [{"at": a, "predicted": p, "observed": o} for a, p, o in zip(at, predicted, observed)],
    "factor": {"value": value, "standardError": error},
    "asPredicted": agreement(predicted), "crossValidated": agreement(unseen),
    "gain": gain((predicted - observed) ** 2, (unseen - observed) ** 2), "bins": bins,
}

# Sightings by breaker height and angle off square.
height = np.round(rng.gamma(5, 0.3, count), 3)
angle = np.round(np.abs(rng.normal(0, 0.3, count)), 3)
chance = 1 / (1 + np.exp(-(-2.2 + 2.1 * height - 3.0 * angle)))
seen = rng.uniform(size=count) < chance


def logistic(x, y):
    design = np.column_stack([np.ones(len(y)), x])
    sign = np.where(y, 1.0, -1.0)
    loss = lambda b: np.logaddexp(0, -sign * (design @ b)).sum()
    slope = lambda b: -design.T @ (sign / (1 + np.exp(sign * (design @ b))))

    def bend(b):
        p = 1 / (1 + np.exp(-(design @ b)))
        return design.T @ (design * (p * (1 - p))[:, None])

    start = minimize(loss, np.zeros(design.shape[1]), jac=slope, method="BFGS").x
    found = minimize(loss, start, jac=slope, hess=bend, method="Newton-CG", options={"xtol": 1e-12})
    return found.x, np.linalg.inv(bend(found.x)), 2 * found.fun


def chances(b, x):
    return 1 / (1 + np.exp(-(np.column_stack([np.ones(len(x)), x]) @ b)))


def scores(p):
    y = seen.astype(float)
    return {"brier": ((p - y) ** 2).mean(), "logLoss": -np.log(np.where(seen, p, 1 - p)).mean()}


def sightings(x):
    b, covariance, deviance = logistic(x, seen)
    fitted, plain = np.empty(count), np.empty(count)
    for fold in split(count):
        rest = np.setdiff1d(np.arange(count), fold)
        fitted[fold] = chances(logistic(x[rest], seen[rest])[0], x[fold])
        plain[fold] = seen[rest].mean()
    out = {
        "values": b.tolist(), "standardErrors": np.sqrt(np.diag(covariance)).tolist(), "deviance": deviance,
        "withoutPrediction": scores(plain), "crossValidated": scores(fitted),
        "gain": gain(-np.log(np.where(seen, plain, 1 - plain)), -np.log(np.where(seen, fitted, 1 - fitted))),
    }
    if x.shape[1] == 1:
        even = -b[0] / b[1]
        way = np.array([-1 / b[1], -even / b[1]])
        out["evenChanceAt"] = {"value": even, "standardError": np.sqrt(way @ covariance @ way)}
    return out


rows = [{"at": a, "height": h, "angle": g, "seen": bool(s)} for a, h, g, s in zip(at, height, angle, seen)]
print(json.dumps({"heights": heights, "sightings": {"rows": rows, "both": sightings(np.column_stack([height, angle])), "height": sightings(height[:, None])}}, default=float))
