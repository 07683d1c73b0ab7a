"""Reference response spectra by scipy, written to sdof.json beside this file.

Route, independent of the Go kernel: the state (u, v) and the load with its slope
as one linear system, scipy.linalg.expm of it at a refined step, the motion sampled
there, and the largest of |u|, |v| and |2 z w v + w^2 u| refined by a local search
with the matrix exponential at arbitrary times. The free vibration after the
record is searched in the same way over two periods.

The ground acceleration (m/s^2) is seeded noise under an envelope, linear between
samples. Run: python3 sdof.py
"""
import json
import os

import numpy as np
import scipy
from scipy.linalg import expm
from scipy.optimize import minimize_scalar

N, DT, SEED = 400, 0.01, 20310203
PERIODS = [0.005, 0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1.0, 2.0, 5.0, 10.0, 100.0]
DAMPING = [0.0, 0.02, 0.05, 0.2, 0.7, 1.0]


def record():
    rng = np.random.default_rng(SEED)
    t = np.arange(N) * DT
    a = rng.standard_normal(N) * t * np.exp(-1.5 * t) * 4
    a = np.convolve(a, [0.25, 0.5, 0.25], mode="same")
    a[0] = 0.0
    return np.round(a, 6)  # as stored


def system(T, z):
    w = 2 * np.pi / T
    return w, np.array([[0, 1, 0, 0], [-w * w, -2 * z * w, 1, 0], [0, 0, 0, 1], [0, 0, 0, 0]], float)


def peaks(a, T, z):
    w, A = system(T, z)
    rows = np.array([[1, 0], [0, 1], [w * w, 2 * z * w]])
    m = max(20, int(np.ceil(40 * DT / T)))
    h = DT / m
    E = expm(A * h)
    states, lengths = [], []
    x = np.zeros(4)
    for i in range(N - 1):
        x[3] = -(a[i + 1] - a[i]) / DT
        x[2] = -a[i]
        for j in range(m):
            states.append(x.copy())
            lengths.append(h)
            x = E @ x
    x[2:] = 0
    free = T / 200
    E = expm(A * free)
    for _ in range(400):
        states.append(x.copy())
        lengths.append(free)
        x = E @ x
    S = np.array(states)
    out = []
    for row in rows:
        f = np.abs(S[:, :2] @ row)
        best = f.max()
        # both sides of every highest sample that may lead to the largest value
        up = np.concatenate([[True], f[1:] >= f[:-1]])
        down = np.concatenate([f[:-1] >= f[1:], [True]])
        for k in np.flatnonzero(up & down & (f > 0.99 * best)):
            for i in (k - 1, k):
                if i < 0:
                    continue
                g = lambda s: -abs(row @ (expm(A * s) @ S[i])[:2])
                r = minimize_scalar(g, bounds=(0, lengths[i]), method="bounded", options={"xatol": 1e-9 * lengths[i]})
                best = max(best, -r.fun)
        out.append(best)
    return out


def main():
    a = record()
    rows = [[peaks(a, T, z) for T in PERIODS] for z in DAMPING]
    data = {
        "made_with": f"scipy {scipy.__version__}, numpy {np.__version__}",
        "step": DT, "a": a.tolist(), "periods": PERIODS, "damping": DAMPING,
        "SD": [[p[0] for p in r] for r in rows],
        "SV": [[p[1] for p in r] for r in rows],
        "SA": [[p[2] for p in r] for r in rows],
    }
    with open(os.path.join(os.path.dirname(os.path.abspath(__file__)), "sdof.json"), "w") as f:
        json.dump(data, f, indent=None)
        f.write("\n")


main()
