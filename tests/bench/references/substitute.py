"""SymPy as an engineer would use it by hand: the equations of one family, variable by variable, in causal order.

    python3 substitute.py F1 1000

Every effort and flow is given in terms of what stands before it, and what is known is put in at once with `subs`, or
with `xreplace` where that is the third argument. Nothing is parsed, no stroke is sought and nothing is checked: the
order stands in the program. Prints CPU seconds and the number of equations.
"""

import sys
import threading
import time

import sympy
from sympy import Abs, Symbol, sign, sqrt

known = {}
exact = sys.argv[3:] == ["xreplace"]


def put(name, right):
    """Gives a variable its value in states, inputs and parameters; returns the variable."""
    variable = Symbol(name)
    if exact:
        known[variable] = right.xreplace(known)
    else:
        known[variable] = right.subs({symbol: known[symbol] for symbol in right.free_symbols if symbol in known})
    return variable


def row_of_cells(n):
    m, k, d, push = sympy.symbols("m k d F")
    v = [put(f"m{i}.f", Symbol(f"m{i}.p") / m) for i in range(1, n + 1)] + [sympy.Integer(0)]
    rates = []
    before = push
    for i in range(n):
        left = put(f"v{i}l{i}.f", v[i])
        right = put(f"l{i}v{i + 1}.f", v[i + 1])
        stretch = put(f"l{i}s{i}.f", left - right)
        spring_f = put(f"s{i}k{i}.f", stretch)
        damper_f = put(f"s{i}d{i}.f", stretch)
        spring = put(f"s{i}k{i}.e", k * Symbol(f"k{i}.q"))
        damper = put(f"s{i}d{i}.e", d * damper_f)
        total = put(f"l{i}s{i}.e", spring + damper)
        near = put(f"v{i}l{i}.e", total)
        rates += [put(f"v{i}m{i}.e", before - near), spring_f]
        before = put(f"l{i}v{i + 1}.e", total)
    return rates


def ladder_with_motor(n):
    r, l, c, r_a, l_a, k_m, j, ratio, b, u = sympy.symbols("R L C R_a L_a k_m J n b u")
    flows = [put(f"L{i}.f", Symbol(f"L{i}.p") / l) for i in range(n)]
    armature = put("L_a.f", Symbol("L_a.p") / l_a)
    rates = []
    before = u
    for i in range(n):
        resistor_f = put(f"a{i}R{i}.f", flows[i])
        resistor = put(f"a{i}R{i}.e", r * resistor_f)
        through = put(f"a{i}c{i}.f", flows[i])
        into = put(f"in{i}.f", flows[i])
        capacitor = put(f"c{i}C{i}.e", Symbol(f"C{i}.q") / c)
        node = put(f"a{i}c{i}.e", capacitor)
        rates.append(put(f"a{i}L{i}.e", before - resistor - node))
        onward = flows[i + 1] if i + 1 < n else armature
        rates.append(put(f"c{i}C{i}.f", through - put(f"c{i}a{i + 1}.f", onward)))
        before = put(f"c{i}a{i + 1}.e", capacitor)
    turning = put("rotor.f", Symbol("rotor.p") / j)
    back = put("motor.in.e", k_m * turning)
    rates.append(put("L_a.e", before - put("R_a.e", r_a * armature) - back))
    drum = put("gear.out.f", ratio * turning)
    load = put("load.e", b * drum)
    rates.append(put("rotor.e", put("motor.out.e", k_m * armature) - put("gear.in.e", ratio * load)))
    return rates


def hydraulic_line(n):
    c, k, a, m, b, q = sympy.symbols("C_h K A m b Q")
    pressures = [put(f"C{i}.e", Symbol(f"C{i}.q") / c) for i in range(n)]
    chamber = put("oil.e", Symbol("oil.q") / c)
    speed = put("mass.f", Symbol("mass.p") / m)
    rates = []
    before = q
    for i in range(n):
        near = put(f"p{i}o{i}.e", pressures[i])
        far = put(f"o{i}p{i + 1}.e", pressures[i + 1] if i + 1 < n else chamber)
        drop = put(f"o{i}K{i}.e", near - far)
        orifice = put(f"o{i}K{i}.f", k * sqrt(Abs(drop)) * sign(drop))
        through = put(f"p{i}o{i}.f", orifice)
        rates.append(put(f"p{i}C{i}.f", before - through))
        before = put(f"o{i}p{i + 1}.f", orifice)
    rates.append(put("oil.f", before - put("cylinder.in.f", a * speed)))
    rates.append(put("mass.e", put("cylinder.out.e", a * chamber) - put("seal.e", b * speed)))
    return rates


def geared_inertias(n):
    j, r, b, torque, state, rate = sympy.symbols("J r b M J1.p J1.rate")
    speed = put("J1.f", state / j)
    # Speeds down the gears, and from each the follower's momentum and the rate of it.
    rates = []
    for i in range(1, n):
        speed = put(f"g{i}.out.f", r * speed)
        momentum = put(f"J{i + 1}.p", j * speed)
        rates.append(put(f"J{i + 1}.e", known[momentum].diff(state) * rate))
    back = sympy.Integer(0)
    for i in range(n - 1, 0, -1):
        back = put(f"g{i}.in.e", r * (rates[i - 1] + back))
    first = put("J1.e", torque - put("friction.e", b * Symbol("J1.f")) - back)
    inertia = known[first].diff(rate)
    known[first] = known[first].subs(rate, 0) / (1 - inertia)
    return [first, *rates]


FAMILIES = {"F1": row_of_cells, "F2": ladder_with_motor, "F3": hydraulic_line, "F5": geared_inertias}



def measure():
    family, size = sys.argv[1], int(sys.argv[2])
    began = time.process_time()
    equations = [known[rate] for rate in FAMILIES[family](size)]
    texts = [str(equation) for equation in equations]
    print(time.process_time() - began, len(texts))


# SymPy goes down by recursion: a thousand gears need a deeper stack than the first thread has.
sys.setrecursionlimit(1_000_000)
threading.stack_size(512 << 20)
worker = threading.Thread(target=measure)
worker.start()
worker.join()
