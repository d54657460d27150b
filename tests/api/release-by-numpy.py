"""Makes a release anew with NumPy and SciPy from the archives' own files, and prints how far the bag is from it.

Usage: release-by-numpy.py BAG RULE TYPE ARCHIVE.h5 ...     RULE trapezoid | simpson, TYPE float32 | float64
Nothing here knows the product: stamps, weights, mean and spectrum are computed by the textbook.
"""
import csv
import json
import sys
from os.path import join

import h5py
import numpy as np
from scipy import integrate

bag, rule, kind, *archives = sys.argv[1:]
data = lambda name: np.load(join(bag, "data", name), allow_pickle=False)
quadrature = {"trapezoid": np.trapz, "simpson": integrate.simpson}[rule]


def by_unit_vectors(integrate_over, nodes):
    """Weights of a linear rule: what it gives for each unit vector."""
    return np.array([integrate_over(unit, nodes) for unit in np.eye(len(nodes))])


runs = []
for path in archives:
    with h5py.File(path) as file:
        t, x, y = file["time"][:], file["x"][:], file["y"][:]
        states = np.concatenate([file[name][:].astype("f8").reshape(len(t), -1) for name in ("u", "p")], axis=1)
    back = np.flatnonzero(np.diff(t) < 0)
    keep = np.arange(len(t))
    if len(back):
        # A restart: the later segment counts, the earlier one up to where it begins.
        begin = back[0] + 1
        keep = np.concatenate([np.flatnonzero(t[:begin] < t[begin]), np.arange(begin, len(t))])
    runs.append((t[keep], states[keep]))

weights = [by_unit_vectors(quadrature, t) for t, _ in runs]
total = np.mean([w.sum() for w in weights])
a = np.concatenate([w * total / w.sum() for w in weights])
w = np.tile(np.outer(by_unit_vectors(np.trapz, y), by_unit_vectors(np.trapz, x)).ravel(), 2)
X = np.concatenate([states for _, states in runs]).T
mean = X @ a / a.sum()
centred = X - mean[:, None]
stored = centred.astype(kind)

S = np.sqrt(w)[:, None] * stored.astype("f8") * np.sqrt(a)[None, :]
sigma = np.linalg.svd(S, compute_uv=False)

matrix, modes, coefficients, singular = data("matrix.npy"), data("modes.npy"), data("coefficients.npy"), data("singular_values.npy")
known = sigma[: len(singular)]
clear = known > 1e-4 * sigma[0]
gram = modes.T @ (w[:, None] * modes)
r = modes.shape[1]
reconstruction = np.sqrt(w)[:, None] * (matrix.astype("f8") - modes @ coefficients) * np.sqrt(a)[None, :]
split = data("split.npy")

with open(join(bag, "data", "spectrum.csv")) as file:
    rows = list(csv.DictReader(file))
with h5py.File(join(bag, "data", "release.h5")) as file:
    hdf5 = {
        "matrix": bool(np.array_equal(file["X"][:].T, matrix)) and file["X"].dtype == matrix.dtype,
        "arrays": {name: bool(np.array_equal(file[name][:], data(name + ".npy"))) for name in ("time", "run_index", "time_weights", "space_weights", "mean", "split", "singular_values")},
        "grid": bool(np.array_equal(file["fields/u/x"][:], x) and np.array_equal(file["fields/p/y"][:], y)),
        "fields": {name: file["fields"][name]["rows"][:].tolist() for name in ("u", "p")},
        "units": [file["fields/p/rows"].attrs["unit"], file["time"].attrs["unit"]],
        "caution": file.attrs["caution"],
        "growable": file["X"].maxshape is not None and file["X"].chunks is not None,
    }

scale = np.abs(centred).max()
print(json.dumps({
    "shape": list(matrix.shape), "expected_shape": list(centred.shape), "dtype": str(matrix.dtype), "fortran": bool(matrix.flags.f_contiguous),
    "time": float(np.abs(data("time.npy") - np.concatenate([t for t, _ in runs])).max()),
    "run_index": bool(np.array_equal(data("run_index.npy"), np.concatenate([np.full(len(t), i) for i, (t, _) in enumerate(runs)]))),
    "time_weights": float(np.abs(data("time_weights.npy") / a - 1).max()),
    "space_weights": float(np.abs(data("space_weights.npy") / w - 1).max()),
    "mean": float(np.abs(data("mean.npy") - mean).max() / np.abs(mean).max()),
    "matrix": float(np.abs(matrix - centred).max() / scale),
    "cast": float(np.abs(centred - centred.astype("f4")).max()),
    "resolved": int(len(singular)), "floor": float(sigma[len(singular)] / sigma[0]) if len(singular) < len(sigma) else 0.0,
    "singular_values": float(np.abs(singular[clear] / known[clear] - 1).max()), "clear": int(clear.sum()),
    "orthonormal": float(np.abs(gram - np.eye(r))[:8, :8].max()),
    "reconstruction": float(np.linalg.norm(reconstruction) / np.sqrt((sigma[r:] ** 2).sum())),
    "energy_csv": float(rows[0]["cumulative_energy"]) - float(sigma[0] ** 2 / (sigma**2).sum()),
    "split_counts": np.bincount(split, minlength=4).tolist(),
    "hdf5": hdf5,
}))
