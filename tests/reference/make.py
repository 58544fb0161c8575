"""Writes reference.json: random cases of ring and linear algebra, answered by FLINT (python-flint) and SymPy.

    make.py            writes reference.json beside this file
    make.py --check    answers the same cases afresh and compares with the committed file

Everything is seeded; the same library versions give the same bytes.
"""

import json
import pathlib
import random
import sys

import flint
import sympy
from flint import Ordering, fmpq, fmpq_mat, fmpq_mpoly_ctx, fmpz_mat
from flint.utils.flint_exceptions import DomainError
from sympy.polys.matrices import DomainMatrix

from decide import content

FILE = pathlib.Path(__file__).with_name("reference.json")
PRIME = 2**61 - 1


def text(p, names):
    """A polynomial in lexicographic order, highest power first: `3/10*t^2 - 1/5`."""
    if p.is_zero():
        return "0"
    result = ""
    for exponents, value in p.terms():
        factors = [n if e == 1 else f"{n}^{e}" for n, e in zip(names, exponents) if e]
        sign, value = (" - ", -value) if value < 0 else (" + ", value)
        if value != 1 or not factors:
            factors.insert(0, str(value))
        result += (sign if result else sign.strip().replace("+", "")) + "*".join(factors)
    return result


class Source:
    """Random polynomials in one set of symbols."""

    def __init__(self, seed, names):
        self.random, self.names = random.Random(seed), names
        self.context = fmpq_mpoly_ctx.get(names, Ordering.lex)

    def rational(self, bits, whole=False):
        while True:
            bound = 2 ** self.random.randint(1, bits)
            value = self.random.randint(-bound, bound)
            if value:
                return fmpq(value, 1 if whole else self.random.choice([1, 1, 2, 3, 5, 12, 35]))

    def polynomial(self, terms, degree, bits, whole=False):
        found = {}
        for _ in range(terms):
            exponents = tuple(
                self.random.choice([0, 0, 1, self.random.randint(0, degree)]) for _ in self.names
            )
            found[exponents] = self.rational(bits, whole)
        return self.context.from_dict(found)

    def text(self, p):
        return text(p, self.names)


def names(count):
    return [f"x{i}" for i in range(count)]


def products():
    for seed in range(40):
        source = Source(1000 + seed, names(1 + seed % 5))
        bits = [3, 20, 70, 140][seed % 4]
        a, b = (source.polynomial(source.random.randint(1, 6), 4, bits) for _ in range(2))
        yield {"symbols": source.names, "a": source.text(a), "b": source.text(b), "product": source.text(a * b)}


def large_products():
    """Products too long to write down: number of terms, and the value at a point modulo 2^61 − 1."""
    for seed in range(6):
        source = Source(1500 + seed, names(2 + seed % 3))
        a, b = (source.polynomial(40, 12, 40, whole=True) for _ in range(2))
        point = [source.random.randint(2, 10**6) for _ in source.names]
        c = a * b
        value = 0
        for exponents, coefficient in c.terms():
            term = int(coefficient.p) % PRIME
            for x, e in zip(point, exponents):
                term = term * pow(x, e, PRIME) % PRIME
            value = (value + term) % PRIME
        yield {
            "symbols": source.names,
            "a": source.text(a),
            "b": source.text(b),
            "terms": len(c),
            "point": point,
            "value": str(value),
        }


def derivations():
    for seed in range(40):
        generators, constants, variable = 1 + seed % 3, seed % 2, seed % 4 < 3
        total = generators + variable + constants
        source = Source(2000 + seed, names(total))
        rules = [source.polynomial(3, 2, 6) for _ in range(generators)]
        element = source.polynomial(4, 3, 12)

        def derive(p):
            result = source.context.constant(0)
            for i, rule in enumerate(rules):
                result += p.derivative(i) * rule
            return result + p.derivative(generators) if variable else result

        first = derive(element)
        yield {
            "generators": source.names[:generators],
            "variable": source.names[generators] if variable else None,
            "constants": source.names[generators + variable :],
            "rules": [source.text(rule) for rule in rules],
            "element": source.text(element),
            "derivative": source.text(first),
            "second": source.text(derive(first)) if seed % 2 else None,
        }


def quotients():
    for seed in range(40):
        source = Source(3000 + seed, names(1 + seed % 4))
        divisor, quotient = (source.polynomial(source.random.randint(2, 5), 3, 24) for _ in range(2))
        dividend = divisor * quotient
        if seed % 4 == 3:
            dividend += source.polynomial(1, 3, 4)
        try:
            quotient = source.text(dividend / divisor)
        except DomainError:
            quotient = None
        yield {
            "symbols": source.names,
            "dividend": source.text(dividend),
            "divisor": source.text(divisor),
            "quotient": quotient,
        }


def gcds():
    for seed in range(40):
        source = Source(4000 + seed, names(1 + seed % 4))
        common, a, b = (source.polynomial(source.random.randint(1, 4), 3, 16) for _ in range(3))
        if seed % 5 == 4:
            common = source.context.constant(6)
        a, b = a * common, b * common
        g = a.gcd(b)
        yield {"symbols": source.names, "a": source.text(a), "b": source.text(b), "gcd": source.text(g / content(g))}


