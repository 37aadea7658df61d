"""An N×N grid of equal resistors with a known potential at each corner.

    python3 grid.py sympy 10        linsolve in numbers: potentials and currents
    python3 grid.py scipy 50        splu, sparse: potentials, for each corner in turn

Prints CPU seconds and the number of unknowns.
"""

import sys
import time

RESISTANCE = 10.5
method, n = sys.argv[1], int(sys.argv[2])
corners = [(0, 0), (0, n - 1), (n - 1, 0), (n - 1, n - 1)]
points = [(i, j) for i in range(n) for j in range(n)]
edges = [(a, b) for a in points for b in [(a[0], a[1] + 1), (a[0] + 1, a[1])] if max(b) < n]
free = [point for point in points if point not in corners]


def with_sympy():
    from sympy import Add, Symbol, linsolve

    began = time.process_time()
    potential = {point: corners.index(point) + 1 if point in corners else Symbol(f"v{point}") for point in points}
    currents, equations = [], []
    leaving = {point: [] for point in points}
    for a, b in edges:
        current = Symbol(f"i{a}{b}")
        currents.append(current)
        equations.append(potential[a] - potential[b] - RESISTANCE * current)
        leaving[a].append(current)
        leaving[b].append(-current)
    equations += [Add(*leaving[point]) for point in free]
    unknowns = [potential[point] for point in free] + currents
    (solution,) = linsolve(equations, unknowns)
    return time.process_time() - began, len(solution)


def with_scipy():
    import numpy
    from scipy.sparse import coo_matrix
    from scipy.sparse.linalg import splu

    index = {point: k for k, point in enumerate(free)}
    entries, sides = [], []
    for one, other in edges:
        for a, b in [(one, other), (other, one)]:
            if a not in index:
                continue
            entries.append((index[a], index[a], 1 / RESISTANCE))
            if b in index:
                entries.append((index[a], index[b], -1 / RESISTANCE))
            else:
                sides.append((index[a], corners.index(b)))
    best = float("inf")
    for _ in range(5):
        began = time.process_time()
        rows, columns, values = numpy.array(entries).T
        matrix = coo_matrix((values, (rows.astype(int), columns.astype(int)))).tocsc()
        right = numpy.zeros((len(free), 4))
        for row, corner in sides:
            right[row, corner] += 1 / RESISTANCE
        solution = splu(matrix).solve(right)
        best = min(best, time.process_time() - began)
    return best, len(solution)


print(*(with_sympy() if method == "sympy" else with_scipy()))
