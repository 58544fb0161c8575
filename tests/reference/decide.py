"""Decides the claims of spec files with FLINT (python-flint), sharing no code with the program.

    decide.py SPEC…                       prints every verdict and form
    decide.py --claim NAME SPEC…          prints those of the claims whose name has NAME in it
    decide.py --against RESULT.json SPEC  compares with what the program wrote
    decide.py --golden SPEC…              writes the decisions to tests/golden, one file for each spec
    decide.py --check SPEC…               decides afresh and compares with those files

Matching as in any textbook: expand target and terms in the free ring, compare coefficients of the monomials in the
generators, and reduce the rows one after another over the polynomials in the remaining symbols.
"""

import json
import os
import sys
import tomllib

from flint import Ordering, fmpq, fmpq_mpoly_ctx, fmpz

import expressions as ex

DEGREES = 12


def content(p):
    """The rational by which a nonzero polynomial becomes primitive with a positive leading coefficient."""
    common, below = fmpz(0), fmpz(1)
    for value in p.coeffs():
        common, below = common.gcd(value.p), below.lcm(value.q)
    return fmpq(common, below) * (-1 if p.leading_coefficient() < 0 else 1)


class Spec:
    def __init__(self, path):
        with open(path, "rb") as file:
            document = tomllib.load(file)
        self.document = document
        tables = [document]
        while "include" in tables[-1]:
            other = os.path.join(os.path.dirname(path), tables[-1]["include"])
            with open(other, "rb") as file:
                tables.append(tomllib.load(file))
        ring = {"constants": [], "generators": [], "derivative": {}, "variable": None}
        families, laws = {}, {}
        for table in reversed(tables):
            own = table.get("ring", {})
            ring["variable"] = own.get("variable", ring["variable"])
            for key in ("constants", "generators"):
                ring[key] = ring[key] + own.get(key, [])
            ring["derivative"] |= own.get("derivative", {})
            families |= table.get("family", {})
            laws |= {name: law["log_derivative"] for name, law in table.get("law", {}).items()}
        self.variable = ring["variable"]
        base = ([self.variable] if self.variable else []) + ring["constants"]
        self.generators = len(ring["generators"])
        self.names = ring["generators"] + base
        # Names with primes are no identifiers for the library; the symbols are counted instead.
        self.context = fmpq_mpoly_ctx.get([f"x{i}" for i in range(len(self.names))], Ordering.lex)
        self.symbols = dict(zip(self.names, self.context.gens()))
        self.zero, self.one = self.context.constant(0), self.context.constant(1)
        self.memory = {}
        self.laws = {name: ex.expression(text) for name, text in laws.items()}
        self.families = {}
        for name, family in families.items():
            self.families[name] = (
                [ex.rule(text) for text in family["rules"]],
                family.get("symmetric", False),
                family.get("primitive_terms"),
            )
        self.derivatives = [self.zero] * len(self.names)
        if self.variable:
            self.derivatives[self.generators] = self.one
        for i, name in enumerate(ring["generators"]):
            self.derivatives[i] = self.value(ex.expression(ring["derivative"][name]), {})

    def derive(self, p):
        total = self.zero
        for i, derivative in enumerate(self.derivatives):
            if not derivative.is_zero():
                total += p.derivative(i) * derivative
        return total

    def value(self, tree, env):
        match tree:
            case ("number", n):
                return self.context.constant(n)
            case ("name", name):
                return self.context.constant(env[name]) if name in env else self.symbols[name]
            case ("prime", inner):
                primes = 1
                while inner[0] == "prime":
                    inner, primes = inner[1], primes + 1
                if inner[0] == "name":
                    known = max(k for k in range(primes + 1) if inner[1] + "'" * k in self.symbols)
                    result, primes = self.symbols[inner[1] + "'" * known], primes - known
                else:
                    result = self.value(inner, env)
                for _ in range(primes):
                    result = self.derive(result)
                return result
            case ("neg", a):
                return -self.value(a, env)
            case ("+", a, b):
                return self.value(a, env) + self.value(b, env)
            case ("-", a, b):
                return self.value(a, env) - self.value(b, env)
            case ("*", a, b):
                return self.value(a, env) * self.value(b, env)
            case ("/", a, b):
                return self.value(a, env) * (1 / self.value(b, env).leading_coefficient())
            case ("^", a, b):
                return self.value(a, env) ** ex.index(b, env)
            case ("element", family, indices):
                return self.element(family, [ex.index(i, env) for i in indices])
            case ("call", "ratio", [("name", law), order]):
                return self.ratio(law, ex.index(order, env))
            case ("call", "D", [a]):
                return self.derive(self.value(a, env))
            case ("call", "minor", [("name", family), ("list", rows), ("list", columns)]):
                rows, columns = ([ex.index(i, env) for i in side] for side in (rows, columns))
                return self.minor(family, rows, columns)
            case ("call", "sum", [("for", body, where)]):
                return sum((self.value(body, e) for e in ex.instances(where, env)), self.zero)
        raise ValueError(f"cannot evaluate {tree}")

    def ratio(self, law, order):
        key = (law, order)
        if key not in self.memory:
            if order == 0:
                self.memory[key] = self.one
            elif order == 1:
                self.memory[key] = self.value(self.laws[law], {})
            else:
                before = self.ratio(law, order - 1)
                self.memory[key] = self.derive(before) + self.ratio(law, 1) * before
        return self.memory[key]

    def minor(self, family, rows, columns):
        if not rows:
            return self.one
        total = self.zero
        for i, column in enumerate(columns):
            rest = self.minor(family, rows[1:], columns[:i] + columns[i + 1 :])
            total += (-1) ** i * self.element(family, [rows[0], column]) * rest
        return total

    def element(self, family, indices):
        rules, symmetric, primitive_terms = self.families.get(family, ([], False, None))
        orders = [sorted(indices, reverse=True), sorted(indices), indices] if symmetric else [indices]
        for order in orders:
            key = (family, *order)
            if key in self.memory:
                return self.memory[key]
            for _, pattern, by_derivative, body, where in rules:
                env = {}
                for place, number in zip(pattern, order):
                    if place[0] == "name":
                        env[place[1]] = number
                    elif place != ("number", number):
                        break
                else:
                    if all(ex.satisfied(c, env) for c in where):
                        self.memory[key] = result = (
                            self.primitive(self.value(body, env), primitive_terms, env)
                            if by_derivative
                            else self.value(body, env)
                        )
                        return result
        raise LookupError(f"no rule for {family}{indices}")

    def primitive(self, derivative, texts, env):
        terms = self.terms(texts, env)
        verdict, form = self.decide_derivative(derivative, [t for _, t in terms])
        if verdict != "holds":
            raise ArithmeticError(f"no primitive: {verdict}")
        return sum((c[0] * t / c[1] for c, (_, t) in zip(form, terms)), self.zero)

    def terms(self, texts, env, length=None):
        found = []
        for text in [texts] if isinstance(texts, str) else texts:
            tree, where = ex.swept(text)
            for inner in ex.instances(where, env, length):
                found.append((text, self.value(tree, inner)))
        return found

    # Linear algebra.  A row is a list of polynomials in the base symbols, the right side last.

    def rows(self, columns, right, split):
        """Compares coefficients of the monomials in the first `split` symbols."""
        table = {}
        for j, p in enumerate([*columns, right]):
            for exponents, value in p.terms():
                row = table.setdefault(exponents[:split], [{} for _ in range(len(columns) + 1)])
                row[j][(0,) * split + exponents[split:]] = value
        return [[self.context.from_dict(d) for d in table[m]] for m in sorted(table)]

    def reduce(self, row, pivots):
        """The row without the pivots' columns, primitive."""
        for column, pivot in pivots.items():
            if not row[column].is_zero():
                g = row[column].gcd(pivot[column])
                a, b = pivot[column] / g, row[column] / g
                row = [a * x - b * y for x, y in zip(row, pivot)]
        common = self.zero
        for x in row:
            if not x.is_zero():
                common = x.gcd(common)
        return row if common.is_zero() else [x / common for x in row]

    def solve(self, columns, right, split):
        """("unique", x) | ("family", free columns) | ("none",), fractions as pairs."""
        n = len(columns)
        pivots = {}
        rows = sorted(self.rows(columns, right, split), key=lambda r: sum(len(x) for x in r))
        for row in rows:
            row = self.reduce(row, pivots)
            column = next((j for j in range(n) if not row[j].is_zero()), None)
            if column is None:
                if not row[n].is_zero():
                    return ("none",)
                continue
            for other in list(pivots):
                pivots[other] = self.reduce(pivots[other], {column: row})
            pivots[column] = row
        if len(pivots) < n:
            return ("family", [j for j in range(n) if j not in pivots])
        result = []
        for j in range(n):
            numerator, denominator = pivots[j][n], pivots[j][j]
            g = numerator.gcd(denominator)
            numerator, denominator = numerator / g, denominator / g
            # The denominator integral, primitive, with a positive leading coefficient.
            scale = content(denominator)
            result.append((numerator / scale, denominator / scale))
        return ("unique", result)

    def admitted(self, form, kind):
        for numerator, denominator in form:
            if kind != "rational" and not denominator.is_constant():
                return False
            if kind == "constant" and self.variable:
                at = self.generators
                if max(p.degrees()[at] for p in (numerator, denominator)) > 0:
                    return False
        return True

    def decide_value(self, target, terms, kind):
        outcome = self.solve(terms, target, self.generators)
        if outcome[0] == "none":
            return ("refuted", None)
        if outcome[0] == "family":
            return ("undetermined", outcome[1])
        if self.admitted(outcome[1], kind):
            return ("holds", outcome[1])
        # Constants that do not exist are no form; a form with denominators is worth showing.
        return ("refuted", None if kind == "constant" else outcome[1])

    def decide_derivative(self, derivative, terms, kind="polynomial"):
        """Unknown coefficients p and their derivatives r: the sum of p·b′ + r·b is the derivative."""
        primed = [self.derive(t) for t in terms]
        n = len(terms)
        if not self.variable:
            return self.decide_value(derivative, primed, kind)
        outcome = self.solve([*primed, *terms], derivative, self.generators)
        if outcome[0] == "none":
            return ("refuted", None)
        if outcome[0] == "unique":
            p, r = outcome[1][:n], outcome[1][n:]
            at = self.generators
            for (pn, pd), (rn, rd) in zip(p, r):
                if (pn.derivative(at) * pd - pn * pd.derivative(at)) * rd != rn * pd * pd:
                    return ("refuted", None)
            return ("holds" if self.admitted(p, kind) else "refuted", p)
        # Dependent columns: polynomial coefficients of growing degree, compared monomial by monomial.
        t = self.symbols[self.variable]
        for degree in range(DEGREES):
            columns = [self.derive(t**i * b) for b in terms for i in range(degree + 1)]
            outcome = self.solve(columns, derivative, self.generators + 1)
            if outcome[0] == "family":
                return ("undetermined", outcome[1])
            if outcome[0] == "unique":
                form = []
                for k in range(n):
                    parts = outcome[1][k * (degree + 1) : (k + 1) * (degree + 1)]
                    if not all(d.is_constant() for _, d in parts):
                        return ("unsettled", None)
                    form.append((sum((c / d * t**i for i, (c, d) in enumerate(parts)), self.zero), self.one))
                return ("holds", form)
        return ("unsettled", None)

    def text(self, fraction):
        def one(p):
            if p.is_zero():
                return "0"
            parts = []
            for exponents, value in p.terms():
                factors = [
                    n if e == 1 else f"{n}^{e}" for n, e in zip(self.names, exponents) if e
                ]
                sign = "-" if value < 0 else "+"
                value = abs(value)
                if value != 1 or not factors:
                    factors.insert(0, str(value))
                parts.append((sign, "*".join(factors)))
            first = ("-" if parts[0][0] == "-" else "") + parts[0][1]
            return first + "".join(f" {s} {f}" for s, f in parts[1:])

        numerator, denominator = fraction
        if denominator.is_constant():
            return one(numerator / denominator)
        return f"({one(numerator)})/({one(denominator)})"

    def decide(self, claim, env, length=None):
        """(verdict, terms, their fractions)"""
        terms = self.terms(claim["terms"], env, length)
        kind = claim.get("coefficients", "polynomial")
        values = [t for _, t in terms]
        if "target" in claim:
            target = self.value(ex.expression(claim["target"]), env)
            verdict, form = self.decide_value(target, values, kind)
        else:
            target = self.value(ex.expression(claim["derivative"]), env)
            verdict, form = self.decide_derivative(target, values, kind)
        return verdict, terms, form

    def decisions(self, only=None):
        """(name, index, expected verdict, verdict, terms, their fractions)"""
        for claim in self.document.get("claim", []):
            if only and only not in claim["name"]:
                continue
            texts = claim["terms"]
            texts = [texts] if isinstance(texts, str) else texts
            lengths = [None]
            if any(ex.is_open(ex.swept(text)[1]) for text in texts):
                lengths = range(1, claim["at_most"] + 1)
            for env in ex.instances(ex.conditions(claim["for"]) if "for" in claim else []):
                for length in lengths:
                    verdict, terms, form = self.decide(claim, env, length)
                    if verdict == "holds":
                        break
                for left, form_of_it in claim.get("yields", {}).items():
                    _, family, indices = ex.expression(left)
                    found = self.terms(form_of_it, env)
                    self.memory[(family, *(ex.index(i, env) for i in indices))] = sum(
                        (c[0] * t / c[1] for c, (_, t) in zip(form, found)), self.zero
                    )
                yield claim["name"], env, claim.get("expect", "holds"), verdict, terms, form


