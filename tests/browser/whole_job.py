"""Writes the archive of the whole-job test, and says what a modeler would compute from it with NumPy and SciPy."""
import json
import sys

import h5py
import numpy as np


def write(path):
    rng = np.random.default_rng(7)
    h = np.exp(0.25 * np.sin(np.linspace(0, 9, 60))) * 0.05
    t = np.concatenate([[0.0], np.cumsum(h)])
    x = 2.0 * (np.expm1(1.8 * np.linspace(0, 1, 40)) / np.expm1(1.8))
    y = np.linspace(0.0, 1.0, 24)
    X, Y = np.meshgrid(x, y)
    c = 0.3 + 0.4 * t[:, None, None]
    u = np.exp(-((X - c) ** 2 + (Y - 0.5) ** 2) / 0.05) + 0.2 * np.sin(3 * X + 2 * t[:, None, None])
    u = (u + 1e-4 * rng.standard_normal(u.shape)).astype("f4")
    with h5py.File(path, "w") as f:
        f["t"] = t
        f["t"].attrs["units"] = "s"
        f["x"] = x
        f["x"].attrs["units"] = "m"
        f["y"] = y
        f["y"].attrs["units"] = "m"
        d = f.create_dataset("temperature", data=u, chunks=(8, 24, 40), compression="gzip", shuffle=True)
        d.attrs["units"] = "K"


def expected(path):
    """Trapezoid weights on both axes, Simpson in time where SciPy knows it, the weighted mean, the weighted matrix, its singular values."""
    from scipy.integrate import simpson

    def trapezoid(nodes):
        w = np.zeros(len(nodes))
        w[:-1] += np.diff(nodes) / 2
        w[1:] += np.diff(nodes) / 2
        return w

    with h5py.File(path) as f:
        t, x, y, u = f["t"][:], f["x"][:], f["y"][:], f["temperature"][:].astype("f8")
    a = np.array([simpson(np.eye(len(t))[j], x=t) for j in range(len(t))])
    w = np.outer(trapezoid(y), trapezoid(x)).ravel()
    X = u.reshape(len(t), -1).T
    mean = X @ a / a.sum()
    return t, a, w, mean, X - mean[:, None]


def compare(path, folder):
    t, a, w, mean, X = expected(path)
    load = lambda name: np.load(f"{folder}/{name}.npy")
    S = np.sqrt(w)[:, None] * X * np.sqrt(a)
    sigma = np.linalg.svd(S, compute_uv=False)
    pulled = load("singular_values")
    top = pulled > 1e-3 * pulled[0]
    relative = lambda ours, theirs: float(np.max(np.abs(ours - theirs)) / np.max(np.abs(theirs)))
    print(json.dumps({
        "shape": list(load("matrix").shape),
        "fortran": bool(load("matrix").flags.f_contiguous),
        "time": relative(load("time"), t),
        "time_weights": relative(load("time_weights"), a),
        "space_weights": relative(load("space_weights"), w),
        "mean": relative(load("mean"), mean),
        "matrix": relative(load("matrix"), X),
        "weighted": relative(load("weighted"), S),
        "singular_values": float(np.max(np.abs(pulled[top] - sigma[: len(pulled)][top]) / pulled[top])),
        "compared": int(top.sum()),
    }))


if __name__ == "__main__":
    {"write": write, "compare": compare}[sys.argv[1]](*sys.argv[2:])
