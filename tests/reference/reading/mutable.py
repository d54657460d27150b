"""Small sound archives that use many structures of the format."""
import sys
import h5py
import numpy as np

folder = sys.argv[1]
random = np.random.default_rng(5)
u = random.standard_normal((6, 4, 5)).astype("f4")
for version in ["earliest", "latest"]:
    with h5py.File(f"{folder}/{version}.h5", "w", libver=version) as f:
        f["u"] = u
        f["t"], f["x"], f["y"] = np.arange(6.0), np.arange(5.0), np.arange(4.0)
        f["u"].attrs["units"] = "m/s"
        f.create_dataset("v", data=u, chunks=(2, 4, 3), compression="gzip", shuffle=True)
        f.create_dataset("w", data=u, chunks=(1, 4, 5), maxshape=(None, 4, 5))
        f.create_dataset("p", data=u, chunks=(2, 2, 2), maxshape=(None, None, 5), fletcher32=True)
        f["group/inner/mask"] = np.zeros((4, 5), dtype=bool)
        f["alias"] = h5py.SoftLink("/u")
        f.attrs["Re"] = 100.0
with h5py.File(f"{folder}/steps.h5", "w") as f:
    for j in range(6):
        f[f"step_{j}/u"] = u[j]
        f[f"step_{j}"].attrs["time"] = 0.1 * j
np.save(f"{folder}/u.npy", u)
print("{}")