def fraction_of(spec, text):
    """A coefficient as the program writes it, as numerator and denominator."""
    symbols = spec.symbols

    def walk(tree):
        match tree:
            case ("/", a, b):
                (an, ad), (bn, bd) = walk(a), walk(b)
                return an * bd, ad * bn
            case ("*", a, b):
                (an, ad), (bn, bd) = walk(a), walk(b)
                return an * bn, ad * bd
            case ("+" | "-" as sign, a, b):
                (an, ad), (bn, bd) = walk(a), walk(b)
                return (an * bd + bn * ad, ad * bd) if sign == "+" else (an * bd - bn * ad, ad * bd)
            case ("neg", a):
                n, d = walk(a)
                return -n, d
            case ("^", a, b):
                n, d = walk(a)
                return n ** ex.index(b, {}), d ** ex.index(b, {})
            case ("name", name):
                return symbols[name], spec.one
            case ("number", n):
                return spec.context.constant(n), spec.one
        raise ValueError(tree)

    return walk(ex.expression(text))


def against(spec, path):
    """The number of decisions that agree with the program's result file; a difference ends the run."""
    with open(path) as file:
        claims = json.load(file)["claims"]
    agreed = 0
    decisions = list(spec.decisions())
    if len(decisions) != len(claims):
        sys.exit(f"{path}: {len(claims)} claims instead of {len(decisions)}")
    for (name, env, _, verdict, terms, form), claim in zip(decisions, claims):
        label = f"{path}: {name} {env}"
        if claim["name"] != name or claim["index"] != env:
            sys.exit(f"{label}: the result has {claim['name']} {claim['index']}")
        if claim["verdict"] != verdict:
            sys.exit(f"{label}: {claim['verdict']} instead of {verdict}")
        if verdict == "holds":
            # The sum over the program's terms, evaluated here, must be the sum over ours: terms are matched by value.
            given = [(fraction_of(spec, f["coefficient"]), f["term"]) for f in claim["form"]]
            expected = [(c, v) for c, (_, v) in zip(form, terms) if not c[0].is_zero()]
            if len(given) != len(expected):
                sys.exit(f"{label}: {len(given)} terms instead of {len(expected)}")
            for ((n, d), text), ((m, e), value) in zip(given, expected):
                if n * e != m * d or spec.value(ex.expression(text), {}) != value:
                    sys.exit(f"{label}: {text} has {spec.text((n, d))} instead of {spec.text((m, e))}")
        agreed += 1
    return agreed


