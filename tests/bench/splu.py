"""Solves the normal equations of a network by scipy's sparse LU, and prints how long it took and how far the steps lie apart.

The file holds rows, unknowns, entries (int32), then row starts, columns (int32), coefficients, weights, misclosures and
the step to compare with (float64).
"""

import json
import sys
import time

import numpy as np
from scipy import sparse
from scipy.sparse.linalg import splu

data = open(sys.argv[1], 'rb').read()
rows, unknowns, entries = np.frombuffer(data, np.int32, 3)
at = 12


def take(kind, count):
    global at
    values = np.frombuffer(data, kind, count, at)
    at += values.nbytes
    return values


starts, columns = take(np.int32, rows + 1), take(np.int32, entries)
coefficients, weights = take(np.float64, entries), take(np.float64, rows)
misclosures, step = take(np.float64, rows), take(np.float64, unknowns)
a = sparse.csr_matrix((coefficients, columns, starts), shape=(rows, unknowns))
seconds, other = [], None
for _ in range(3):
    began = time.process_time()
    normal = (a.T @ a.multiply(weights[:, None]).tocsr()).tocsc()
    factored = splu(normal, permc_spec='MMD_AT_PLUS_A', diag_pivot_thresh=0.0, options={'SymmetricMode': True})
    other = factored.solve(a.T @ (weights * misclosures))
    seconds.append(time.process_time() - began)
sigma = 1 / np.sqrt(normal.diagonal())
print(json.dumps({'seconds': min(seconds), 'apart': float(np.max(np.abs(step - other) / sigma)),
                  'largest': float(np.max(np.abs(step) / sigma))}))
