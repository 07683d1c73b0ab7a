"""Writes modal.json: a seeded ten-storey shear building solved by
scipy.linalg.eigh, and combinations of its modes by plain numpy.

    python3 modal.py

Conventions: lowest level first; one row a mode; the component of largest
magnitude of a shape is +1. SI units.
"""

import json
import pathlib

import numpy as np
import scipy
from scipy.linalg import eigh

N = 10
rng = np.random.default_rng(20260301)
height = np.round(rng.uniform(3.2, 4.8, N), 2)
mass = np.round(rng.uniform(250e3, 480e3, N), 0)
stiffness = np.round(np.sort(rng.uniform(2.0e8, 6.5e8, N))[::-1], -4)
psa = np.round(rng.uniform(1.0, 9.0, N), 3)
damping = np.round(rng.uniform(0.02, 0.09, N), 3)
divisor = 6.4

elevation = np.cumsum(height)
M = np.diag(mass)
K = np.zeros((N, N))
for i, k in enumerate(stiffness):
    K[i, i] += k
    if i > 0:
        K[i - 1, i - 1] += k
        K[i - 1, i] -= k
        K[i, i - 1] -= k

w2, vectors = eigh(K, M)
omega = np.sqrt(w2)
phi = np.array([v / v[np.argmax(np.abs(v))] for v in vectors.T])
participation = phi @ mass
modal_mass = (phi**2) @ mass
gamma = participation / modal_mass
ratio = participation**2 / modal_mass / mass.sum()

displacement = phi * (gamma * psa / w2)[:, None] / divisor
drift = np.diff(displacement, axis=1, prepend=0)
force = phi * mass * (gamma * psa)[:, None] / divisor
shear = np.cumsum(force[:, ::-1], axis=1)[:, ::-1]
foot = elevation - height
overturning = np.array([[sum(f[j] * (elevation[j] - foot[i]) for j in range(i, N)) for i in range(N)] for f in force])


def white_noise_correlation():
    """Correlation of two oscillators under white noise, from their exact
    covariances: E[x_i x_j] solves the Lyapunov equation of the pair."""
    from scipy.linalg import solve_continuous_lyapunov

    rho = np.eye(N)
    for i in range(N):
        for j in range(i):
            a = np.zeros((4, 4))
            b = np.zeros((4, 1))
            for at, mode in ((0, i), (2, j)):
                a[at, at + 1] = 1
                a[at + 1, at] = -w2[mode]
                a[at + 1, at + 1] = -2 * damping[mode] * omega[mode]
                b[at + 1, 0] = 1
            p = solve_continuous_lyapunov(a, -b @ b.T)
            rho[i, j] = rho[j, i] = p[0, 2] / np.sqrt(p[0, 0] * p[2, 2])
    return rho


rho = white_noise_correlation()
rules = {
    "CQC": lambda r: np.sqrt(np.einsum("ij,ik,jk->k", rho, r, r)),
    "SRSS": lambda r: np.sqrt((r**2).sum(axis=0)),
    "absolute": lambda r: np.abs(r).sum(axis=0),
}
quantities = {
    "base_shear": shear[:, :1],
    "storey_force": force,
    "storey_shear": shear,
    "overturning": overturning,
    "displacement": displacement,
    "drift": drift,
    "drift_ratio": drift / height,
}
out = {
    "by": f"scipy {scipy.__version__}, numpy {np.__version__}",
    "height": height.tolist(),
    "mass": mass.tolist(),
    "stiffness": stiffness.tolist(),
    "psa": psa.tolist(),
    "damping": damping.tolist(),
    "divisor": divisor,
    "period": (2 * np.pi / omega).tolist(),
    "gamma": gamma.tolist(),
    "mass_ratio": ratio.tolist(),
    "phi": phi.tolist(),
    "rho": rho.tolist(),
    "combined": {rule: {name: combine(rows).tolist() for name, rows in quantities.items()} for rule, combine in rules.items()},
}
path = pathlib.Path(__file__).with_suffix(".json")
path.write_text(json.dumps(out, indent=1) + "\n")
