"""Closed forms of spin injection evaluated with 40 digits, written to closed_forms.json.

Symbols: beta, gamma bulk and interface asymmetry; r_F = rho_F lambda_F/(1 - beta^2) and
r_N = rho_N lambda_N spin resistances; r_b the interface spin resistance (RA = r_b (1 - gamma^2));
T = t/lambda_N; R = r_b + r_F; a = gamma r_b + beta r_F; s = lambda_F sigma_N/(sigma_F x0).

  schmidt_2000.single_contact        p = beta r_F/(r_F + r_N)
  schmidt_2000.two_contacts          alpha = beta 2s/(2s + 1 - beta^2)
  schmidt_2000.two_contacts_mr       dR/R = [beta^2/(1-beta^2)] 4 s^2/[(2s+1)^2 - beta^2]
  ohmic.finite_channel_*             p at the interface and in the centre of F/N/F, thick F
  fert_jaffres_2001.single_contact   p = (beta r_F + gamma r_b)/(r_F + r_N + r_b)
  fert_jaffres_2001.delta_ra, .ra_parallel, .mr      F/I/N/I/F with equal contacts
  fert_jaffres_2001.peak_*, .half_*  maximum of dR/R_P over r_b of both contacts, half-maximum points
  fert_jaffres_2001.optimum_*        the same maximum as r_b/r_N; formula sqrt(2/(1-gamma^2))
  two_contacts.delta_ra              F1/I/N/I/F2 with different contacts
  valet_fert_1993.*                  series resistors and spin-memory loss
  valet_fert_1993.five_layer_stack   transfer of (u, w), w = r (beta j - J), across a given stack

Every row: name, inputs, computed (25 digits) and printed, the digits an earlier independent
evaluation gave (null if there is none). The run fails if a computed value does not round (or
truncate) to its printed digits.

Library: mpmath (see requirements.txt). Run: python3 tests/reference/closed_forms.py   (seconds)
"""
import json
import pathlib
import platform
from decimal import Decimal

import mpmath
from mpmath import cosh, findroot, log, mp, mpf, sinh, sqrt, tanh

mp.dps = 40
ROWS, MISSES = [], []


def row(name, inputs, computed, printed=None):
    """Record one value and compare it with the digits printed earlier."""
    if printed is not None:
        unit = mpf(10) ** Decimal(printed).as_tuple().exponent
        error = abs(computed - mpf(printed)) / unit  # in units of the last printed digit
        if error > mpf("1.0000001"):
            MISSES.append((name, inputs, printed, mp.nstr(computed, 15)))
        elif error > mpf("0.5000001"):
            print("truncated rather than rounded:", name, inputs, printed, mp.nstr(computed, 15))
    ROWS.append({"name": name, "inputs": inputs, "printed": printed, "computed": mp.nstr(computed, 25)})


def numbers(inputs):
    return {k: mpf(v) for k, v in inputs.items()}


# ---------------------------------------------------------------- formulas

def injected(beta, r_F, r_N, gamma=mpf(0), r_b=mpf(0)):
    return (beta * r_F + gamma * r_b) / (r_F + r_N + r_b)


def schmidt(beta, s):
    return beta * 2 * s / (2 * s + 1 - beta ** 2)


def schmidt_mr(beta, s):
    return beta ** 2 / (1 - beta ** 2) * 4 * s ** 2 / ((2 * s + 1) ** 2 - beta ** 2)


def delta_ra(beta, r_F, r_N, gamma, r_b, T):
    R, a = r_b + r_F, gamma * r_b + beta * r_F
    return 2 * a ** 2 / (R * cosh(T) + r_N / 2 * (1 + (R / r_N) ** 2) * sinh(T))


def ra_parallel(beta, r_F, r_N, gamma, r_b, T):
    """Includes one lambda_F of each F."""
    load = r_N * tanh(T / 2)
    mixed = (beta - gamma) ** 2 * r_F * r_b + load * (beta ** 2 * r_F + gamma ** 2 * r_b)
    return (2 * (1 - beta ** 2) * r_F + r_N * T + 2 * (1 - gamma ** 2) * r_b
            + 2 * mixed / (r_F + r_b + load))


def mr(*args):
    return delta_ra(*args) / ra_parallel(*args)


def delta_ra_two(a_1, R_1, a_2, R_2, r_N, T):
    return 4 * a_1 * a_2 / ((R_1 * R_2 / r_N + r_N) * sinh(T) + (R_1 + R_2) * cosh(T))


