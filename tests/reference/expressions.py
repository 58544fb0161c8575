"""Reads the expressions of a spec file into small trees, for the reference programs in this folder.

A second, deliberately plain reader: it shares nothing with the program and accepts only what the ready specs use.
Trees are tuples: ("number", n), ("name", text), ("element", family, indices), ("call", function, arguments),
("list", items), ("prime", tree), ("neg", tree), (operator, left, right), ("for", tree, conditions).
"""

import re

TOKEN = re.compile(r"\s*(?:(\d+)|(\w+)|(\.\.|<=|>=|!=|[-+*/^()\[\],=<>'′]))")


def tokens(text):
    position, found = 0, []
    text = text.rstrip()
    while position < len(text):
        match = TOKEN.match(text, position)
        if not match:
            raise SyntaxError(f"cannot read {text[position:]!r} in {text!r}")
        found.append(match.group(match.lastindex).replace("′", "'"))
        position = match.end()
    return found


class Reader:
    def __init__(self, text):
        self.text, self.tokens, self.at = text, tokens(text), 0

    def peek(self):
        return self.tokens[self.at] if self.at < len(self.tokens) else None

    def take(self, *wanted):
        if self.peek() in wanted:
            self.at += 1
            return self.tokens[self.at - 1]
        return None

    def need(self, wanted):
        if not self.take(wanted):
            raise SyntaxError(f"expected {wanted!r} before {self.peek()!r} in {self.text!r}")

    def sum(self):
        sign = self.take("-", "+")
        left = self.product()
        if sign == "-":
            left = ("neg", left)
        while operator := self.take("+", "-"):
            left = (operator, left, self.product())
        return left

    def product(self):
        left = self.factor()
        while operator := self.take("*", "/"):
            left = (operator, left, self.factor())
        return left

    def factor(self):
        if self.take("-"):
            return ("neg", self.factor())
        left = self.primed()
        if self.take("^"):
            return ("^", left, self.factor())
        return left

    def primed(self):
        tree = self.atom()
        while self.take("'"):
            tree = ("prime", tree)
        return tree

    def items(self, closing):
        found = []
        while not self.take(closing):
            if found:
                self.need(",")
            item = self.sum()
            if self.take("for"):
                item = ("for", item, self.conditions())
            found.append(item)
        return found

    def atom(self):
        if self.take("("):
            inner = self.sum()
            self.need(")")
            return inner
        if self.take("["):
            return ("list", self.items("]"))
        token = self.peek()
        if token is None or not re.fullmatch(r"\w+", token):
            raise SyntaxError(f"unexpected {token!r} in {self.text!r}")
        self.at += 1
        if token.isdecimal():
            return ("number", int(token))
        if self.take("["):
            return ("element", token, self.items("]"))
        if self.take("("):
            return ("call", token, self.items(")"))
        return ("name", token)

    def condition(self):
        """`j = 0..8` gives ("range", "j", from, to or None), `1 <= k <= j` gives ("chain", [trees], [operators])."""
        left = self.sum()
        if self.take("="):
            start = self.sum()
            self.need("..")
            return ("range", left[1], start, None if self.peek() in (None, ",") else self.sum())
        trees, operators = [left], []
        while operator := self.take("<=", ">=", "<", ">", "!="):
            operators.append(operator)
            trees.append(self.sum())
        if not operators:
            raise SyntaxError(f"no condition in {self.text!r}")
        return ("chain", trees, operators)

    def conditions(self):
        found = [self.condition()]
        while self.take(","):
            found.append(self.condition())
        return found

    def end(self, value):
        if self.peek() is not None:
            raise SyntaxError(f"unexpected {self.peek()!r} in {self.text!r}")
        return value


def expression(text):
    reader = Reader(text)
    return reader.end(reader.sum())


def conditions(text):
    reader = Reader(text)
    return reader.end(reader.conditions())


def swept(text):
    """A tree with an optional `for` clause: (tree, conditions)."""
    reader = Reader(text)
    tree = reader.sum()
    return reader.end((tree, reader.conditions() if reader.take("for") else []))


def rule(text):
    """(family, pattern, is the derivative known?, body, conditions)"""
    reader = Reader(text)
    left = reader.primed()
    known_by_derivative = left[0] == "prime"
    if known_by_derivative:
        left = left[1]
    reader.need("=")
    body = reader.sum()
    where = reader.conditions() if reader.take("for") else []
    return reader.end((left[1], left[2], known_by_derivative, body, where))


COMPARE = {
    "<=": lambda a, b: a <= b,
    ">=": lambda a, b: a >= b,
    "<": lambda a, b: a < b,
    ">": lambda a, b: a > b,
    "!=": lambda a, b: a != b,
}


def index(tree, environment):
    """The integer value of an index expression."""
    match tree:
        case ("number", value):
            return value
        case ("name", name):
            return environment[name]
        case ("neg", inner):
            return -index(inner, environment)
        case ("+", a, b):
            return index(a, environment) + index(b, environment)
        case ("-", a, b):
            return index(a, environment) - index(b, environment)
        case ("*", a, b):
            return index(a, environment) * index(b, environment)
    raise ValueError(f"not an index: {tree}")


def satisfied(condition, environment):
    _, trees, operators = condition
    values = [index(tree, environment) for tree in trees]
    return all(COMPARE[o](a, b) for o, a, b in zip(operators, values, values[1:]))


def is_open(where):
    return any(c[0] == "range" and c[3] is None for c in where)


def instances(where, environment=None, length=None):
    """All environments of a list of ranges and conditions, in lexicographic order; an open range gets `length` values."""
    ranges = [c for c in where if c[0] == "range"]
    chains = [c for c in where if c[0] == "chain"]

    def sweep(level, env):
        if level == len(ranges):
            if all(satisfied(c, env) for c in chains):
                yield dict(env)
            return
        _, name, start, stop = ranges[level]
        start = index(start, env)
        for value in range(start, (start + length if stop is None else index(stop, env) + 1)):
            yield from sweep(level + 1, env | {name: value})

    yield from sweep(0, dict(environment or {}))
