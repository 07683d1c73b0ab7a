"""Reference conditioning of a seeded record by scipy, written to treat.json beside
this file: polynomial baselines, cosine taper, zero-phase Butterworth filters and
band-limited resampling.

Filters: scipy.signal.butter in second-order sections, sosfiltfilt without padding
of its own (padtype None) on the record between long stretches of zeros. Baselines:
numpy.polyfit on the samples, scipy.signal.detrend for the straight line; for velocity and
displacement, lstsq on columns integrated by the exact rule of straight lines.
Taper: scipy.signal.windows.tukey. Resampling: the windowed sum written out with
scipy.special.i0 and numpy.sinc, and, as a second method, scipy.signal.resample
(Fourier) on the record between zeros for a motion that is band-limited.

    python3 treat.py
"""

import json
import pathlib

import numpy as np
import scipy
from scipy import signal
from scipy.special import i0

STEP, N = 0.01, 300
rng = np.random.default_rng(20310411)
t = np.arange(N) * STEP
a = np.round(np.convolve(rng.standard_normal(N) * t * np.exp(-0.9 * t) * 3, [0.25, 0.5, 0.25], mode="same") + 0.02 + 0.01 * t, 6)


def integrate(x, step=STEP):
    v, d = np.zeros_like(x), np.zeros_like(x)
    for i in range(1, len(x)):
        v[i] = v[i - 1] + step * (x[i - 1] + x[i]) / 2
        d[i] = d[i - 1] + step * v[i - 1] + step**2 * (2 * x[i - 1] + x[i]) / 6
    return v, d


def baseline(order, fit):
    x = t / t[-1]
    powers = [x**k for k in range(order + 1)]
    pick = {"acceleration": lambda y: y, "velocity": lambda y: integrate(y)[0], "displacement": lambda y: integrate(y)[1]}[fit]
    columns = np.array([pick(p) for p in powers]).T
    scale = np.linalg.norm(columns, axis=0)
    c, *_ = np.linalg.lstsq(columns / scale, pick(a), rcond=None)
    return a - np.array(powers).T @ (c / scale)


def bandpass(low, high, order, pad, zeros=60000):
    x = np.concatenate([np.zeros(zeros), a, np.zeros(zeros)])
    for corner, kind in ((low, "highpass"), (high, "lowpass")):
        if corner:
            x = signal.sosfiltfilt(signal.butter(order, corner, kind, fs=1 / STEP, output="sos"), x, padtype=None)
    keep = round(pad / STEP)
    return x[zeros - keep : zeros + N + keep]


def kaiser(step):
    ratio, zeros, beta, transition = step / STEP, 64, 12.26, 0.061
    cut = 1.0 if ratio <= 1 else 1 / (ratio * (1 + transition))
    count = int(np.floor((N - 1) / ratio + 1e-6)) + 1
    out = []
    for j in range(count):
        u = j * ratio - np.arange(N)
        x = u * cut / zeros
        w = np.where(np.abs(x) < 1, i0(beta * np.sqrt(np.maximum(1 - x * x, 0))) / i0(beta), 0)
        out.append(np.sum(a * cut * np.sinc(cut * u) * w))
    return np.array(out)


def smooth_burst():
    """A motion without content above 17 Hz to 1e-9, and zero at its ends."""
    s = np.exp(-(((t - 1.5) / 0.22) ** 2) / 2)
    return np.round(s * (np.sin(2 * np.pi * 3 * t) + 0.5 * np.cos(2 * np.pi * 11 * t)), 15)


burst = smooth_burst()
zeros = 600
padded = np.concatenate([np.zeros(zeros), burst, np.zeros(zeros)])
fine = signal.resample(padded, 4 * len(padded))[4 * zeros : 4 * (zeros + N) - 3]

filters = [
    {"from": 0.2, "to": 20, "order": 4, "pad": 0.5},
    {"from": 0.5, "to": 0, "order": 2, "pad": 0.0},
    {"from": 0, "to": 12.5, "order": 3, "pad": 0.2},
    {"from": 1.0, "to": 45, "order": 5, "pad": 0.0},
    {"from": 0.05, "to": 0, "order": 8, "pad": 0.0},
]
for f in filters:
    f["a"] = bandpass(f["from"], f["to"], f["order"], f["pad"]).tolist()

baselines = [{"order": o, "fit": fit, "a": baseline(o, fit).tolist()} for fit in ("acceleration", "velocity", "displacement") for o in (0, 1, 3)]
assert np.allclose(baselines[1]["a"], signal.detrend(a), atol=1e-13)
assert np.allclose(baselines[0]["a"], signal.detrend(a, type="constant"), atol=1e-13)
assert np.allclose(baselines[2]["a"], a - np.polyval(np.polyfit(t, a, 3), t), atol=1e-12)

duration = t[-1]
out = {
    "scipy": scipy.__version__,
    "step": STEP,
    "a": a.tolist(),
    "baseline": baselines,
    "taper": {"length": 0.2 * duration, "a": (a * signal.windows.tukey(N, 0.4)).tolist()},
    "bandpass": filters,
    "resample": [{"step": s, "a": kaiser(s).tolist()} for s in (0.005, 0.0025, 0.008, 0.02, 0.0071)],
    "burst": {"a": burst.tolist(), "step": STEP / 4, "fine": fine.tolist()},
}
text = json.dumps(out, indent=None, separators=(",", ":"))
pathlib.Path(__file__).with_name("treat.json").write_text(text.replace('],"', '],\n"').replace('},{', '},\n{') + "\n")