def peak(beta, r_F, r_N, gamma, T, guess):
    """r_b at the maximum of dR/R_P (root of the derivative in log r_b, digits doubled)."""
    with mp.workdps(60):
        slope = lambda x: mp.diff(lambda y: log(mr(beta, r_F, r_N, gamma, mp.exp(y), T)), x)
        return mp.exp(findroot(slope, (log(guess), log(guess) + mpf("0.05")), tol=mpf(10) ** -50))


def half(beta, r_F, r_N, gamma, T, target, guess):
    return mp.exp(findroot(lambda y: log(mr(beta, r_F, r_N, gamma, mp.exp(y), T) / target), log(guess)))


def memory_loss(beta, r_F, r_N, gamma, r_b, delta):
    if not delta:
        return injected(beta, r_F, r_N, gamma, r_b)
    r_I = r_b / delta
    C = cosh(delta) + r_I / r_F * sinh(delta)
    S = sinh(delta) + r_I / r_F * cosh(delta)
    return r_I * (beta + gamma * (C - 1)) / (r_N * S + r_I * C)


def transfer_stack(layers, interfaces):
    """RA with one lambda of each outer layer; layers (rho, beta, lambda, t), interfaces (r_b, gamma)."""
    def through(u, J, unit):
        """u, J right of the stack and sum of beta du - gamma r_b J, as driven by `unit`=1 or 0."""
        extra = layers[0][1] * u
        for i, (r_b, gamma) in enumerate(interfaces):
            u, extra = u - r_b * (J - gamma * unit), extra - gamma * r_b * J
            rho, beta, lam, t = layers[i + 1]
            if i + 2 < len(layers):
                r, T = rho * lam / (1 - beta ** 2), t / lam
                w = r * (beta * unit - J)
                new, w = u * cosh(T) + w * sinh(T), u * sinh(T) + w * cosh(T)
                extra, u, J = extra + beta * (new - u), new, beta * unit - w / r
        return u, J, extra - layers[-1][1] * u

    r_left, r_right = (rho * lam / (1 - beta ** 2) for rho, beta, lam, _ in (layers[0], layers[-1]))

    def miss(u_left):
        u, J, extra = through(u_left, layers[0][1] - u_left / r_left, 1)
        return J - layers[-1][1] - u / r_right, extra

    at_0, at_1 = miss(mpf(0)), miss(r_left)  # linear in the unknown u at the left face
    fraction = at_0[0] / (at_0[0] - at_1[0])
    ohmic = sum(rho * (lam if t is None else t) for rho, _, lam, t in layers) + sum(r for r, _ in interfaces)
    return ohmic + at_0[1] + fraction * (at_1[1] - at_0[1])


# ---------------------------------------------------------------- rows

def ohmic_rows():
    for beta, s, alpha, ratio in [
            ("0.6", "1e-5", "1.874941408e-5", "3.515405285e-10"),
            ("0.6", "1e-3", "1.869158879e-3", "3.493767119e-6"),
            ("0.9", "1e-3", "9.375000000e-3", "8.789835044e-5"),
            ("0.9", "1", "0.8219178082", "2.082128398"),
            ("0.99", "1e-5", "9.939759036e-4", "9.879890731e-7"),
            ("0.99", "1", "0.9802465469", "24.56452389"),
            ("0.999", "1e-3", "0.499624906", "0.332667083")]:
        inputs = {"beta": beta, "s": s}
        row("schmidt_2000.two_contacts", inputs, schmidt(**numbers(inputs)), alpha)
        row("schmidt_2000.two_contacts_mr", inputs, schmidt_mr(**numbers(inputs)), ratio)
    inputs = {"beta": "0.73", "r_F": "2e-15", "r_N": "6e-15", "lambda_N": "350e-9", "t": "300e-9"}
    v = numbers(inputs)
    emf, half_T = v["beta"] * v["r_F"], v["t"] / v["lambda_N"] / 2
    interface = emf / (v["r_F"] + v["r_N"] * tanh(half_T))
    row("ohmic.finite_channel_interface_parallel", inputs, interface)
    row("ohmic.finite_channel_centre_parallel", inputs, interface / cosh(half_T), "0.30181665167")
    row("ohmic.finite_channel_interface_antiparallel", inputs, emf / (v["r_F"] + v["r_N"] / tanh(half_T)))
    for beta in ("0.46", "0.9", "0.999999"):
        inputs = {"beta": beta, "r_F": "4.5e-15", "r_N": "4e-9"}
        row("schmidt_2000.single_contact", inputs, injected(**numbers(inputs)))
    # beta that injects 10 % without a barrier at rho_F lambda_F/r_N = s = 0.01
    p, x = mpf("0.1"), mpf("0.01")
    inputs = {"p": "0.1", "rho_F_lambda_F_over_r_N": "0.01"}
    beta = (-x + sqrt(x ** 2 + 4 * p ** 2 * (1 + x))) / (2 * p)  # p = beta x/(x + 1 - beta^2)
    assert abs(injected(beta, x / (1 - beta ** 2), 1) - p) < mpf(10) ** -35
    row("schmidt_2000.required_beta_single_contact", inputs, beta, "0.956")
    beta = (-2 * x + sqrt(4 * x ** 2 + 4 * p ** 2 * (1 + 2 * x))) / (2 * p)
    assert abs(schmidt(beta, x) - p) < mpf(10) ** -35
    row("schmidt_2000.required_beta_two_contacts", {"p": "0.1", "s": "0.01"}, beta, "0.915")


