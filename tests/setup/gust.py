"""Writes a small record as a solver would: uneven stamps with a gap, a graded grid, two fields. Usage: gust.py FILE"""
import sys

import h5py
import numpy as np

steps = 0.1 + 0.02 * np.sin(np.arange(60))
steps[40] = 1.0
time = np.concatenate([[0.0], np.cumsum(steps)])
x = np.linspace(0, 1, 9) ** 1.3
y = np.linspace(0, 2, 7)
phase = time[:, None, None]
u = np.sin(2 * np.pi * x[None, None, :] + phase) * np.cos(y[None, :, None]) + 0.1 * phase
v = np.cos(2 * np.pi * x[None, None, :] - 0.7 * phase) * np.sin(y[None, :, None] + 0.3)
with h5py.File(sys.argv[1], "w") as file:
    for name, values, unit in (("time", time, "s"), ("x", x, "m"), ("y", y, "m"), ("u", u, "m/s"), ("v", v, "m/s")):
        file[name] = values
        file[name].attrs["units"] = unit
