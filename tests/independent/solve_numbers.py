"""Solves all relations of bond graphs at once, with no causality, by NumPy.

Reads `[{graph, point, guess}]` on standard input; writes for each graph the efforts, flows, stored values and their
rates at the point, null where the relations leave them open. Every relation and its derivative in time is one equation in
the efforts, flows, stored values and all their rates: the derivatives settle what dependent stores leave open (E. Hairer,
G. Wanner: Solving Ordinary Differential Equations II, 2nd edition, chapter VII, reduction of the index by
differentiation; recalled from memory). Newton's method with minimum-norm steps; slopes by complex steps (W. Squire,
G. Trapp: Using complex variables to estimate derivatives of real functions, SIAM Review 40, 1998; recalled from memory).
"""

import json
import sys

import numpy

from bond_graph import Variables, laws, rate_relations, stores_of

STEP = 1e-30
EPSILON = numpy.finfo(float).eps


class Moving:
    """A value with its rate; each may be an array."""

    __array_ufunc__ = None

    def __init__(self, value, rate=0.0):
        self.value, self.rate = value, rate

    def __add__(self, other):
        other = moving(other)
        return Moving(self.value + other.value, self.rate + other.rate)

    def __mul__(self, other):
        other = moving(other)
        return Moving(self.value * other.value, self.rate * other.value + self.value * other.rate)

    def __truediv__(self, number):
        return self * (1 / number)

    def __pow__(self, power):
        return Moving(self.value**power, power * self.value ** (power - 1) * self.rate)

    def __abs__(self):
        side = numpy.sign(numpy.real(self.value))
        return Moving(side * self.value, side * self.rate)

    def __neg__(self):
        return self * -1

    def __sub__(self, other):
        return self + -moving(other)

    def __rsub__(self, other):
        return -self + other

    __radd__ = __add__
    __rmul__ = __mul__


def moving(value):
    return value if isinstance(value, Moving) else Moving(value)


class System:
    """Unknowns: e, f, e', f' by bond, then z, z' by store."""

    def __init__(self, graph, point):
        self.graph, self.point = graph, point
        self.bonds, self.stores = len(graph["bonds"]), stores_of(graph)
        self.size = 4 * self.bonds + 2 * len(self.stores)
        self.given = [
            (4 * self.bonds + i, point["stored"][name])
            for i, (name, *_) in enumerate(self.stores)
            if name in point["stored"]
        ]

    def relations(self, x):
        """The residuals, as rows, for unknowns as rows; columns are tried side by side."""
        n, z = self.bonds, 4 * self.bonds
        stored = [Moving(x[z + i], x[z + len(self.stores) + i]) for i in range(len(self.stores))]
        signal = {name: Moving(*pair) for name, pair in self.point["signals"].items()}
        signal.update({store[0]: value for store, value in zip(self.stores, stored) if store[2] is None})
        effort = [Moving(x[i], x[2 * n + i]) for i in range(n)]
        flow = [Moving(x[n + i], x[3 * n + i]) for i in range(n)]
        variables = Variables(effort, flow, stored, signal)
        rows = []
        for law in laws(self.graph, variables):
            rows += [law.value, law.rate]
        for value, integrated in zip(stored, rate_relations(self.graph, variables)):
            rows.append(value.rate - integrated.value)
        return numpy.array(rows)

    def slopes(self, x):
        columns = numpy.repeat(x[:, None].astype(complex), self.size, axis=1)
        columns[numpy.arange(self.size), numpy.arange(self.size)] += 1j * STEP
        tried = self.relations(columns)
        return numpy.real(tried[:, 0]), numpy.imag(tried) / STEP

    def solve(self, guess):
        x = self.start(guess)
        for _ in range(50):
            residual, jacobian = self.slopes(x)
            pins = numpy.zeros((len(self.given), self.size))
            for row, (column, _) in enumerate(self.given):
                pins[row, column] = 1
            residual = numpy.concatenate([residual, [x[column] - value for column, value in self.given]])
            matrix = numpy.vstack([jacobian, pins])
            left, sizes, right = numpy.linalg.svd(matrix)
            rank = int(numpy.sum(sizes > 1e-10 * sizes[0]))
            step = right[:rank].T @ ((left[:, :rank].T @ residual) / sizes[:rank])
            x = x - step
            if numpy.max(numpy.abs(step)) < 1e-13 * (1 + numpy.max(numpy.abs(x))):
                break
        condition = sizes[0] / sizes[rank - 1]
        free = numpy.max(numpy.abs(right[rank:]), axis=0, initial=0) > 1e-7
        scale = numpy.max(numpy.abs(matrix) @ numpy.abs(x)) + 1
        return x, {
            "left": float(numpy.max(numpy.abs(self.slopes(x)[0])) / scale),
            "uncertainty": float(4 * EPSILON * condition * numpy.linalg.norm(x)),
            "order": self.order(jacobian),
            "undetermined": self.undetermined(jacobian),
            "free": free,
        }

    def start(self, guess):
        x = numpy.zeros(self.size)
        if guess is not None:
            x[: self.bonds], x[self.bonds : 2 * self.bonds] = guess["efforts"], guess["flows"]
        for column, value in self.given:
            x[column] = value
        return x

    def order(self, jacobian):
        """How many stored values may be chosen: all, less the ties that are left when everything else is eliminated."""
        z = slice(4 * self.bonds, 4 * self.bonds + len(self.stores))
        others = numpy.delete(jacobian, z, axis=1)
        rank = lambda matrix: numpy.linalg.matrix_rank(matrix, tol=1e-10 * numpy.linalg.norm(jacobian, 2))
        tracks = sum(1 for store in self.stores if store[2] is None)
        return int(len(self.stores) - tracks - (rank(jacobian) - rank(others)))


    def undetermined(self, jacobian):
        """How many of the efforts, flows, stored values and their rates stay open once the stored values are known."""
        _, sizes, right = numpy.linalg.svd(jacobian)
        rank = int(numpy.sum(sizes > 1e-10 * sizes[0]))
        z = slice(4 * self.bonds, 4 * self.bonds + len(self.stores))
        kept = numpy.r_[0 : 2 * self.bonds, 4 * self.bonds : self.size]
        dimension = lambda columns: numpy.linalg.matrix_rank(right[rank:][:, columns], tol=1e-8)
        return int(dimension(kept) - dimension(z))


def answer(case):
    system = System(case["graph"], case["point"])
    x, told = system.solve(case.get("guess"))
    free = told.pop("free")
    values = [None if open else float(value) for value, open in zip(x, free)]
    n, z = system.bonds, 4 * system.bonds
    names = [name for name, *_ in system.stores]
    return {
        **told,
        "efforts": values[:n],
        "flows": values[n : 2 * n],
        "stored": dict(zip(names, values[z:])),
        "rates": dict(zip(names, values[z + len(names) :])),
    }


json.dump([answer(case) for case in json.load(sys.stdin)], sys.stdout)
