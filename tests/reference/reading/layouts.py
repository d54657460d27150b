"""One archive a layout, element type and order, and what NumPy makes of each field: rows are snapshots, columns nodes."""
import json
import math
import sys
import warnings
import h5py
import numpy as np

folder = sys.argv[1]
facts = {}
random = np.random.default_rng(7)
m, ny, nx, nz = 12, 5, 7, 4
t = np.cumsum(random.random(m) + 0.1)
x = np.linspace(0, 1, nx) ** 2
y = np.linspace(-1, 1, ny)
z = np.arange(nz) * 0.5


def numbers(values):
    return [None if not np.isfinite(v) else float(v) for v in np.asarray(values, dtype="f8")]


def describe(archive, field, snapshots):
    """`snapshots`: [m, ...] in the element type of the file, nodes in C order of the reading's axes without time."""
    rows = np.ascontiguousarray(snapshots).reshape(len(snapshots), -1)
    v = rows.astype("f8")
    finite = np.isfinite(v)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        masked = np.where(finite, v, np.nan)
        difference = np.diff(v, axis=0)
        difference[~np.isfinite(difference)] = 0
        content = [row.tobytes() for row in rows]
        facts.setdefault(archive, {})[field] = {
            "snapshots": rows.shape[0],
            "nodes": rows.shape[1],
            "min": numbers(np.nanmin(masked, axis=1)),
            "max": numbers(np.nanmax(masked, axis=1)),
            "mean": numbers(np.nanmean(masked, axis=1)),
            "norm": [math.hypot(*row[np.isfinite(row)]) for row in v],
            "nonFinite": [int(k) for k in (~finite).sum(axis=1)],
            "firstNonFinite": [int(np.argmin(row)) if not row.all() else -1 for row in finite],
            "stepChange": [0.0] + [math.hypot(*row) for row in difference],
            "changed": int(sum(any(rows[j, i].tobytes() != rows[0, i].tobytes() for j in range(len(rows))) for i in range(rows.shape[1]))),
            "sameAs": [content.index(row) for row in content],
            "rows": [numbers(row) for row in v],
        }


def field(*shape, dtype="f4", scale=1.0):
    return (scale * random.standard_normal(shape)).astype(dtype)


def hdf5(name, **options):
    return h5py.File(f"{folder}/{name}", "w", **options)


u = field(m, ny, nx)
v = field(m, ny, nx, dtype="f8")
with hdf5("time_first.h5") as f:
    for key, value, unit in [("t", t, "s"), ("x", x, "m"), ("y", y, "m"), ("u", u, "m/s"), ("v", v, "m/s")]:
        f[key] = value
        f[key].attrs["units"] = unit
    f["weights"] = random.random((ny, nx))
    f["mask"] = np.zeros((ny, nx), dtype="i1")
    f["nu"] = 1e-3
    f.attrs["Re"] = 1000
    f.attrs["title"] = "a cavity"
describe("time_first.h5", "u", u)
describe("time_first.h5", "v", v)

for name, options in {
    "chunks.h5": dict(chunks=(5, 2, 3)),
    "chunks_gzip.h5": dict(chunks=(4, 5, 7), compression="gzip", shuffle=True, fletcher32=True),
    "chunks_lzf.h5": dict(chunks=(1, 3, 7), compression="lzf"),
}.items():
    with hdf5(name, libver="latest") as f:
        f.create_dataset("u", data=u, **options)
        f["t"], f["x"], f["y"] = t, x, y
    describe(name, "u", u)

with hdf5("time_last_bare.h5") as f:
    ez = f.create_dataset("ez", (nx, ny, 0), maxshape=(nx, ny, None), chunks=(nx, ny, 1), dtype="f8")
    for j in range(m):
        ez.resize(j + 1, axis=2)
        ez[:, :, j] = v[j].T
describe("time_last_bare.h5", "ez", v.transpose(0, 2, 1))

with hdf5("time_last.h5") as f:
    f["u"] = u.transpose(2, 1, 0)
    f["time"], f["x"], f["y"] = t, x, y
describe("time_last.h5", "u", u.transpose(0, 2, 1))

with hdf5("time_middle.h5") as f:
    f["velocity"] = np.stack([u, u + 1])
    f["t"], f["x"], f["y"] = t, x, y
describe("time_middle.h5", "velocity", np.stack([u, u + 1], axis=1))

w = field(m, ny, nx, 3)
with hdf5("components.h5") as f:
    f["velocity"] = w
    f["t"], f["x"], f["y"] = t, x, y
describe("components.h5", "velocity", w)

X = field(40, m, dtype="f8")
with hdf5("matrix_nm.h5") as f:
    f["X"], f["t"] = X, t
    f["x"], f["y"] = random.random(40), random.random(40)
describe("matrix_nm.h5", "X", X.T)
with hdf5("matrix_mn.h5") as f:
    f["snapshots"], f["times"] = X.T, t
describe("matrix_mn.h5", "snapshots", X.T)