GAAS = {"beta": "0.46", "r_F": "4.5e-15", "r_N": "4e-9", "gamma": "0.5"}  # lambda_N = 2e-6


def tunnel_rows():
    metal = {"beta": "0.73", "r_F": "2e-15", "r_N": "6e-15", "gamma": "0.7", "r_b": "5e-16"}
    opposite = {"beta": "0.5", "r_F": "1e-15", "r_N": "1e-14", "gamma": "-0.4", "r_b": "3e-15"}
    for inputs, printed in [
            ({**GAAS, "r_b": "1e-16"}, "5.29999390500701e-7"),
            ({**GAAS, "r_b": "1e-12"}, "1.254859873e-4"),
            ({**GAAS, "r_b": "1e-10"}, "1.219561344e-2"),
            ({**GAAS, "r_b": "4e-9"}, "0.250000118124934"),
            ({**GAAS, "r_b": "1e-7"}, "0.480769229870562"),
            (metal, "0.212941176470588"), (opposite, "-0.05")]:
        row("fert_jaffres_2001.single_contact", inputs, injected(**numbers(inputs)), printed)
    for T, r_b, d, r, ratio in [
            ("0.01", "4e-9", "1.98010153869e-9", "6.04995727452e-9", "0.3272918219"),
            ("0.1", "4e-9", "1.80967654621e-9", "6.49516967993e-9", "0.2786188253"),
            ("0.1", "4e-10", "1.32377882694e-10", "1.06663689615e-9", "0.1241077289"),
            ("0.1", "1e-13", "2.7053531007e-17", "4.00208972879e-10", "6.759851188e-8"),
            ("0.1", "4e-8", None, None, "0.21881"),
            ("1", "4e-9", None, None, None), ("30", "4e-9", None, None, None)]:
        inputs = {**GAAS, "r_b": r_b, "T": T}
        v = numbers(inputs)
        row("fert_jaffres_2001.delta_ra", inputs, delta_ra(**v), d)
        row("fert_jaffres_2001.ra_parallel", inputs, ra_parallel(**v), r)
        row("fert_jaffres_2001.mr", inputs, delta_ra(**v) / ra_parallel(**v), ratio)
    inputs = {"gamma": "0.5", "r_N": "4e-9", "r_b": "4e-8", "T": "0.1"}
    v = numbers(inputs)
    dwell = v["gamma"] ** 2 / (1 - v["gamma"] ** 2) / (1 + v["r_b"] * v["T"] / (2 * v["r_N"]))
    row("fert_2007.mr_from_dwell_time", inputs, dwell, "0.2222")
    for T, height, at, low, high in [("0.01", "0.327944", "6.542e-9", "6.022e-11", "8.262e-7"),
                                     ("0.1", "0.283901", "6.635e-9", "4.842e-10", "1.065e-7"),
                                     ("1", "0.079299", "7.767e-9", "1.764e-9", "4.225e-8")]:
        inputs = {**GAAS, "T": T}
        beta, r_F, r_N, gamma = (mpf(v) for v in GAAS.values())
        top = peak(beta, r_F, r_N, gamma, mpf(T), mpf(at))
        best = mr(beta, r_F, r_N, gamma, top, mpf(T))
        row("fert_jaffres_2001.peak_mr", inputs, best, height)
        row("fert_jaffres_2001.peak_r_b", inputs, top, at)
        for side, guess in (("low", low), ("high", high)):
            r_b = half(beta, r_F, r_N, gamma, mpf(T), best / 2, mpf(guess))
            row(f"fert_jaffres_2001.half_{side}_r_b", inputs, r_b, guess)
    optimum_rows()
    one = {"beta": "0.46", "r_F": "4.5e-15", "gamma": "0.5", "r_b": "4e-9"}
    two = {"beta": "0.7", "r_F": "1e-12", "gamma": "-0.3", "r_b": "2e-10"}
    for first, second in ((one, one), (one, two), (two, metal)):
        c = [(v["gamma"] * v["r_b"] + v["beta"] * v["r_F"], v["r_b"] + v["r_F"])
             for v in (numbers(first), numbers(second))]
        inputs = {"r_N": "4e-9", "T": "0.1", "contact_1": first,
                  "contact_2": {k: second[k] for k in one}}
        row("two_contacts.delta_ra", inputs, delta_ra_two(*c[0], *c[1], mpf("4e-9"), mpf("0.1")),
            "1.80967654621e-9" if second is one else None)