def rational_systems():
    """Overdetermined systems over ℚ, decided by the reduced row echelon form of the augmented matrix."""
    for seed in range(50):
        rng = random.Random(5000 + seed)
        columns = rng.randint(1, 6)
        rows = columns + rng.randint(0, 5)
        bits = [3, 30, 90][seed % 3]
        a = [[rng.randint(-(2**bits), 2**bits) if rng.random() < 0.8 else 0 for _ in range(columns)] for _ in range(rows)]
        kind = seed % 4
        if kind == 2 and columns > 1:
            for row in a:
                row[columns - 1] = row[0] - 2 * row[columns - 2]
        x = [fmpq(rng.randint(-99, 99), rng.randint(1, 30)) for _ in range(columns)]
        scale = 1
        for value in x:
            scale = scale * int(value.q)
        b = [int((scale * sum((fmpq(e) * v for e, v in zip(row, x)), fmpq(0))).p) for row in a]
        a = [[e * scale for e in row] for row in a]
        if kind == 3:
            b[rng.randrange(rows)] += 1
        reduced, rank = fmpq_mat(fmpz_mat([row + [right] for row, right in zip(a, b)])).rref()
        table = reduced.tolist()
        pivots = [next(j for j in range(columns + 1) if table[i][j] != 0) for i in range(rank)]
        yield {
            "rows": [[str(e) for e in row] for row in a],
            "right": [str(e) for e in b],
            **outcome(columns, pivots, lambda i: [str(table[i][columns]), "1"]),
        }


def outcome(columns, pivots, solution):
    if columns in pivots:
        return {"outcome": "inconsistent"}
    if len(pivots) < columns:
        return {"outcome": "family", "kernel": columns - len(pivots)}
    return {"outcome": "unique", "solution": [solution(i) for i in range(columns)]}


def polynomial_systems():
    """The same over ℚ(t) and ℚ(s, t), decided by SymPy."""
    for seed in range(44):
        base = ["t"] if seed % 4 else ["s", "t"]
        source = Source(6000 + seed, base)
        rng = source.random
        columns = rng.randint(1, 4 if len(base) == 1 else 3)
        rows = columns + rng.randint(1, 4)
        kind = (seed // 4) % 4
        size = 2 if len(base) == 1 else 1
        zero = source.context.constant(0)
        a = [
            [source.polynomial(2, size, 5, whole=True) if rng.random() < 0.8 else zero for _ in range(columns)]
            for _ in range(rows)
        ]
        if kind == 2 and columns > 1:
            factor = source.polynomial(1, 1, 2, whole=True)
            for row in a:
                row[columns - 1] = row[0] * factor
        tops = [source.polynomial(2, 2, 4) for _ in range(columns)]
        # Half of the planted solutions have a common denominator.
        below = source.polynomial(2, 1, 3, whole=True) if seed % 2 else source.context.constant(1)
        b = [sum((e * x for e, x in zip(row, tops)), zero) for row in a]
        a = [[e * below for e in row] for row in a]
        if kind == 3:
            b[rng.randrange(rows)] += 1
        symbols = sympy.symbols(base)
        field = sympy.QQ.frac_field(*symbols)
        table = [[field.from_sympy(sympy.sympify(source.text(e).replace("^", "**"))) for e in [*row, right]] for row, right in zip(a, b)]
        reduced, pivots = DomainMatrix(table, (rows, columns + 1), field).rref()
        reduced = reduced.to_list()

        def fraction(i):
            value = reduced[i][columns]
            top, bottom = (from_sympy(source, part) for part in (value.numer, value.denom))
            scale = content(bottom)
            return [source.text(top / scale), source.text(bottom / scale)]

        yield {
            "symbols": base,
            "rows": [[source.text(e) for e in row] for row in a],
            "right": [source.text(e) for e in b],
            **outcome(columns, list(pivots), fraction),
        }


def from_sympy(source, element):
    return source.context.from_dict({m: fmpq(int(c.numerator), int(c.denominator)) for m, c in element.terms()})


def determinants():
    """Matrices over ℤ[t] with all their leading minors, by SymPy."""
    for seed in range(10):
        source = Source(7000 + seed, ["t"])
        size = 2 + seed % 4
        rows = [[source.polynomial(2, 2, 5, whole=True) for _ in range(size)] for _ in range(size)]
        ring = sympy.QQ[sympy.symbols("t")]
        minors = []
        for k in range(1, size + 1):
            block = [[ring.from_sympy(sympy.sympify(source.text(e).replace("^", "**"))) for e in row[:k]] for row in rows[:k]]
            minors.append(source.text(from_sympy(source, DomainMatrix(block, (k, k), ring).charpoly()[-1] * (-1) ** k)))
        yield {"symbols": ["t"], "rows": [[source.text(e) for e in row] for row in rows], "minors": minors}


def document():
    parts = {
        "products": products,
        "large_products": large_products,
        "derivations": derivations,
        "quotients": quotients,
        "gcds": gcds,
        "rational_systems": rational_systems,
        "polynomial_systems": polynomial_systems,
        "determinants": determinants,
    }
    lines = [f'"libraries": "python-flint {flint.__version__} with FLINT {flint.__FLINT_VERSION__}, SymPy {sympy.__version__}"']
    counts = {}
    for name, cases in parts.items():
        found = [json.dumps(case, separators=(",", ":")) for case in cases()]
        counts[name] = len(found)
        lines.append(f'"{name}": [\n' + ",\n".join(found) + "\n]")
    return "{\n" + ",\n".join(lines) + "\n}\n", counts


if __name__ == "__main__":
    made, counts = document()
    summary = ", ".join(f"{count} {name.replace('_', ' ')}" for name, count in counts.items())
    if sys.argv[1:] == ["--check"]:
        if FILE.read_text(encoding="utf-8") != made:
            sys.exit("reference.json differs from what the libraries answer")
        print(f"reference.json agrees: {summary}")
    else:
        FILE.write_text(made, encoding="utf-8")
        print(f"wrote {len(made)} bytes: {summary}")
