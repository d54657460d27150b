"""Stamps and axes as NumPy, text files and calendars make them, with NumPy's own measure of each. Invented data.
Prints one JSON object: name -> {stamps, dtype, verdict, gaps}; verdicts are how the stamps were made, not how they look."""
import io
import json

import numpy as np

records = {}


def add(name, stamps, verdict, gaps=()):
    stamps = np.asarray(stamps)
    records[name] = {"stamps": stamps.astype("f8").tolist(), "dtype": str(stamps.dtype), "verdict": verdict, "gaps": list(gaps)}


def printed(stamps, form):
    text = io.StringIO()
    np.savetxt(text, stamps, fmt=form)
    text.seek(0)
    return np.loadtxt(text)


even = np.linspace(0, 12.7, 401)
add("linspace", even, "even")
add("arange", np.arange(1000) * 0.003, "even")
add("cumsum", np.cumsum(np.full(2000, 0.003)), "even")
add("linspace float32", even.astype("f4"), "rounded")
add("linspace float32, far from zero", np.linspace(1e5, 1e5 + 4, 401).astype("f4"), "rounded")
add("sums in float32", np.cumsum(np.full(3000, 0.003, "f4"), dtype="f4"), "rounded")
add("linspace in half precision", np.linspace(0, 1, 21).astype("f2"), "rounded")
add("savetxt %.6g", printed(np.linspace(1, 13.7, 301), "%.6g"), "rounded")
add("savetxt %.4e", printed(np.linspace(1, 9.7, 102), "%.4e"), "rounded")
add("savetxt %.5f", printed(np.linspace(0, 1, 301), "%.5f"), "rounded")
add("savetxt %.12e", printed(np.linspace(0, 0.9, 308), "%.12e"), "rounded")
add("savetxt %.18e, NumPy's default", printed(np.linspace(0, 1, 301), "%.18e"), "even")
add("geomspace", np.geomspace(1e-3, 10, 101), "uneven")
months = np.arange("2001-01", "2003-01", dtype="datetime64[M]").astype("datetime64[D]")
add("months in days", (months - months[0]).astype("f8"), "uneven")
# Whole days round a grid of 365.25 days: not to be told from it.
add("years of 365 and 366 days", (np.arange("1996", "2010", dtype="datetime64[Y]").astype("datetime64[D]") - np.datetime64("1996-01-01")).astype("f8"), "rounded")
days = (np.arange("2001-01-01", "2002-01-01", dtype="datetime64[D]") - np.datetime64("2001-01-01")).astype("f8")
add("days of a year", days, "even")
rng = np.random.default_rng(20261201)
add("jitter of 2 %", even + 0.02 * even[1] * rng.uniform(-1, 1, 401), "uneven")
walk = np.cumsum(np.r_[0, 0.01 * np.exp(np.cumsum(0.05 * rng.standard_normal(400)))])
add("random walk of the step", walk, "uneven")

# Gaps against NumPy's own running median over five intervals before and five after, both sides.
lost = np.delete(np.arange(300) * 0.1, np.r_[50:60, 200:203, 203:240])
h = np.diff(lost)
sides = [(np.median(h[max(0, i - 5) : i]), np.median(h[i + 1 : i + 6])) for i in range(5, len(h) - 5)]
add("outputs lost", lost, "uneven", [i + 5 for i, side in enumerate(sides) if h[i + 5] > 3 * max(side)])
print(json.dumps(records))