def optimum_rows():
    for gamma, T, at, share in [
            ("0.5", "0.001", "1.63339", "0.99837"), ("0.5", "0.01", "1.63551", "0.98383"),
            ("0.5", "0.1", "1.65876", "0.85170"), ("0.5", "0.5", "1.77525", "0.46877"),
            ("0.5", "1", "1.94182", "0.23790"), ("0.5", "2", None, "0.06896"),
            ("0.1", "0.001", "1.4158", None), ("0.1", "1", "1.7108", None),
            ("0.9", "0.001", "3.2465", None), ("0.9", "1", "3.688", None)]:
        inputs = {**GAAS, "gamma": gamma, "T": T}
        v = numbers(inputs)
        top = peak(**v, guess=v["r_N"] * sqrt(2 / (1 - v["gamma"] ** 2)))
        row("fert_jaffres_2001.optimum_r_b_over_r_N", inputs, top / v["r_N"], at)
        plateau = v["gamma"] ** 2 / (1 - v["gamma"] ** 2)
        best = mr(v["beta"], v["r_F"], v["r_N"], v["gamma"], top, v["T"])
        row("fert_jaffres_2001.optimum_share_of_plateau", inputs, best / plateau, share)
    for gamma, printed in (("0.1", "1.4213"), ("0.5", "1.63299"), ("0.9", "3.2444")):
        row("fert_jaffres_2001.optimum_formula", {"gamma": gamma}, sqrt(2 / (1 - mpf(gamma) ** 2)), printed)


def valet_fert_rows():
    layers = [("2e-7", "0.5", "1e-8", None), ("3e-8", "0", "3e-7", "2e-8"), ("1e-7", "-0.4", "6e-9", "5e-9"),
              ("5e-8", "0", "1e-7", "3e-8"), ("2e-7", "0.7", "5e-9", None)]
    interfaces = [("5e-16", "0.7"), ("4e-16", "-0.6"), ("4e-16", "-0.6"), ("1e-15", "0.2")]
    value = transfer_stack([tuple(x if x is None else mpf(x) for x in l) for l in layers],
                           [tuple(map(mpf, i)) for i in interfaces])
    row("valet_fert_1993.five_layer_stack", {"layers rho, beta, lambda, t": layers,
        "interfaces r_b, gamma": interfaces}, value, "8.90310832265417714e-15")
    inputs = {"bilayers": "20", "beta": "0.46", "rho_star": "75e-9", "t_F": "6e-9", "r_b": "0.51e-15", "gamma": "0.77"}
    v = numbers(inputs)
    row("valet_fert_1993.series_resistor_root", inputs, v["bilayers"] * (
        v["beta"] * v["rho_star"] * v["t_F"] + 2 * v["gamma"] * v["r_b"]), "19.848e-15")
    for delta, printed in (("0", ".2129411765"), ("0.01", ".2128797632"), ("0.25", ".1808410059"), ("3", ".01907096232")):
        inputs = {"beta": "0.73", "r_F": "2e-15", "r_N": "6e-15", "gamma": "0.7", "r_b": "5e-16", "delta": delta}
        row("valet_fert_1993.spin_memory_loss", inputs, memory_loss(**numbers(inputs)), "0" + printed)
    row("valet_fert_1993.flip_probability", {"delta": "0.9"}, 1 - mp.exp(-mpf("0.9")), "0.593")


def main():
    """Evaluate all rows, write closed_forms.json and fail on a row that does not come out."""
    ohmic_rows()
    tunnel_rows()
    valet_fert_rows()
    about = {"script": "tests/reference/closed_forms.py",
             "libraries": f"mpmath {mpmath.__version__}, Python {platform.python_version()}",
             "units": "SI; r_F, r_N, r_b and RA in ohm m2; j = 1 A/m2",
             "inputs": "exact decimals", "computed": "25 digits from 40-digit arithmetic",
             "printed": "digits of an earlier independent evaluation, or null"}
    body = ",\n".join(json.dumps(r) for r in ROWS)
    path = pathlib.Path(__file__).with_suffix(".json")
    path.write_text(f'{{"about": {json.dumps(about, indent=1)},\n"rows": [\n{body}\n]}}\n')
    print(f"{len(ROWS)} rows, {sum(r['printed'] is not None for r in ROWS)} with printed digits")
    assert not MISSES, MISSES


if __name__ == "__main__":
    main()
