"""Reference solutions of one-dimensional collinear spin-transport stacks, written to stacks.json.

Model (two-channel diffusion, Valet and Fert 1993; j = 1 A/m2 throughout)
  layer      u'' = u/lambda^2,  J = beta j - (lambda/r) u',  r = rho lambda/(1 - beta^2)
  interface  J continuous,  u_right = u_left - r_b (J - gamma j)
  interface with spin-memory loss delta > 0: a layer with T = delta, r = r_b/delta,
             asymmetry gamma and rho t = r_b (1 - gamma^2)
  resistance RA = sum_layers [rho t + beta (u_right - u_left)/j] + sum_interfaces r_b (1 - gamma J/j)
A reversed magnetization changes the sign of its beta or gamma.

Ends, each side on its own
  semi-infinite  an outer medium with its own numbers in which u decays; adds rho times its stated
                 thickness (rho lambda if null) and beta times the change of u to u = 0
  spin sink      u = 0 at the outer face of the outermost layer
  reflecting     J = 0 there
  fed in plane   J = beta j of the outermost layer there (its u is replaced by 0 in the sum for RA)

Method
  u = A exp((x - t)/lambda) + B exp(-x/lambda) in every layer. All boundary and matching conditions
  form one linear system for all A, B, solved by Gaussian elimination with scaled row pivoting in
  mpmath: first with 60 digits, then with doubled digits until every stored number repeats to 30
  digits of its scale. The change of resistance is the plain difference RA_AP - RA_P at that
  precision. It must also agree with its sum over pairs of sources (reciprocity), which gives its
  scale. No impedances, recursions or transfer matrices are used.

Library: mpmath (see requirements.txt). Run: python3 tests/reference/stacks.py   (about 1-3 minutes)
"""
import json
import pathlib
import platform

import mpmath
from mpmath import mp, mpf

SEED = 20260117
RANDOM_STACKS = 120
AGREE = mpf(10) ** -30
OPEN, SINK, REFLECT, INPLANE = "semi-infinite", "spin sink", "reflecting", "fed in plane"


# ---------------------------------------------------------------- the boundary-value problem

class Medium:
    """A layer, a lossy interface or a semi-infinite end: u and J on its sides as linear forms."""

    def __init__(self, element, source, first_unknown, side=None):
        sign = element["sign"]
        self.source, self.side, self.k = source, side, first_unknown
        if element["kind"] == "interface":
            r_b, delta = mpf(element["r_b"]), mpf(element["delta"])
            self.beta = sign * mpf(element["gamma"])
            self.r, reduced = r_b / delta, delta
            self.ohmic = r_b * (1 - self.beta ** 2)
        else:
            rho, lam = mpf(element["resistivity"]), mpf(element["lambda"])
            thickness = lam if element["thickness"] is None else mpf(element["thickness"])
            self.beta = sign * mpf(element["beta"])
            self.r, reduced = rho * lam / (1 - self.beta ** 2), thickness / lam
            self.ohmic = rho * thickness
        self.decay = mp.exp(-reduced)
        self.unknowns = 2 if side is None else 1

    def forms(self, at):
        """Coefficients of u and of J - beta j at the side `at` ("left" or "right")."""
        k = self.k
        if self.side == "left":  # u = C exp(x/lambda)
            return {k: mpf(1)}, {k: -1 / self.r}
        if self.side == "right":  # u = C exp(-x/lambda)
            return {k: mpf(1)}, {k: 1 / self.r}
        a, b = (self.decay, mpf(1)) if at == "left" else (mpf(1), self.decay)
        return {k: a, k + 1: b}, {k: -a / self.r, k + 1: b / self.r}


def eliminate(rows, rhs):
    """Solve the system in place; rows are dicts {unknown: coefficient}, rhs holds all columns."""
    size = len(rows)
    for c in range(size):
        pivot = max((i for i in range(c, size) if rows[i].get(c)),
                    key=lambda i: abs(rows[i][c]) / max(abs(v) for v in rows[i].values()))
        rows[c], rows[pivot], rhs[c], rhs[pivot] = rows[pivot], rows[c], rhs[pivot], rhs[c]
        for i in range(c + 1, size):
            if rows[i].get(c):
                factor = rows[i].pop(c) / rows[c][c]
                for key, value in rows[c].items():
                    if key != c:
                        rows[i][key] = rows[i].get(key, mpf(0)) - factor * value
                rhs[i] = [x - factor * y if y else x for x, y in zip(rhs[i], rhs[c])]
    x = [None] * size
    for c in reversed(range(size)):
        total = rhs[c]
        for key, value in rows[c].items():
            if key != c:
                total = [s - value * y for s, y in zip(total, x[key])]
        x[c] = [s / rows[c][c] for s in total]
    return x


