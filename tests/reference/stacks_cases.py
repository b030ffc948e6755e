"""The stacks that stacks.py solves: random ones (fixed seed) and deliberately hard ones.

Only inputs are made here; every number is a double. Run stacks.py, not this file.
Ranges of the random stacks: 1-12 layers, resistivity 1e-8..1e2 ohm m, lambda 1e-9..1e-4 m,
thickness/lambda 1e-4..50, r_b 0 (30 %) or 1e-17..1e-4 ohm m2 (all log-uniform), beta and gamma in
(-0.999, 0.999), half of the layers without polarization, one interface in six with spin-memory
loss delta 0.01..3, any of four ends on each side, random signs and flips.
"""
import random

SINK, REFLECT, INPLANE = {"kind": "spin sink"}, {"kind": "reflecting"}, {"kind": "fed in plane"}


def layer(resistivity, beta, lam, thickness, flips=False, sign=1):
    return {"kind": "layer", "resistivity": resistivity, "beta": beta, "lambda": lam,
            "thickness": thickness, "sign": sign, "flips": flips}


def interface(r_b, gamma=0.0, flips=False, sign=1, delta=0.0):
    return {"kind": "interface", "r_b": r_b, "gamma": gamma, "delta": delta,
            "sign": sign, "flips": flips}


def outer(resistivity, beta, lam, thickness=None, flips=False, sign=1):
    """A semi-infinite end."""
    return {**layer(resistivity, beta, lam, thickness, flips, sign), "kind": "semi-infinite"}


def stack(name, left, elements, right, **more):
    return {"name": name, "left": left, "elements": elements, "right": right, **more}


# ---------------------------------------------------------------- random stacks

def random_stacks(seed, count):
    rng = random.Random(seed)

    def log_uniform(low, high):
        return float(f"{low * (high / low) ** rng.random():.4g}")

    def asymmetry():
        return round(rng.uniform(-0.999, 0.999), 4)

    def orientation():
        return {"flips": rng.random() < 0.5, "sign": rng.choice((1, -1))}

    def section(make):
        lam = log_uniform(1e-9, 1e-4)
        thickness = float(f"{lam * log_uniform(1e-4, 50):.4g}")
        if make is outer and rng.random() < 0.5:
            thickness = None
        beta = asymmetry() if rng.random() < 0.5 else 0.0
        return make(log_uniform(1e-8, 1e2), beta, lam, thickness, **orientation())

    def contact():
        """No interface, one without resistance, or a resistive one."""
        if rng.random() < 0.3:
            return [] if rng.random() < 0.5 else [interface(0.0, asymmetry(), **orientation())]
        delta = log_uniform(0.01, 3) if rng.random() < 1 / 6 else 0.0
        return [interface(log_uniform(1e-17, 1e-4), asymmetry(), delta=delta, **orientation())]

    def end():
        kind = rng.randrange(4)
        return section(outer) if kind == 0 else dict((SINK, REFLECT, INPLANE)[kind - 1])

    stacks = []
    while len(stacks) < count:
        left, right, elements = end(), end(), []
        if left["kind"] == "semi-infinite":
            elements += contact()
        for i in range(rng.randint(1, 12)):
            elements += (contact() if i else []) + [section(layer)]
        if right["kind"] == "semi-infinite":
            elements += contact()
        sources = [e for e in (left, *elements, right)
                   if e.get("beta") or (e.get("gamma") and e.get("r_b"))]
        if len({e["flips"] for e in sources}) == 2:  # a flipping and a fixed source at least
            stacks.append(stack(f"random {len(stacks) + 1}", left, elements, right))
    return stacks


# ---------------------------------------------------------------- hard stacks

def spin_valve(name, ferro, barrier, normal, thickness, **more):
    """F/I/N/I/F with thick F; the right magnet flips. ferro: (rho, beta, lambda), barrier: (r_b, gamma)."""
    elements = [interface(*barrier), layer(normal[0], 0.0, normal[1], thickness),
                interface(*barrier, flips=True)]
    return stack(name, outer(*ferro), elements if barrier[0] else elements[1:2],
                 outer(*ferro, flips=True), **more)


