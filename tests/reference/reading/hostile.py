"""Archives that want more than to be read."""
import os
import pickle
import sys
import zlib
import h5py
import numpy as np

folder = sys.argv[1]
os.chdir(folder)
t = np.arange(6.0)
u = np.arange(6 * 4 * 5, dtype="f4").reshape(6, 4, 5)


def sound(f):
    f["u"], f["t"] = u, t


with h5py.File("sound.h5", "w") as f:
    sound(f)
whole = open("sound.h5", "rb").read()
open("truncated.h5", "wb").write(whole[: len(whole) // 2])
open("head_only.h5", "wb").write(whole[:8])
open("text.h5", "w").write("time,u\n0,1\n0.1,2\n")
open("empty.h5", "w").close()
open("archive.npz", "wb").write(b"PK\x03\x04" + bytes(100))
open("noise.h5", "wb").write(np.random.default_rng(3).bytes(5000))
with h5py.File("prefixed.h5", "w", userblock_size=1024) as f:
    sound(f)

np.save("sound.npy", u)
whole = open("sound.npy", "rb").read()
open("truncated.npy", "wb").write(whole[:300])
open("header_cut.npy", "wb").write(whole[:40])
open("longer.npy", "wb").write(whole + bytes(80))
np.save("pickled.npy", np.array([{"a": 1}, None], dtype=object), allow_pickle=True)
open("pickle.npy", "wb").write(pickle.dumps({"u": [1, 2, 3]}))
np.save("record.npy", np.zeros(3, dtype=[("a", "f4"), ("b", "i4")]))
header = b"{'descr': '<f8', 'fortran_order': False, 'shape': (1000000, 1000000), }"
open("claims.npy", "wb").write(b"\x93NUMPY\x01\x00" + (118).to_bytes(2, "little") + header.ljust(117) + b"\n" + bytes(64))

with h5py.File("claims.h5", "w") as f:
    f.create_dataset("u", (10**6, 10**6), dtype="f4", chunks=(1, 1000))
with h5py.File("claims_contiguous.h5", "w") as f:
    f.create_dataset("u", (10**6, 10**6), dtype="f4")

with h5py.File("outside.h5", "w") as f:
    f["secret"] = np.full((6, 4, 5), 42.0)
os.mkfifo("pipe")
with h5py.File("external_link.h5", "w") as f:
    sound(f)
    f["link"] = h5py.ExternalLink("outside.h5", "/secret")
    f["fifo"] = h5py.ExternalLink("pipe", "/x")
    f["soft_over_link"] = h5py.SoftLink("/link")
with h5py.File("virtual.h5", "w", libver="latest") as f:
    sound(f)
    layout = h5py.VirtualLayout((6, 4, 5), "f8")
    layout[:] = h5py.VirtualSource("outside.h5", "secret", (6, 4, 5))
    f.create_virtual_dataset("v", layout)
with h5py.File("raw.h5", "w") as f:
    sound(f)
    f.create_dataset("passwd", (6, 4, 5), dtype="u1", external=[("/etc/passwd", 0, 120)])

with h5py.File("circles.h5", "w") as f:
    sound(f)
    f["a/b/c"] = u
    f["a/b/up"] = f["a"]
    f["a/root"] = f["/"]
    f["again"] = f["u"]
    f["soft"] = h5py.SoftLink("/soft")
    f["left"], f["right"] = h5py.SoftLink("/right"), h5py.SoftLink("/left")
    f["gone"] = h5py.SoftLink("/nowhere")
with h5py.File("deep.h5", "w", libver="latest") as f:
    sound(f)
    group = f
    for _ in range(3000):
        group = group.create_group("g")
with h5py.File("many.h5", "w") as f:
    sound(f)
    for i in range(60):
        f.create_group(f"group{i}x")

with h5py.File("bomb.h5", "w") as f:
    f["t"] = t
    bomb = f.create_dataset("u", (6, 100 * 2**20), chunks=(1, 100 * 2**20), dtype="f4", compression="gzip")
    packed = zlib.compress(bytes(400 * 2**20), 1)
    for j in range(6):
        bomb.id.write_direct_chunk((j, 0), packed)
with h5py.File("vector_bomb.h5", "w") as f:
    sound(f)
    f.create_dataset("x", (5,), chunks=(200 * 2**20,), maxshape=(None,), dtype="f4", compression="gzip")
    f["x"].id.write_direct_chunk((0,), zlib.compress(bytes(800 * 2**20), 1))
with h5py.File("damaged_chunk.h5", "w") as f:
    f["t"] = t
    f.create_dataset("u", data=u, chunks=(1, 4, 5), compression="gzip")
    f["u"].id.write_direct_chunk((3, 0, 0), b"this is no deflate stream at all")

with h5py.File("filter.h5", "w") as f:
    f["t"] = t
    f.create_dataset("u", data=u, chunks=(1, 4, 5), compression="lzf")
whole = open("filter.h5", "rb").read()
at = whole.index(b"lzf\x00") - 8
assert whole[at : at + 2] == (32000).to_bytes(2, "little")
open("filter_unknown.h5", "wb").write(whole[:at] + (40000).to_bytes(2, "little") + whole[at + 2 :])
open("filter_zfp.h5", "wb").write(whole[:at] + (32013).to_bytes(2, "little") + whole[at + 2 :])

# A writer that dies: the flag in the superblock stays.
if os.fork() == 0:
    f = h5py.File("writer_open.h5", "w", libver="latest")
    sound(f)
    f.flush()
    os._exit(0)
os.wait()
with h5py.File("netcdf.h5", "w") as f:
    sound(f)
    f.attrs["_NCProperties"] = "version=2,netcdf=4.9.0,hdf5=1.10.8"
print("{}")