def solve(stack, digits):
    """All stored quantities of a stack as a list of (name, value, scale)."""
    mp.dps = digits
    left, right = stack["left"], stack["right"]
    chain = [left] * (left["kind"] == OPEN) + stack["elements"] + [right] * (right["kind"] == OPEN)
    media, joints, unknowns = {}, {}, 0  # keyed by the position in the chain
    for i, element in enumerate(chain):
        if element["kind"] == "interface" and not element["delta"]:
            joints[i] = (mpf(element["r_b"]), element["sign"] * mpf(element["gamma"]))
            continue
        outer = element["kind"] == OPEN
        side = None if not outer else "left" if i == 0 and left["kind"] == OPEN else "right"
        media[i] = Medium(element, i, unknowns, side)
        unknowns += media[i].unknowns
    # columns: parallel, antiparallel, then each source alone (as it is in the parallel state)
    flips = [e["flips"] for e in chain]
    states = [[mpf(1)] * len(chain), [mpf(-1 if f else 1) for f in flips]]
    weights = states + [[mpf(i == k) for i in range(len(chain))] for k in range(len(chain))]

    def drive(i, value):
        return [w[i] * value for w in weights]

    def minus(p, q):
        return {k: p.get(k, mpf(0)) - q.get(k, mpf(0)) for k in {**p, **q}}

    rows, rhs = [], []

    def equation(form, constant):
        rows.append(form)
        rhs.append(constant)

    positions = sorted(media)
    for end, at, i in ((left, "left", positions[0]), (right, "right", positions[-1])):
        if end["kind"] == SINK:
            equation(media[i].forms(at)[0], drive(i, mpf(0)))
        elif end["kind"] == REFLECT:
            equation(media[i].forms(at)[1], drive(i, -media[i].beta))
        elif end["kind"] == INPLANE:
            equation(media[i].forms(at)[1], drive(i, mpf(0)))
    for p, q in zip(positions, positions[1:]):
        (u1, j1), (u2, j2) = media[p].forms("right"), media[q].forms("left")
        b1, b2 = drive(p, media[p].beta), drive(q, media[q].beta)
        equation(minus(j1, j2), [y - x for x, y in zip(b1, b2)])
        jump, constant = minus(u2, u1), drive(p, mpf(0))
        if q == p + 2:  # u2 - u1 + r_b J = r_b gamma
            r_b, gamma = joints[p + 1]
            jump = minus(jump, {k: -r_b * v for k, v in j1.items()})
            constant = [r_b * (g - b) for g, b in zip(drive(p + 1, gamma), b1)]
        equation(jump, constant)
    x = eliminate(rows, rhs)

    def columns(form, constant):
        return [sum(v * x[k][c] for k, v in form.items()) + constant[c] for c in range(len(weights))]

    zero = drive(0, mpf(0))
    sides = {}
    for i, m in media.items():
        for at in ("left", "right"):
            u, j = m.forms(at)
            sides[i, at] = [columns(j, drive(i, m.beta)), columns(u, zero)]
    for end, key in ((left, (positions[0], "left")), (right, (positions[-1], "right"))):
        if end["kind"] == SINK:  # imposed values hold exactly
            sides[key][1] = zero
        elif end["kind"] == REFLECT:
            sides[key][0] = zero
        elif end["kind"] == INPLANE:
            sides[key][0] = drive(key[0], media[key[0]].beta)

    # what each element adds to RA beyond its ohmic part, for every column (parallel signs)
    ohmic, reading = mpf(0), {}
    for i, m in media.items():
        u_left, u_right = sides[i, "left"][1], sides[i, "right"][1]
        if i == positions[0] and left["kind"] in (OPEN, INPLANE):
            u_left = zero
        if i == positions[-1] and right["kind"] in (OPEN, INPLANE):
            u_right = zero
        ohmic += m.ohmic
        reading[i] = [m.beta * (b - a) for a, b in zip(u_left, u_right)]
    for i, (r_b, gamma) in joints.items():
        ohmic += r_b
        reading[i] = [-gamma * r_b * j for j in sides[i - 1, "right"][0]]
    ra = [ohmic + sum(w[i] * reading[i][c] for i in reading) for c, w in enumerate(states)]
    pairs = [-4 * reading[i][2 + k] for i in reading for k in range(len(chain)) if flips[k] > flips[i]]
    delta, delta_scale = ra[1] - ra[0], sum(abs(p) for p in pairs) + mpf(0)
    if not delta_scale:  # nothing flips, or everything does
        assert abs(delta) <= mpf(10) ** (15 - digits) * (ra[0] + sum(abs(v[0]) for v in reading.values()))
        delta = mpf(0)

    out = [("ra_parallel", ra[0], ra[0]), ("ra_antiparallel", ra[1], ra[1]),
           ("delta_ra", delta, delta_scale), ("delta_ra_scale", delta_scale, delta_scale),
           ("pairs", sum(pairs), delta_scale)]
    first = int(left["kind"] == OPEN)
    for face in stack["faces"]:
        before, after = first + face - 1, first + face
        key = (before, "right") if before in media else (after, "left")
        for name, values in zip(("J", "u"), sides[key]):
            scale = sum(abs(v) for v in values[2:])
            out += [(f"parallel {name}", values[0], scale), (f"antiparallel {name}", values[1], scale)]
            out += [(f"scale {name}", scale, scale)]
    return out