def golden(spec):
    """One line of JSON for each decision; a form as positions in the list of terms with numerator and denominator."""
    lines = []
    for name, env, _, verdict, terms, form in spec.decisions():
        line = {"name": name, "index": env, "verdict": verdict}
        if verdict == "undetermined":
            line["kernel"] = len(form)
        elif form is not None:
            line["terms"] = len(terms)
            line["form"] = [
                [i, spec.text((n, spec.one)), spec.text((d, spec.one))]
                for i, (n, d) in enumerate(form)
                if not n.is_zero()
            ]
        lines.append(json.dumps(line, ensure_ascii=False))
    return "[\n" + ",\n".join(lines) + "\n]\n"


def golden_files(paths, check):
    folder = os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "golden")
    for path in paths:
        made = golden(Spec(path))
        name = os.path.join(folder, os.path.basename(path).replace(".toml", ".json"))
        if check:
            with open(name, encoding="utf-8") as file:
                if file.read() != made:
                    sys.exit(f"{name} differs from what is decided afresh")
        else:
            with open(name, "w", encoding="utf-8") as file:
                file.write(made)
    print(f"{'checked' if check else 'wrote'} {len(paths)} files of decisions")


def main(arguments):
    if arguments[0] in ("--golden", "--check"):
        golden_files(arguments[1:], arguments[0] == "--check")
        return
    if arguments[0] == "--against":
        agreed = against(Spec(arguments[2]), arguments[1])
        print(f"{arguments[2]}: {agreed} decisions agree")
        return
    surprises = 0
    only = None
    if arguments[0] == "--claim":
        only, arguments = arguments[1], arguments[2:]
    for path in arguments:
        spec = Spec(path)
        for name, env, expected, verdict, terms, form in spec.decisions(only):
            mark = "" if verdict == expected else f"   EXPECTED {expected}"
            surprises += bool(mark)
            index = ", ".join(f"{k} = {v}" for k, v in env.items())
            print(f"{os.path.basename(path)}: {name} [{index}]: {verdict}{mark}")
            if verdict == "undetermined":
                print(f"    free: {form}")
            elif form is not None:
                for i, (coefficient, (text, _)) in enumerate(zip(form, terms)):
                    if not coefficient[0].is_zero():
                        print(f"    {i}: {spec.text(coefficient)}   of {text}")
    sys.exit(1 if surprises else 0)


if __name__ == "__main__":
    main(sys.argv[1:])
