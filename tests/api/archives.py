"""Writes the archives of archives.test.ts. Usage: archives.py FOLDER; prints what NumPy says of some of them as JSON."""
import json
import os
import sys

import h5py
import numpy as np

folder = sys.argv[1]
path = lambda name: os.path.join(folder, name)

time = np.linspace(0, 2, 21)
x = np.linspace(0, 1, 9)
y = np.linspace(0, 2, 7)
field = lambda shift=0.0: np.sin(2 * np.pi * x[None, None, :] + time[:, None, None] + shift) * np.cos(y[None, :, None]) + 0.1 * time[:, None, None]


def write(name, times=time, nodes=x, values=None, **more):
    values = field() if values is None else values
    with h5py.File(path(name), "w") as file:
        for key, array, unit in (("time", times, "s"), ("x", nodes, "m"), ("y", y, "m"), ("u", values, "m/s")):
            file[key] = array
            file[key].attrs["units"] = unit
        for key, value in more.items():
            file.attrs[key] = value


write("sound.h5", reynolds=100.0)
write("stretched.h5", nodes=x**1.5)
write("rounded-grid.h5", nodes=x.astype("f4").astype("f8"))

gap = time.copy()
gap[12:] += 3
write("gap.h5", times=gap)
write("restart.h5", times=np.concatenate([time[:11], time[5:15]]))

spoiled = field()
spoiled[4, 2, 3] = np.nan
write("nan.h5", values=spoiled)

with open(path("text.h5"), "w") as file:
    file.write("time;u\n0;1\n" * 100)
with open(path("sound.h5"), "rb") as file:
    whole = file.read()
with open(path("truncated.h5"), "wb") as file:
    file.write(whole[: len(whole) // 2])

np.save(path("pickled.npy"), np.array([{"a": 1}, {"b": 2}], dtype=object), allow_pickle=True)

write("linked.h5")
with h5py.File(path("linked.h5"), "a") as file:
    file["passwords"] = h5py.ExternalLink("/etc/passwd", "/root")

with h5py.File(path("endless.h5"), "w") as file:
    file.create_dataset("u", shape=(10**6, 10**6), chunks=(1, 10**4), dtype="f4")
with open(path("endless.npy"), "wb") as file:
    np.lib.format.write_array_header_1_0(file, {"descr": "<f4", "fortran_order": False, "shape": (10**6, 10**6)})
    file.write(b"\0" * 4096)

# Two archives of a solver that names nothing as others do, and a third whose field has another shape.
rng = np.random.default_rng(7)
for name, shape in (("odd-1.h5", (12, 40)), ("odd-2.h5", (15, 40)), ("odd-3.h5", (12,))):
    with h5py.File(path(name), "w") as file:
        file["Q7"] = np.cumsum(rng.normal(size=shape), axis=0)
        file["Z"] = np.arange(40.0) ** 1.2

# A series: one NPY a quantity.
np.save(path("u.npy"), field().reshape(21, -1))
np.save(path("t.npy"), time)

print(json.dumps({
    "snapshot": field()[3].tolist(), "min": field().min(axis=(1, 2)).tolist(), "max": field().max(axis=(1, 2)).tolist(),
    "norm": np.linalg.norm(field().reshape(21, -1), axis=1).tolist(), "trapezoid": np.gradient(time).tolist(),
}))
