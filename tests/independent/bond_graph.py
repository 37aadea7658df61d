"""The relations of a bond graph, read off its nodes one by one. Nothing here knows of causality.

A graph is the JSON that `random-graph.ts` describes. Variables may be of any type that computes: arrays with their
rates, or SymPy's symbols.
"""


class Variables:
    """e and f by bond, the value of each store's port and track in `stored`, and signals by name."""

    def __init__(self, effort, flow, stored, signal):
        self.effort, self.flow, self.stored, self.signal = effort, flow, stored, signal


def ports_of(graph):
    """By node: its ports in order, as (bond, +1 where power counts into the node)."""
    ports = [[] for _ in graph["nodes"]]
    for bond, (start, end) in enumerate(graph["bonds"]):
        ports[start["node"]].append((start["port"], bond, -1))
        ports[end["node"]].append((end["port"], bond, +1))
    return [[(bond, sign) for _, bond, sign in sorted(each, key=lambda port: port[0])] for each in ports]


def stored_at(node):
    """What a node integrates at each of its ports."""
    return {"C": ["q"] * len(node["domains"]), "I": ["p"] * len(node["domains"]), "IC": ["p", "q"]}.get(node["kind"], [])


def stores_of(graph):
    """All that is integrated: (name, node, port, p or q), and tracks as (name, junction, None, None)."""
    stores = []
    for index, node in enumerate(graph["nodes"]):
        several = len(node["domains"]) > 1
        for port, variable in enumerate(stored_at(node)):
            place = "." + "abc"[port] if several else ""
            stores.append((f"{node['name']}{place}.{variable}", index, port, variable))
    return stores + [(track["name"], track["of"], None, None) for track in graph["tracks"]]


def rate_relations(graph, x):
    """The variable that each store's port or track integrates, in the order of `stores_of`."""
    ports = ports_of(graph)
    integrated = []
    for _, index, port, variable in stores_of(graph):
        if port is None:
            bond, sign = ports[index][0][0], 1
            variable = "p" if graph["nodes"][index]["kind"] == "0" else "q"
        else:
            bond, sign = ports[index][port]
        integrated.append(sign * (x.flow[bond] if variable == "q" else x.effort[bond]))
    return integrated


def laws(graph, x):
    """Everything that is zero at all times: junctions, sources, two-ports, resistors, the laws of stores."""
    ports = ports_of(graph)
    first_store = {}
    for i, (_, index, port, _) in enumerate(stores_of(graph)):
        if port == 0:
            first_store[index] = i
    for index, node in enumerate(graph["nodes"]):
        kind, own = node["kind"], ports[index]
        modulation = node["modulation"]
        factor = 1 if modulation is None else 1 + x.signal[modulation] ** 2 / 4
        if kind in ("0", "1"):
            common, summed = (x.effort, x.flow) if kind == "0" else (x.flow, x.effort)
            for bond, _ in own[1:]:
                yield common[bond] - common[own[0][0]]
            yield sum(sign * summed[bond] for bond, sign in own)
        elif kind in ("Se", "Sf"):
            yield (x.effort if kind == "Se" else x.flow)[own[0][0]] - x.signal["v_" + node["name"]]
        elif kind in ("TF", "GY"):
            (into, _), (out, _) = own
            ratio = node["matrix"][0][0] * factor
            across, back = (x.flow, x.effort) if kind == "TF" else (x.effort, x.flow)
            yield across[out] - ratio * x.flow[into]
            yield x.effort[into] - ratio * back[out]
        else:
            yield from element(node, own, x, first_store.get(index), factor)


def element(node, own, x, first_store, factor):
    """A resistor's or store's relation of one side to the other: told = M answered, or answered = M told."""
    stored = stored_at(node)
    if node["kind"] == "R":
        told = [sign * x.flow[bond] for bond, sign in own]
        answered = [x.effort[bond] for bond, _ in own]
    else:
        told = [x.stored[first_store + port] for port in range(len(own))]
        answered = [
            x.effort[bond] if stored[port] == "q" else sign * x.flow[bond] for port, (bond, sign) in enumerate(own)
        ]
    matrix = node["matrix"]
    if node["curved"]:
        (size,) = told
        shape = size * abs(size) if node["kind"] == "R" else size + size**3 / 10
        yield answered[0] - matrix[0][0] * shape
        return
    left, right = (told, answered) if node["inverse"] else (answered, told)
    for row, value in zip(matrix, left):
        yield value - factor * sum(entry * other for entry, other in zip(row, right))
