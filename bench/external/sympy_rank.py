"""Rank over the rationals by SymPy's sparse elimination; prints rank and seconds of the elimination alone."""

import json
import sys
import time

from sympy import QQ
from sympy.polys.matrices import DomainMatrix

rows, columns, _ = sys.stdin.readline().split()
table = {}
for line in sys.stdin:
    row, column, value = map(int, line.split())
    if row > 0:
        table.setdefault(row - 1, {})[column - 1] = QQ(value)
matrix = DomainMatrix(table, (int(rows), int(columns)), QQ)
start = time.process_time()
rank = len(matrix.rref()[1])
print(json.dumps({"rank": rank, "seconds": time.process_time() - start}))