def superlattice(name, left, right, bilayers, barrier, delta=0.0):
    elements = []
    for i in range(bilayers):
        odd = i % 2 == 1
        elements += [layer(7.5e-8, 0.46, 6e-8, 3e-9, flips=odd), interface(*barrier, flips=odd, delta=delta),
                     layer(6e-9, 0.0, 4.5e-7, 2e-9), interface(*barrier, flips=not odd, delta=delta)]
    elements.pop()
    n = len(elements)
    return stack(name, left, elements, right, faces=[0, 1, 2, 3, n // 2, n - 1, n])


def hard_stacks():
    cobalt, gaas = (5.913e-8, 0.46, 6e-8), (2e-3, 2e-6)
    nearly_half_metal = (1e-6, 0.9999999999, 1e-8)
    open_f, open_n = outer(*cobalt), outer(gaas[0], 0.0, gaas[1])
    valve = [layer(1e-7, 0.5, 1e-8, 2e-9), interface(5e-16, 0.7), layer(3e-8, 0.0, 3e-7, 2e-8),
             interface(5e-16, 0.7, flips=True), layer(1e-7, 0.5, 1e-8, 4e-9, flips=True)]
    thin = [layer(1e-7, 0.5, 1e-8, 1e-17), layer(2e-3, 0.0, 2e-6, 2e-15),
            layer(1e-7, 0.7, 5e-9, 5e-18, flips=True)]
    cases = [
        stack("1 - beta = 1e-10, no barrier", outer(*nearly_half_metal), [], open_n),
        spin_valve("1 - beta = 1e-10, spin valve", nearly_half_metal, (1e-12, 0.3), gaas, 1e-7),
        stack("1 - gamma = 1e-10", open_f, [interface(1e-9, 0.9999999999), layer(*gaas[:1], 0.0, gaas[1], 1e-7),
              interface(1e-9, -0.9999999999, flips=True)], outer(*cobalt, flips=True)),
        spin_valve("r_N/r_F = 1e12, no barrier", (1e-8, 0.3, 1e-9), (0.0, 0.0), (1.0, 1e-5), 1e-6),
        spin_valve("r_N/r_F = 1e12, small barrier", (1e-8, 0.3, 1e-9), (1e-16, 0.5), (1.0, 1e-5), 1e-6),
        spin_valve("r_N/r_F = 1e12, matched barrier", (1e-8, 0.3, 1e-9), (1e-5, 0.5), (1.0, 1e-5), 1e-6),
        spin_valve("thickness/lambda = 1e-9", cobalt, (4e-9, 0.5), gaas, 2e-15),
        spin_valve("thickness/lambda = 700", cobalt, (4e-9, 0.5), gaas, 1.4e-3),
        spin_valve("thickness/lambda = 2000", cobalt, (4e-9, 0.5), gaas, 4e-3),
        stack("thick magnets on sinks", SINK, [layer(*cobalt, 1.2e-4), interface(1e-10, 0.4),
              layer(2e-3, 0.0, 2e-6, 2e-15), interface(1e-10, 0.4, flips=True),
              layer(*cobalt, 4.2e-5, flips=True)], SINK),
        stack("from 1e-9 to 2000 lambda", REFLECT, [layer(1e-7, -0.8, 1e-8, 1e-17), layer(1e-8, 0.0, 1e-6, 7e-4),
              layer(1e-7, 0.9, 1e-8, 2e-5, flips=True), layer(1.0, 0.0, 1e-9, 1e-18),
              layer(1e-7, 0.6, 1e-8, 3e-9)], SINK),
        stack("1e6 ohm um2 beside 1e-17 ohm m2", open_f, [interface(1e-6, 0.6), layer(1e-7, 0.4, 1e-8, 1e-9),
              interface(1e-17, -0.8, flips=True), layer(2e-3, 0.0, 2e-6, 1e-7),
              interface(1e-6, 0.6, flips=True), layer(1e-7, 0.4, 1e-8, 1e-9, flips=True),
              interface(1e-17, 0.8)], open_n),
        spin_valve("no barrier, s = 1e-5", (1e-8, 0.6, 1e-7), (0.0, 0.0), (1e-4, 1e-3), 1e-6),
        spin_valve("r_b = 1e-13 far below r_N", cobalt, (1e-13, 0.5), gaas, 2e-7),
        stack("five-layer asymmetric stack", outer(2e-7, 0.5, 1e-8), [interface(5e-16, 0.7),
              layer(3e-8, 0.0, 3e-7, 2e-8), interface(4e-16, -0.6), layer(1e-7, -0.4, 6e-9, 5e-9, flips=True),
              interface(4e-16, -0.6, flips=True), layer(5e-8, 0.0, 1e-7, 3e-8), interface(1e-15, 0.2)],
              outer(2e-7, 0.7, 5e-9)),
        stack("single contact", open_f, [interface(4e-9, 0.5, flips=True)], open_n),
        stack("contact whose sources nearly cancel", outer(1e-7, 0.5, 7.5e-9),
              [interface(1e-15, -0.500000000001, flips=True)], outer(1e-7, 0.0, 1e-7)),
        stack("one magnet only", REFLECT, [layer(2e-3, 0.0, 2e-6, 1e-7), interface(1e-9, 0.0),
              layer(*cobalt, 1e-8, flips=True)], SINK),
        stack("both ends reflecting", REFLECT, valve, REFLECT),
        stack("both ends reflecting, all thin", REFLECT, thin, REFLECT),
        stack("both ends fed in plane", INPLANE, valve, INPLANE),
        stack("both ends fed in plane, all thin", INPLANE, thin, INPLANE),
        stack("both ends sinks, all thin", SINK, thin, SINK),
    ]
    for delta in (1e-6, 0.25, 3.0, 40.0):
        cases.append(stack(f"spin-memory loss {delta:g}", outer(1.7e-7, 0.73, 5.5e-9),
                           [interface(5e-16, 0.7, delta=delta), layer(2e-8, 0.0, 3.5e-7, 3e-7),
                            interface(5e-16, 0.7, flips=True, delta=delta)],
                           outer(1.7e-7, 0.73, 5.5e-9, flips=True)))
    cases += [superlattice("superlattice, 200 layers, open", outer(2e-8, 0.0, 1e-7), open_f, 100, (5e-16, 0.77)),
              superlattice("superlattice, 200 layers, reflecting", REFLECT, REFLECT, 100, (5e-16, 0.77)),
              superlattice("superlattice, 200 layers, lossy interfaces", SINK, INPLANE, 100, (5e-16, 0.77), 0.25)]
    kinds = {"open": outer(2e-7, -0.3, 4e-8, 1e-8, flips=True), "sink": SINK, "reflecting": REFLECT, "in plane": INPLANE}
    for a, left in kinds.items():
        for b, right in kinds.items():
            cases.append(stack(f"single layer, {a} and {b}", left, [layer(1e-7, 0.6, 5e-9, 1e-9)], right))
    return cases
