"""Writes modal.json: a seeded ten-storey shear building solved by
scipy.linalg.eigh, and combinations of its modes by plain numpy; and a model by
full matrices, of which a few modes are combined with the missing mass.

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


def by_matrices():
    """Seven levels of a cantilever that bends: K is the inverse of the flexibility
    h_i^2 (3 h_j - h_i)/(6 EI), i <= j, and M is full. Two modes are kept; the
    missing mass follows from M, K and them."""
    n, keep, zpa = 7, 2, 2.9
    rng = np.random.default_rng(20260302)
    h = np.cumsum(np.round(rng.uniform(2.8, 4.6, n), 2))
    low, high = np.minimum.outer(h, h), np.maximum.outer(h, h)
    K = np.linalg.inv(low**2 * (3 * high - low) / (6 * 9.0e9))
    K = (K + K.T) / 2
    M = np.diag(np.round(rng.uniform(180e3, 320e3, n), 0))
    for i in range(n - 1):
        M[i, i + 1] = M[i + 1, i] = np.round(rng.uniform(5e3, 30e3), 0)
    w2, vectors = eigh(K, M)
    phi = np.array([v / v[np.argmax(np.abs(v))] for v in vectors.T])
    one = np.ones(n)
    part = phi @ M @ one
    modal = np.einsum("ij,jk,ik->i", phi, M, phi)
    gamma = part / modal
    psa = np.array([4.1, 7.7])
    force = (phi @ M)[:keep] * (gamma[:keep] * psa)[:, None] / divisor
    u = phi[:keep] * (gamma[:keep] * psa / w2[:keep])[:, None] / divisor
    e = one - gamma[:keep] @ phi[:keep]
    static = M @ e * zpa / divisor
    force, u = np.vstack([force, static]), np.vstack([u, np.linalg.solve(K, static)])
    foot = np.concatenate([[0], h[:-1]])
    rows = {
        "storey_force": force,
        "storey_shear": np.cumsum(force[:, ::-1], axis=1)[:, ::-1],
        "overturning": np.array([[sum(f[j] * (h[j] - foot[i]) for j in range(i, n)) for i in range(n)] for f in force]),
        "displacement": u,
        "drift": np.diff(u, axis=1, prepend=0),
        "drift_ratio": np.diff(u, axis=1, prepend=0) / np.diff(h, prepend=0),
    }
    rows["base_shear"] = rows["storey_shear"][:, :1]
    return {
        "elevation": h.tolist(), "mass": M.tolist(), "stiffness": K.tolist(), "psa": psa.tolist(), "zpa": zpa,
        "period": (2 * np.pi / np.sqrt(w2)).tolist(), "gamma": gamma.tolist(), "mass_ratio": (part**2 / modal / M.sum()).tolist(),
        "phi": phi.tolist(), "missing": e.tolist(), "missing_mass": float(e @ M @ one / M.sum()),
        "srss": {name: np.sqrt((r**2).sum(axis=0)).tolist() for name, r in rows.items()},
    }


out["matrices"] = by_matrices()
path = pathlib.Path(__file__).with_suffix(".json")
path.write_text(json.dumps(out, indent=1) + "\n")
