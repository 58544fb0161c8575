"""Times general-purpose libraries on the inputs of the benches, to stand beside `cargo bench` in the same run.

    bench.py      products and derivations by FLINT (python-flint), the planted 125 × 12 system over ℤ[t] by SymPy on FLINT

The system is the one of crates/solver/benches/planted.rs (degree 8, coefficients of 40 bits, polynomial solution), made by
the same generator from the same seed; the elements are V_n = F^(n)/F of the Tracy–Widom ring.
"""

import time

from flint import Ordering, fmpz_mpoly_ctx
from sympy import ZZ, symbols
from sympy.polys.matrices import DomainMatrix


def best(task, runs):
    times = []
    for _ in range(runs):
        start = time.perf_counter()
        result = task()
        times.append(time.perf_counter() - start)
    return min(times), result


def split_mix(state):
    """SplitMix64 (Steele, Lea & Flood 2014)."""
    mask = (1 << 64) - 1
    while True:
        state = (state + 0x9E3779B97F4A7C15) & mask
        z = state
        z = ((z ^ (z >> 30)) * 0xBF58476D1CE4E5B9) & mask
        z = ((z ^ (z >> 27)) * 0x94D049BB133111EB) & mask
        yield z ^ (z >> 31)


def elements():
    context = fmpz_mpoly_ctx.get(("q", "p", "t"), Ordering.lex)
    q, p, t = context.gens()

    def derive(e):
        return e.derivative("q") * p + e.derivative("p") * (t * q + 2 * q**3) + e.derivative("t")

    first = p**2 - t * q**2 - q**4
    v = [None, first]
    while len(v) <= 30:
        v.append(derive(v[-1]) + first * v[-1])
    for name, task, runs in [
        ("V_8^2", lambda: v[8] * v[8], 200),
        ("V_12^2", lambda: v[12] * v[12], 100),
        ("V_20 V_12", lambda: v[20] * v[12], 30),
        ("D V_12", lambda: derive(v[12]), 200),
        ("D V_30", lambda: derive(v[30]), 30),
    ]:
        seconds, result = best(task, runs)
        print(f"FLINT {name}: {seconds * 1e6:.0f} us ({len(result)} terms)")


def planted():
    random = split_mix(2024)
    t = symbols("t")
    ring = ZZ[t]
    columns, degree, rows = 12, 8, 125

    def word():
        value = next(random)
        value -= (value >> 63) << 64
        return value >> 24

    def dense():
        return sum((ring(word()) * ring.ring.gens[0] ** e for e in range(degree + 1)), ring.zero)

    solution = [dense() for _ in range(columns)]
    matrix = []
    for _ in range(rows):
        first = next(random) % columns
        row = [ring.zero] * columns
        for place in range(first, first + columns):
            row[place % columns] = dense()
        matrix.append(row + [sum((a * x for a, x in zip(row, solution)), ring.zero)])
    system = DomainMatrix(matrix, (rows, columns + 1), ring)
    start = time.perf_counter()
    reduced, denominator, pivots = system.rref_den()
    seconds = time.perf_counter() - start
    found = [ring.exquo(reduced.to_list()[i][columns], denominator) for i in range(columns)]
    assert tuple(pivots) == tuple(range(columns)) and found == solution
    print(f"SymPy rref_den of the planted 125 x 12 system: {seconds:.2f} s")


elements()
planted()
