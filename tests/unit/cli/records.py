"""Archives for the tests of the command line, written by h5py and NumPy into the folder named on the command line.
All data are invented. Prints what NumPy makes of them as one JSON object."""
import hashlib
import json
import os
import sys

import h5py
import numpy as np

folder = sys.argv[1]
os.chdir(folder)

x = np.linspace(0.0, 1.0, 12)
y = np.linspace(0.0, 1.0, 6) ** 2


def state(t):
    return np.sin(3 * t[:, None, None] + 2 * x[None, None, :]) * np.exp(-t[:, None, None] * y[None, :, None]) + 0.1 * t[:, None, None]


def write(name, t, u, unit="m s-1"):
    with h5py.File(name, "w") as file:
        file["t"] = t
        file["t"].attrs["units"] = "s"
        file["x"] = x
        file["x"].attrs["units"] = "m"
        file["y"] = y
        file["y"].attrs["units"] = "m"
        file["u"] = u
        if unit:
            file["u"].attrs["units"] = unit


uniform = np.linspace(0.0, 2.0, 41)
adaptive = np.cumsum(np.r_[0.0, 0.02 * (1 + 0.5 * np.sin(np.arange(40) / 5.0))])
jump = np.r_[np.arange(0, 3), np.arange(6, 12, 1.0)]
restart = np.r_[np.linspace(0, 1, 101), np.linspace(0.8, 1.5, 71)]

write("sound.h5", uniform, state(uniform))
write("adaptive.h5", adaptive, state(adaptive))
write("jump.h5", jump, state(jump))
broken = state(restart)
broken[7, 2, 3] = np.nan
write("restart.h5", restart, broken)
write("unitless.h5", uniform, state(uniform), unit=None)

whole = open("sound.h5", "rb").read()
open("cut.h5", "wb").write(whole[: len(whole) // 2])
open("text.h5", "w").write("t u\n0 1\n")
open("empty.h5", "wb").close()
np.save("pickled.npy", np.array([{"a": 1}, None], dtype=object), allow_pickle=True)
with h5py.File("outside.h5", "w") as file:
    file["t"] = uniform
    file["u"] = h5py.ExternalLink("sound.h5", "/u")
with h5py.File("claims.h5", "w") as file:
    file.create_dataset("t", shape=(10**6,), chunks=(1000,), dtype="f8")
    file.create_dataset("u", shape=(10**6, 10**6), chunks=(1, 10**5), dtype="f4")

with h5py.File("field.h5", "w") as file:
    file.create_dataset("u", shape=(10**6, 10**6), dtype="f4")

os.mkdir("series")
np.save("series/t.npy", uniform)
np.save("series/u.npy", np.asfortranarray(state(uniform)))
os.mkdir("matrix")
np.save("matrix/X.npy", state(uniform).reshape(41, -1))


def trapezoid(nodes):
    h = np.diff(nodes)
    return np.r_[h / 2, 0] + np.r_[0, h / 2]


u = state(uniform)
h = uniform[1] - uniform[0]
simpson = h / 3 * np.r_[1, np.tile([4, 2], 19), 4, 1]
space = np.outer(trapezoid(y), trapezoid(x)).ravel()
scaled = np.sqrt(space)[:, None] * u.reshape(41, -1).T * np.sqrt(simpson)[None, :]
print(
    json.dumps(
        {
            "sha256": hashlib.sha256(whole).hexdigest(),
            "bytes": len(whole),
            "min": u.min(),
            "max": u.max(),
            "mean": u.mean(),
            "norm": np.sqrt((u**2).sum(axis=(1, 2))).tolist(),
            "simpson": simpson.tolist(),
            "singular_values": np.linalg.svd(scaled, compute_uv=False).tolist(),
            "spaceSum": float(space.sum()),
        }
    )
)
