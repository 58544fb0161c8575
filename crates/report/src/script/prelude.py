import random
import sys

from sympy import QQ, isprime
from sympy.polys.rings import ring

sys.stdout.reconfigure(errors="backslashreplace")
passed = failed = 0


def verdict(title, good):
    global passed, failed
    if good:
        passed += 1
    else:
        failed += 1
    print("ok" if good else "FAILED", title, flush=True)


def c(a, b=1):
    """A rational number as an element of the ring."""
    return R.ground_new(QQ(a, b))


def add(terms):
    return sum(terms, R.zero)


def D(e):
    """The derivation of the ring."""
    return sum((e.diff(x)*d for x, d in zip(X, DX)), R.zero)


def form(parts):
    """The sum of numerator/denominator*term over all parts, as numerator and denominator."""
    n, d = R.zero, R.one
    for above, below, term in parts:
        if below == 1:
            n += above*term*d
        else:
            n, d = n*below + above*term*d, d*below
    return n, d


def derivative(f):
    n, d = f
    return D(n)*d - n*D(d), d*d


def agrees(f, target):
    return f[0] == target*f[1]


def side(parts, known):
    return derivative(form(parts)) if known else form(parts)


def admitted(parts, kind):
    """Are the coefficients of the kind that the claim asks for?"""
    return (kind == "rational" or all(d == 1 for n, d, term in parts)) and steady(parts, kind)


def steady(parts, kind):
    """Are the coefficients free of the variable, if the claim is about constants?"""
    return kind != "constant" or all(e.diff(x) == 0 for n, d, term in parts for e in (n, d) for x in V)


def row(e, m):
    """The coefficient of a monomial in the first symbols, as an element in the others."""
    k = len(m)
    return R.from_dict({(0,)*k + n[k:]: v for n, v in e.terms() if list(n[:k]) == m})


def combine(e, rows):
    return sum((y*row(e, m) for m, y in rows), R.zero)


def columns(terms, known):
    """What the equations compare: the terms, their derivatives, or both by turns."""
    if known == 2:
        return [e for b in terms for e in (D(b), b)]
    return [D(b) for b in terms] if known else terms


# Ranks are those modulo a prime at a point: never too large, and too small with a chance of about degree/2^61.
P = 2**61 - 1
dice = random.Random(1)


def value(terms, prime, point):
    """The sum of coefficient*monomial, given as exponents and coefficients, modulo the prime at the point."""
    total = 0
    for n, v in terms:
        v = int(v.numerator)*pow(int(v.denominator), -1, prime)
        for x, k in zip(point, n):
            if k:
                v = v*pow(x, k, prime) % prime
        total += v
    return total % prime


def rank(rows, prime):
    basis = []
    for v in rows:
        for k, known in basis:
            if v[k]:
                f = v[k]
                v = [(a - f*b) % prime for a, b in zip(v, known)]
        k = next((k for k, a in enumerate(v) if a), None)
        if k is not None:
            inverse = pow(v[k], -1, prime)
            basis.append((k, [a*inverse % prime for a in v]))
            if len(basis) == len(v):
                break
    return len(basis)


def span(elements, k):
    """The dimension of the span over the rational functions of all but the first k symbols."""
    rows = {}
    for j, e in enumerate(elements):
        parts = {}
        for n, v in e.terms():
            parts.setdefault(n[:k], []).append((n[k:], v))
        for m, part in parts.items():
            rows.setdefault(m, [0]*len(elements))[j] = value(part, P, Z[k:])
    return rank(rows.values(), P)


def unique(terms, known, k):
    """Is there no other form? Two forms with one derivative differ by a constant."""
    if known == 2:
        return span([R.one] + terms, k) == len(terms) + 1
    return span(columns(terms, known), k) == len(terms)


def independent(elements, rows, prime, point):
    """Is the determinant of the elements on these rows not 0 modulo the prime at the point?"""
    if prime < 3 or not isprime(prime) or len(rows) != len(elements):
        return False
    try:
        matrix = [[value(row(e, m).terms(), prime, point) for e in elements] for m in rows]
    except ValueError:
        return False
    return rank(matrix, prime) == len(rows)


def primitive(title, target, terms, known, k, parts):
    """The recorded form of an element, whose derivative must be the target."""
    n, d = form(parts)
    verdict(title, d == 1 and D(n) == target and unique(terms, known, k))
    return n


def holds(title, target, terms, known, k, kind, parts):
    verdict(title, admitted(parts, kind) and agrees(side(parts, known), target) and unique(terms, known, k))


def family(title, target, terms, known, k, kind, particular, kernel, ones):
    """Each form of the kernel has a part for every term; the one form that ones may hold is 1."""
    good = agrees(side(particular, known), target) and all(steady(parts, kind) for parts in [particular] + kernel)
    good = good and all((side(parts, known) if known == 1 else form(parts))[0] == 0 for parts in kernel)
    if good:
        vectors = [[value(n.terms(), P, Z)*pow(value(d.terms(), P, Z), -1, P) % P for n, d, term in parts] for parts in kernel]
        good = rank(vectors, P) == len(kernel)
    dimension = span(terms if known == 2 else columns(terms, known), k)
    shifted = known == 2 and span([R.one] + terms, k) == dimension
    good = good and len(kernel) == len(terms) - dimension and len(ones) == shifted and len(kernel) + len(ones) > 0
    verdict(title, good and all(agrees(form(parts), R.one) for parts in ones))


def contradiction(title, target, terms, known, k, kind, rows, value):
    compared = columns(terms, known)
    good = len({tuple(m) for m, y in rows}) == len(rows) and all(any(row(e, m) != 0 for e in compared + [target]) for m, y in rows)
    good = good and all(combine(e, rows) == 0 for e in compared)
    verdict(title, good and combine(target, rows) == value and value != 0)


def other(title, target, terms, known, k, kind, parts, rows, prime, point):
    good = kind != "rational" and steady(parts, kind) and any(n.rem([d]) != 0 for n, d, term in parts)
    good = good and agrees(side(parts, known), target) and unique(terms, known, k)
    witnessed = independent(columns(terms, known), rows, prime, point)
    verdict(title, good and (witnessed or known == 2 and independent([R.one] + terms, rows, prime, point)))


def no_primitive(title, target, terms, known, k, kind, pairs, rows, prime, point):
    """Each pair holds the coefficients p of the derivative of a term, and r of the term."""
    compared = columns(terms, known)
    good = known == 2 and any(derivative(p)[0]*r[1] != r[0]*derivative(p)[1] for p, r in pairs)
    good = good and agrees(form([[*f, e] for f, e in zip([f for pair in pairs for f in pair], compared)]), target)
    verdict(title, good and independent(compared, rows, prime, point))


