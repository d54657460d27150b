"""Slices of a pulled matrix with NumPy. Usage: pull-by-numpy.py WHOLE.npy SPLIT.npy TIME_WEIGHTS.npy SPACE_WEIGHTS.npy SLICE.npy COLUMNS SPLIT ROWS WEIGHTED

COLUMNS "from:to" or "all", SPLIT a code or "any", ROWS "from:to,from:to". Prints the shape, the order, and how far the slice is off.
"""
import json
import sys

import numpy as np

whole, split, a, w, pulled = (np.load(path, allow_pickle=False) for path in sys.argv[1:6])
columns, part, rows, weighted = sys.argv[6:]
chosen = np.arange(whole.shape[1])
if columns != "all":
    begin, end = (int(each) if each else None for each in columns.split(":"))
    chosen = chosen[begin:end]
if part != "any":
    chosen = chosen[split[chosen] == int(part)]
picked = np.concatenate([np.arange(*map(int, each.split(":"))) for each in rows.split(",")])
expected = whole[np.ix_(picked, chosen)]
if weighted == "true":
    expected = (expected.astype("f8") * np.sqrt(w[picked])[:, None] * np.sqrt(a[chosen])[None, :]).astype(whole.dtype)
print(json.dumps({
    "shape": list(pulled.shape), "expected": list(expected.shape), "dtype": str(pulled.dtype), "fortran": bool(pulled.flags.f_contiguous),
    "equal": bool(np.array_equal(pulled, expected)),
    "off": float(np.abs(pulled.astype("f8") - expected).max() / np.abs(expected).max()),
}))
