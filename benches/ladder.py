"""The second runner of benches/speed.rs: the same stacks with NumPy and SciPy.

Physics
  Layers between two semi-infinite ends, an interface at every face; j = 1 A/m2, J in A/m2, u and V in V,
  V = (V_up + V_down)/2, zero at the right end. In a layer of spin resistance r and T = t/lambda
      u_left  = r [(J_left - beta) coth T - (J_right - beta) csch T]
      u_right = r [(J_left - beta) csch T - (J_right - beta) coth T]
  and over an interface u falls by r_b (J - gamma). Eliminating u leaves one symmetric, positive definite,
  tridiagonal system for J at the faces:
      diagonal  r coth T of both neighbours + r_b     beside it  -r csch T
      right     r beta tanh(T/2) of both neighbours + r_b gamma
  (an end counts as a layer with coth = tanh = 1, csch = 0).

Method
  Whole arrays, one exponential a layer, LAPACK's tridiagonal Cholesky solver behind solveh_banded.
  The times are medians; reading the file and writing the answer stand outside them.

Usage: ladder.py INPUT OUTPUT RUNS        prints one line `runs` seconds: assembly, solve, read-out, sum
  INPUT   six lines of numbers: rho, beta, lambda, t (ends first and last), r_b, gamma
  OUTPUT  three lines: J, u, V at the faces, both sides of every interface; V starts with RA
"""
import sys
from statistics import median
from time import perf_counter

import numpy as np
from scipy.linalg import solveh_banded


def assemble(rho, beta, length, thickness, r_b, gamma):
    """Coefficients of the layers, the matrix in lower banded form and its right side."""
    r = rho * length / (1.0 - beta * beta)
    m = np.expm1(-thickness[1:-1] / length[1:-1])
    e = 1.0 + m
    s = r[1:-1] / (-m * (1.0 + e))
    coth, csch = s * (1.0 + e * e), s * (e + e)
    reach = r.copy()
    reach[1:-1] *= -m / (1.0 + e)
    drive = beta * reach
    banded = np.empty((2, r_b.size))
    banded[0] = r_b
    banded[0, 0] += r[0]
    banded[0, 1:] += coth
    banded[0, :-1] += coth
    banded[0, -1] += r[-1]
    np.negative(csch, out=banded[1, :-1])
    banded[1, -1] = 0.0
    right = r_b * gamma + drive[:-1] + drive[1:]
    return (r, reach, drive, csch), banded, right


def solve(banded, right):
    """J at the faces."""
    return solveh_banded(
        banded, right, lower=True, overwrite_ab=True, overwrite_b=True, check_finite=False
    )


def read_out(stack, coefficients, current):
    """J, u and V on both sides of every interface."""
    rho, beta, length, thickness, r_b, gamma = stack
    r, reach, drive, csch = coefficients
    y_left, y_right = current[:-1] - beta[1:-1], current[1:] - beta[1:-1]
    across = csch * (y_left - y_right)
    u = np.empty(2 * current.size)
    u[0] = r[0] * (beta[0] - current[0])
    u[1:-1:2] = across + reach[1:-1] * y_left
    u[2:-1:2] = across - reach[1:-1] * y_right
    u[-1] = r[-1] * (current[-1] - beta[-1])
    drop = np.empty(u.size + 1)
    drop[0] = rho[0] * length[0] + drive[0] * (beta[0] - current[0])
    drop[1::2] = r_b * (1.0 - gamma * current)
    drop[2:-1:2] = (rho * thickness)[1:-1] - drive[1:-1] * (y_left + y_right)
    drop[-1] = rho[-1] * length[-1] + drive[-1] * (beta[-1] - current[-1])
    potential = np.cumsum(drop[::-1])[::-1]
    return np.repeat(current, 2), u, potential


def main():
    source, target, runs = sys.argv[1], sys.argv[2], int(sys.argv[3])
    with open(source, encoding="ascii") as lines:
        stack = [np.array(line.split(), dtype=float) for line in lines]
    times = []
    for _ in range(runs):
        start = perf_counter()
        coefficients, banded, right = assemble(*stack)
        assembled = perf_counter()
        current = solve(banded, right)
        solved = perf_counter()
        answer = read_out(stack, coefficients, current)
        end = perf_counter()
        times.append((assembled - start, solved - assembled, end - solved, end - start))
    with open(target, "w", encoding="ascii") as out:
        for values in answer:
            out.write(" ".join(map(repr, values.tolist())) + "\n")
    print(*(median(column) for column in zip(*times)))


if __name__ == "__main__":
    main()