def reference(stack):
    """The solved stack in the layout of the file; digits are doubled until the values repeat."""
    stack.setdefault("faces", list(range(len(stack["elements"]) + 1)))
    digits, old = 60, solve(stack, 60)
    while True:
        new = solve(stack, 2 * digits)
        named = {name: value for name, value, _ in new[:5]}
        difference = abs(named["delta_ra"] - named["pairs"])
        repeats = all(abs(a - b) <= AGREE * s for (_, a, _), (_, b, s) in zip(old, new))
        if repeats and difference <= AGREE * named["delta_ra_scale"]:
            break
        digits, old = 2 * digits, new
        assert digits < 5000, stack["name"]

    def texts(name):
        return [mp.nstr(v, 25) for n, v, _ in new if n == name]

    result = {n: mp.nstr(named[n], 25)
              for n in ("ra_parallel", "ra_antiparallel", "delta_ra", "delta_ra_scale")}
    for group in ("parallel", "antiparallel", "scale"):
        result[group] = {q: texts(f"{group} {q}") for q in ("J", "u")}
    return {**stack, "digits": digits, "result": result}


ABOUT = {
    "script": "tests/reference/stacks.py (stacks from stacks_cases.py)",
    "libraries": f"mpmath {mpmath.__version__}, Python {platform.python_version()}",
    "units": "SI; resistivity in ohm m, lambda and thickness in m, r_b and RA in ohm m2; "
             "j = 1 A/m2, J in A/m2, u = (V_up - V_down)/2 in V",
    "inputs": "JSON numbers, each meaning the exact value of the nearest double",
    "results": "decimal strings with 25 digits, good to 1e-25 of their scale; tiny ones may underflow a double",
    "stack": "left end, elements from left to right, right end. Ends: semi-infinite (with its own "
             "resistivity, beta, lambda, thickness or null), spin sink, reflecting, fed in plane",
    "sign": "+1 or -1, multiplies beta or gamma in both states; flips: reversed in the antiparallel state",
    "faces": "face k lies between elements[k-1] and elements[k]; 0 and the last are the outer faces; "
             "J and u are listed in the order of `faces`",
    "scale": "sum over the single sources (one beta or gamma driven alone) of |J| and of |u|",
    "delta_ra": "ra_antiparallel - ra_parallel; delta_ra_scale sums |contribution| over all pairs of a "
                "flipping and a fixed source: read the error of delta_ra against it",
    "digits": "working digits at which the results already repeated (checked at twice as many)",
    "seed": SEED,
}


def main():
    """Solve all stacks and write stacks.json beside this script."""
    from stacks_cases import hard_stacks, random_stacks
    stacks = []
    for stack in random_stacks(SEED, RANDOM_STACKS) + hard_stacks():
        stacks.append(reference(stack))
        mp.dps = 15
    body = ",\n".join(json.dumps(s) for s in stacks)
    text = f'{{"about": {json.dumps(ABOUT, indent=1)},\n"stacks": [\n{body}\n]}}\n'
    pathlib.Path(__file__).with_suffix(".json").write_text(text)
    print(f"{len(stacks)} stacks, {len(text)} bytes, most digits {max(s['digits'] for s in stacks)}")


if __name__ == "__main__":
    main()