order = random.permutation(m)
with hdf5("steps_attribute.h5") as f:
    for j in order:
        group = f.create_group(f"step_{10 * j}")
        group["u"], group["p"] = u[j], v[j]
        group.attrs["time"] = t[j]
    f["x"], f["y"] = x, y
describe("steps_attribute.h5", "u", u)
describe("steps_attribute.h5", "p", v)
with hdf5("steps_dataset.h5") as f:
    for j in order:
        group = f.create_group(f"output/Timestep_{j:06d}")
        group["fields/u"], group["time"], group["x"], group["y"] = u[j], t[j], x, y
        group["time"].attrs["unit"] = "ms"
describe("steps_dataset.h5", "u", u)
with hdf5("steps_name.h5") as f:
    for j in order:
        f[f"{0.0125 * j:.4f}/u"] = u[j]
describe("steps_name.h5", "u", u)

cube = field(nx, nx, nx)
with hdf5("cube_scales.h5") as f:
    f["theta"], f["t"], f["x"], f["y"] = cube, np.arange(nx) * 0.1, x, np.linspace(0, 3, nx)
    for axis, name in enumerate(["x", "t", "y"]):
        f[name].make_scale(name)
        f["theta"].dims[axis].attach_scale(f[name])
describe("cube_scales.h5", "theta", cube.transpose(1, 0, 2))
with hdf5("cube_bare.h5") as f:
    f["theta"], f["t"], f["x"], f["y"] = cube, np.arange(nx) * 0.1, x, np.linspace(0, 3, nx)
describe("cube_bare.h5", "theta", cube)

box = field(m, nz, ny, nx)
with hdf5("box.h5") as f:
    f["p"], f["t"], f["x_coords"], f["y_coords"], f["z_coords"] = box, t, x, y, z
    f["x_edges"] = np.linspace(0, 1, nx + 1)
describe("box.h5", "p", box)

kinds = dict(f2="f2", f4="f4", f8="f8", i1="i1", i2="i2", i4="i4", i8="i8", u1="u1", u2="u2", u4="u4", u8="u8")
with hdf5("types.h5") as f:
    f["t"] = t
    for key, kind in kinds.items():
        for mark in "<>":
            values = (random.integers(0, 100, (m, 30)) - (0 if kind[0] == "u" else 50)).astype(mark + kind)
            name = f"{'big' if mark == '>' else 'little'}_{key}"
            f[name] = values
            describe("types.h5", name, values)

special = field(m, 30, dtype="f8")
special[3, 4] = np.nan
special[5, 6:9] = [np.inf, -np.inf, np.nan]
special[6] = special[5]
special[7] = np.nan
special[9] = special[2]
special[10, 3] = 1e200
huge = special.copy()
masked = field(m, 30)
masked[:, 11] = 1e20
masked[4:6, 2] = -9999
masked[:, 12] = np.nan
frozen = field(m, 30, dtype="i8")
frozen[:] = 2**53
frozen[1:, 0] += 1
with hdf5("special.h5") as f:
    f["t"] = t
    f["special"], f["masked"], f["frozen"] = special, masked, frozen
    f["masked"].attrs["_FillValue"] = np.float32(1e20)
    tail = f.create_dataset("tail", (m, 30), dtype="f4", chunks=(2, 30), fillvalue=-1)
    tail[:6] = masked[:6]
for name, values in [("special", special), ("masked", masked), ("frozen", frozen)]:
    describe("special.h5", name, values)
describe("special.h5", "tail", np.concatenate([masked[:6], np.full((m - 6, 30), -1, dtype="f4")]))

np.save(f"{folder}/u.npy", u)
np.save(f"{folder}/t.npy", t)
describe("u.npy", "u", u)
np.save(f"{folder}/fortran.npy", np.asfortranarray(box))
describe("fortran.npy", "fortran", box)
np.save(f"{folder}/matrix.npy", np.asfortranarray(X.astype(">f4")))
describe("matrix.npy", "matrix", X.astype("f4").T)
for key, kind in kinds.items():
    for mark in "<>":
        values = (random.integers(0, 100, (m, 30)) - (0 if kind[0] == "u" else 50)).astype(mark + kind)
        name = f"{'big' if mark == '>' else 'little'}_{key}"
        np.save(f"{folder}/{name}.npy", values)
        describe(f"{name}.npy", name, values)
for version in [(1, 0), (2, 0), (3, 0)]:
    with open(f"{folder}/version_{version[0]}.npy", "wb") as file:
        np.lib.format.write_array(file, v.reshape(m, -1), version=version)
    describe(f"version_{version[0]}.npy", f"version_{version[0]}", v.reshape(m, -1))
np.save(f"{folder}/flags.npy", u > 0)
np.save(f"{folder}/complex.npy", np.ones((3, 4), dtype="c8"))

json.dump({"archives": facts, "t": list(t), "x": list(x), "y": list(y)}, sys.stdout)
