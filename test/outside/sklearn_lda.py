"""Fits scikit-learn's batch LDA to counts and times it: python3 sklearn_lda.py IN OUT

IN   one line of JSON (passages, words, entries, themes, alpha, eta, steps, seed), then the counts in
     compressed sparse rows: offsets and indices as int32, counts as float32, little endian.
OUT  one line of JSON (version, seconds, steps), then components_ as float64, themes by rows.

Exit code 3: scikit-learn is not installed.
"""

import json
import sys
import time

try:
    import numpy
    import scipy.sparse
    import sklearn
    from sklearn.decomposition import LatentDirichletAllocation
except ImportError:
    sys.exit(3)

with open(sys.argv[1], "rb") as file:
    head = json.loads(file.readline())

    def read(kind, size):
        return numpy.frombuffer(file.read(4 * size), dtype=kind)

    offsets = read("<i4", head["passages"] + 1)
    indices = read("<i4", head["entries"])
    counts = read("<f4", head["entries"]).astype(numpy.float64)

table = scipy.sparse.csr_matrix(
    (counts, indices, offsets), shape=(head["passages"], head["words"])
)
model = LatentDirichletAllocation(
    n_components=head["themes"],
    doc_topic_prior=head["alpha"],
    topic_word_prior=head["eta"],
    learning_method="batch",
    max_iter=head["steps"],
    random_state=head["seed"],
    n_jobs=1,
)
began = time.perf_counter()
model.fit(table)
seconds = time.perf_counter() - began

with open(sys.argv[2], "wb") as file:
    said = {"version": sklearn.__version__, "seconds": seconds, "steps": int(model.n_iter_)}
    file.write((json.dumps(said) + "\n").encode())
    file.write(numpy.ascontiguousarray(model.components_, dtype="<f8").tobytes())
