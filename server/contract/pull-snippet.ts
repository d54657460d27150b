/** The Python lines that pull a release with NumPy and the standard library; the page shows them, a test runs them as they stand. */

export function pullSnippet(base: string, release: { campaign: string; dataset: string; version: number }): string {
  const address = `${base}/api/campaigns/${release.campaign}/datasets/${release.dataset}/releases/${release.version}`;
  return `import io, os, urllib.request
import numpy as np

def pull(what):
    request = urllib.request.Request("${address}/" + what,
                                     headers={"Authorization": "Bearer " + os.environ["PENNYWEIGHT_TOKEN"]})
    with urllib.request.urlopen(request) as answer:
        return np.load(io.BytesIO(answer.read()))

X = pull("matrix.npy?split=train")              # n x m, one snapshot a column
S = pull("matrix.npy?split=train&weighted=1")   # times the square roots of the space and time weights
a = pull("files/data/time_weights.npy")
w = pull("files/data/space_weights.npy")
mean = pull("files/data/mean.npy")
print(X.shape, S.shape, a.sum(), w.sum())
`;
}
