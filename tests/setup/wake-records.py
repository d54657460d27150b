"""Writes the records of an invented wake, as a solver would, by h5py. Usage: wake-records.py FOLDER [NAME ...]; all names by default.

adaptive  growing and shrinking steps, and a restart: the later segment differs from the earlier one where they overlap
steady    odd number of snapshots, uneven steps within 2:1, so that Simpson's rule may be used
gap       even steps but for one wide gap
blemished even steps, a NaN in snapshot 7
elsewhere another grid
wide      20000 nodes, 200 snapshots: long enough to be interrupted
"""
import sys
from os.path import join

import h5py
import numpy as np

x = 2.0 * np.linspace(0, 1, 12) ** 1.4
y = np.linspace(0, 1, 7)


def fields(t, re, x=x):
    t, yy, xx = t[:, None, None], y[None, :, None], x[None, None, :]
    u = np.exp(-0.2 * t) * np.sin(np.pi * yy) * np.cos(2 * xx - t) + 0.3 * np.cos(3 * t) * np.sin(2 * np.pi * yy) * xx + re / 400
    p = np.cos(0.7 * t) * np.cos(np.pi * yy) * np.exp(-xx) + 0.05 * np.sin(5 * t + xx)
    return u, p


def write(name, t, u, p, re, x=x):
    with h5py.File(join(sys.argv[1], name + ".h5"), "w") as file:
        file.attrs["re"] = float(re)
        for path, values, unit in (("time", t, "s"), ("x", x, "m"), ("y", y, "m"), ("u", u, "m/s"), ("p", p.astype("f4"), "Pa")):
            file[path] = values
            file[path].attrs["units"] = unit


def adaptive():
    steps = 0.05 * (1 + 0.8 * np.sin(0.4 * np.arange(30)))
    first = np.concatenate([[0.0], np.cumsum(steps)])
    later = first[21] + 0.011 + np.concatenate([[0.0], np.cumsum(0.05 * (1 + 0.6 * np.cos(0.5 * np.arange(25))))])
    (u1, p1), (u2, p2) = fields(first, 100), fields(later, 100)
    write("adaptive", np.concatenate([first, later]), np.concatenate([u1, 1.001 * u2]), np.concatenate([p1, p2]), 100)


def steady():
    t = 3 + np.concatenate([[0.0], np.cumsum(0.07 * (1 + 0.25 * np.sin(1.3 * np.arange(40))))])
    write("steady", t, *fields(t, 200), 200)


def gap():
    t = 0.1 * np.arange(40)
    t[25:] += 1.3
    write("gap", t, *fields(t, 300), 300)


def blemished():
    t = 0.1 * np.arange(31)
    u, p = fields(t, 400)
    u[7, 2, 3] = np.nan
    write("blemished", t, u, p, 400)


def elsewhere():
    t, other = 0.1 * np.arange(31), np.linspace(0, 2, 12)
    write("elsewhere", t, *fields(t, 500, other), 500, other)


def wide():
    t, s = 0.1 * np.arange(200)[:, None], np.linspace(0, 1, 20000)
    with h5py.File(join(sys.argv[1], "wide.h5"), "w") as file:
        for path, values, unit in (("time", t[:, 0], "s"), ("x", s, "m"), ("u", sum(np.cos(k * (s[None, :] + 0.1 * t)) / k for k in range(1, 30)), "m/s")):
            file[path] = values
            file[path].attrs["units"] = unit


records = {each.__name__: each for each in (adaptive, steady, gap, blemished, elsewhere, wide)}
for name in sys.argv[2:] or records:
    records[name]()
