"""Solves all relations of linear bond graphs at once, in symbols, with no causality, by SymPy.

Reads `[{graph, independent, claimed}]` on standard input, where `claimed` are expressions for the values and rates of the
stores, as nested lists; writes for each graph the names of those that do not follow from the relations, exactly.
The unknowns are the efforts, flows, stored values and all their rates; parameters, independent states and inputs with
their rates stand as symbols. The elimination is sparse and over the field of rational functions of these.
"""

import json
import operator
import sys
from functools import reduce

from sympy import QQ, Integer, Rational, Symbol, ring
from sympy.polys.solvers import solve_lin_sys

from bond_graph import Variables, laws, rate_relations, stores_of


def case_answer(case):
    graph, independent = case["graph"], set(case["independent"])
    stores = [name for name, *_ in stores_of(graph)]
    bonds = range(len(graph["bonds"]))

    known = {name: Symbol(f"x_{i}") for i, name in enumerate(stores) if name in independent}
    known["time"] = Symbol("t")
    rates_known = {known["time"]: Integer(1)}
    for i, each in enumerate(graph["inputs"]):
        known[each["name"]], known[each["name"] + "'"] = Symbol(f"u_{i}"), Symbol(f"du_{i}")
        rates_known[known[each["name"]]] = known[each["name"] + "'"]
    graph = with_symbols(graph, known)

    e, f, de, df = ([Symbol(f"{kind}_{bond}") for bond in bonds] for kind in ("e", "f", "de", "df"))
    z = [known.get(name, Symbol(f"z_{i}")) for i, name in enumerate(stores)]
    dz = [Symbol(f"dz_{i}") for i in range(len(stores))]
    variables = Variables(e, f, z, known)
    moving = {**dict(zip(e + f + z, de + df + dz)), **rates_known}

    relations = []
    for law in laws(graph, variables):
        relations.append(law)
        relations.append(sum(law.diff(each) * moving[each] for each in law.free_symbols if each in moving))
    relations += [rate - integrated for rate, integrated in zip(dz, rate_relations(graph, variables))]

    # What stands only in straight terms need not be in the field: such known symbols come last, and stay free.
    unknowns = e + f + de + df + [each for each in z if each not in known.values()] + dz
    straight = [each for each in known.values() if is_straight(each, relations)]
    straight += [each for each in rates_known.values() if is_straight(each, relations)]
    symbols = {symbol for relation in relations for symbol in relation.free_symbols}
    field = QQ.frac_field(*sorted(symbols - set(unknowns) - set(straight), key=str), Symbol("one_more"))
    polynomials, *generators = ring(unknowns + straight, field)
    equations = [polynomials.from_expr(relation) for relation in relations if relation != 0]
    solution = solve_lin_sys(equations, polynomials)
    if solution is None:
        return ["the relations contradict each other"]
    found = {str(unknown): value.as_expr() for unknown, value in solution.items()}

    everything = QQ.frac_field(*sorted(symbols | set(known.values()), key=str))
    wrong = []
    for name, sides in case["claimed"].items():
        index = stores.index(name)
        for side, unknown in (("value", z[index]), ("rate", dz[index])):
            follows = found.get(str(unknown), unknown)
            claimed = expression(sides[side], known)
            if everything.from_sympy(follows) - everything.from_sympy(claimed) != 0:
                wrong.append(f"{side} of {name}: {claimed} is claimed, {follows} follows")
    return wrong


def is_straight(symbol, relations):
    return symbol.is_Symbol and all(relation.diff(symbol).is_number for relation in relations)


def with_symbols(graph, known):
    """The entries of matrices as symbols: equal ones across the diagonal of a field are one and the same number."""
    nodes = []
    for node in graph["nodes"]:
        matrix = [
            [parameter(node, i, j, known) for j in range(len(row))] for i, row in enumerate(node["matrix"])
        ]
        nodes.append({**node, "matrix": matrix})
    return {**graph, "nodes": nodes}


def parameter(node, i, j, known):
    two_port = node["kind"] in ("TF", "GY")
    mine = f"v_{node['name']}" if two_port else f"v_{node['name']}_{min(i, j)}{max(i, j)}"
    symbol = known.setdefault(mine, Symbol(f"k_{len(known)}"))
    if not two_port:
        known[f"v_{node['name']}_{i}{j}"] = known[f"v_{node['name']}_{j}{i}"] = symbol
    return symbol


def expression(tree, known):
    """`["sum", …]`, `["product", …]`, `["power", base, exponent]`, a number, or a symbol's name."""
    if isinstance(tree, str):
        return known[tree]
    if isinstance(tree, (int, float)):
        return Rational(tree)
    head, *args = tree
    args = [expression(arg, known) for arg in args]
    if head == "sum":
        return reduce(operator.add, args)
    if head == "product":
        return reduce(operator.mul, args)
    if head == "power":
        return args[0] ** args[1]
    raise ValueError(f"no rational function: {head}")


json.dump([case_answer(case) for case in json.load(sys.stdin)], sys.stdout)
