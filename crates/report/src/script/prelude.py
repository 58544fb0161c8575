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


def side(parts, by_derivative):
    return derivative(form(parts)) if by_derivative else form(parts)


def row(e, m):
    """The coefficient of a monomial in the first symbols, as an element in the others."""
    k = len(m)
    return R.from_dict({(0,)*k + n[k:]: v for n, v in e.terms() if list(n[:k]) == m})


def combine(e, rows):
    return sum((y*row(e, m) for m, y in rows), R.zero)


def independent(columns, rows, prime, point):
    """Is the determinant of the columns on these rows not 0 modulo the prime at the point?"""
    def value(e):
        total = 0
        for n, v in e.terms():
            v = int(v.numerator)*pow(int(v.denominator), -1, prime)
            for x, k in zip(point, n):
                v = v*pow(x, k, prime) % prime
            total += v
        return total % prime

    if not isprime(prime) or len(rows) != len(columns):
        return False
    matrix = [[value(row(e, m)) for e in columns] for m in rows]
    for k in range(len(matrix)):
        pivot = next((i for i in range(k, len(matrix)) if matrix[i][k]), None)
        if pivot is None:
            return False
        matrix[k], matrix[pivot] = matrix[pivot], matrix[k]
        inverse = pow(matrix[k][k], -1, prime)
        for i in range(k + 1, len(matrix)):
            factor = matrix[i][k]*inverse % prime
            matrix[i] = [(a - factor*b) % prime for a, b in zip(matrix[i], matrix[k])]
    return True


def primitive(title, target, parts):
    """The recorded form of an element, whose derivative must be the target."""
    n, d = form(parts)
    verdict(title, d == 1 and D(n) == target)
    return n


def holds(title, target, by_derivative, parts):
    verdict(title, agrees(side(parts, by_derivative), target))


def family(title, target, by_derivative, particular, kernel):
    good = agrees(side(particular, by_derivative), target) and len(kernel) > 0
    verdict(title, good and all(parts and side(parts, by_derivative)[0] == 0 for parts in kernel))


def contradiction(title, target, columns, rows, value):
    good = all(combine(e, rows) == 0 for e in columns)
    verdict(title, good and combine(target, rows) == value and value != 0)


def other(title, target, by_derivative, parts, columns, rows, prime, point):
    good = agrees(side(parts, by_derivative), target) and any(n.rem([d]) != 0 for n, d, term in parts)
    verdict(title, good and independent(columns, rows, prime, point))


def no_primitive(title, target, pairs, columns, rows, prime, point):
    """Each pair holds p and r, as numerator and denominator, with the derivative of a term and the term."""
    good = agrees(form([[p[0], p[1], db] for p, r, db, b in pairs] + [[r[0], r[1], b] for p, r, db, b in pairs]), target)
    good = good and any(derivative(p)[0]*r[1] != r[0]*derivative(p)[1] for p, r, db, b in pairs)
    verdict(title, good and independent(columns, rows, prime, point))


