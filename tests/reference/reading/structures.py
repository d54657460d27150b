"""Every storage layout of HDF5 that h5py can write, in the oldest and in the newest file format."""
import json
import sys
import h5py
import numpy as np

folder = sys.argv[1]
facts = {}


def allocated(dataset):
    """Elements inside the shape in chunks where anything was written: all that is written here differs from the fill value.

    The library's own list of chunks is no help: HDF5 1.10 gives wrong positions for extensible arrays that do not grow
    along their first axis.
    """
    if dataset.chunks is None:
        return int(dataset.size) if dataset.id.get_storage_size() else 0
    written = dataset[()] != dataset.fillvalue
    inside = np.ones(dataset.shape, dtype=bool)
    counts = [-(-s // c) for s, c in zip(dataset.shape, dataset.chunks)]
    split = [part for pair in zip(counts, dataset.chunks) for part in pair]
    within = tuple(range(1, 2 * len(counts), 2))

    def by_chunk(values):
        return np.pad(values, [(0, n * c - s) for n, c, s in zip(counts, dataset.chunks, dataset.shape)]).reshape(split)

    return int(by_chunk(inside).sum(axis=within)[by_chunk(written).any(axis=within)].sum())


for version in ["earliest", "latest"]:
    random = np.random.default_rng(0)
    with h5py.File(f"{folder}/{version}.h5", "w", libver=version) as f:

        def put(name, shape, parts=None, **options):
            dataset = f.create_dataset(name, shape, **options)
            for part in [np.s_[...]] if parts is None else parts:
                dataset[part] = (1 + 100 * random.random(dataset[part].shape)).astype(dataset.dtype)

        put("contiguous", (10, 4, 3), dtype="f4")
        put("contiguous_big_endian", (10, 4, 3), dtype=">f8")
        put("contiguous_unwritten", (10, 4), [], dtype="f4")
        put("single_chunk", (10, 4), chunks=(10, 4), dtype="f8")
        put("single_chunk_gzip", (10, 4), chunks=(10, 4), dtype="f8", compression="gzip")
        put("single_chunk_unwritten", (10, 4), [], chunks=(10, 4), dtype="f8")
        put("fixed", (100, 7), [np.s_[:50]], chunks=(3, 2), dtype="f8")
        put("fixed_gzip", (100, 7), [np.s_[:50]], chunks=(3, 2), dtype="f8", compression="gzip", shuffle=True)
        put("fixed_paged", (5000, 4), [np.s_[:10], np.s_[3000:3007]], chunks=(1, 4), dtype="f4")
        put("fixed_with_room", (20, 7), [np.s_[:9, 3:]], chunks=(3, 2), maxshape=(40, 30), dtype="f8")
        put("growing_first", (100, 7), [np.s_[:60]], chunks=(1, 7), maxshape=(None, 7), dtype="f8")
        put("growing_last", (7, 5, 100), [np.s_[:, :, :60]], chunks=(7, 5, 1), maxshape=(7, 5, None), dtype="f4")
        put("growing_middle", (4, 60, 6), [np.s_[:, :31, 2:]], chunks=(2, 4, 3), maxshape=(4, None, 9), dtype="f4")
        put("growing_paged", (140000, 4), [np.s_[:10], np.s_[70000:70010], np.s_[139990:]], chunks=(1, 4), maxshape=(None, 4), dtype="f4")
        put("growing_gzip", (3000, 4), [np.s_[:2000, 1:3]], chunks=(1, 2), maxshape=(None, 4), dtype="f4", compression="gzip")
        put("growing_both", (30, 40), [np.s_[:10, :20]], chunks=(2, 3), maxshape=(None, None), dtype="f4")
        put("growing_both_deep", (300, 400), [np.s_[:200, :]], chunks=(2, 3), maxshape=(None, None), dtype="f4")
        put("growing_both_gzip", (300, 400), [np.s_[:200, :333]], chunks=(2, 3), maxshape=(None, None), dtype="f4", compression="gzip")
        put("shrunk", (60, 6), chunks=(4, 3), maxshape=(None, None), dtype="f4")
        f["shrunk"].resize((21, 4))
        put("filled", (10, 4), [], chunks=(5, 4), dtype="f4", fillvalue=-9999.0)
        put("filled_big_endian", (10, 4), [], chunks=(5, 4), dtype=">i4", fillvalue=-999)
        for kind in ["i1", "i2", "i4", "i8", "u1", "u2", "u4", "u8", "f2", "f4", "f8"]:
            for order, mark in [("little", "<"), ("big", ">")]:
                f[f"{order}_{kind}"] = np.arange(5).astype(mark + kind)
        f["truth"] = np.array([True, False])
        f["complex"] = np.array([1 + 2j])
        f["complex_big_endian"] = np.array([1 + 2j], dtype=">c8")
        f["long_double"] = np.array([1.0], dtype="g")
        f["text"] = "abc"
        f["record"] = np.array([(1, 2.0)], dtype=[("a", "i4"), ("b", "f8")])
        f["named_type"] = np.dtype("f4")
        put("committed", (3,), dtype=f["named_type"])
        compact = h5py.h5p.create(h5py.h5p.DATASET_CREATE)
        compact.set_layout(h5py.h5d.COMPACT)
        space = h5py.h5s.create_simple((4,))
        h5py.h5d.create(f.id, b"compact", h5py.h5t.NATIVE_DOUBLE, space, compact).write(space, space, np.arange(4.0))
        narrow = h5py.h5t.STD_I32LE.copy()
        narrow.set_precision(24)
        h5py.h5d.create(f.id, b"narrow", narrow, space)
        brain = h5py.h5t.IEEE_F32LE.copy()
        brain.set_fields(15, 7, 8, 0, 7)
        brain.set_size(2)
        brain.set_precision(16)
        h5py.h5d.create(f.id, b"bfloat16", brain, space)

        facts[version] = {}
        for name, item in f.items():
            if isinstance(item, h5py.Dataset):
                numeric = item.dtype.kind in "iuf" and item.dtype.itemsize <= 8 and name not in ("narrow", "bfloat16", "growing_paged")
                facts[version]["/" + name] = {
                    "shape": list(item.shape),
                    "allocated": allocated(item),
                    "sum": float(np.asarray(item[()], dtype="f8").sum()) if numeric else None,
                    "last": float(item[tuple(s - 1 for s in item.shape)]) if numeric else None,
                }

json.dump(facts, sys.stdout)
