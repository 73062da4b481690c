"""A second checker, in another language and from docs/certificate.md alone: strings of letters, dictionaries, no packages.

Slow and plain on purpose. Reads certificates from standard input, each as a line of JSON text, and prints one status a line:
accepted ID, rejected, or malformed. Rule numbers are those of the page.
"""

import hashlib
import json
import re
import sys
from fractions import Fraction
from math import gcd, lcm

ASSUMES = [
    "The Hamiltonian is the sum of all translates, by whole cells, of the listed terms; every cell holds the same number of spins 1/2.",
    "Counted are sums of all translates, by whole cells, of one combination of Pauli strings; the identity is left out.",
    "Nothing is said about quasilocal, non-local or staggered conserved quantities.",
]


class Malformed(Exception):
    pass


class Rejected(Exception):
    pass


def form(ok):
    if not ok:
        raise Malformed


def rule(ok):
    if not ok:
        raise Rejected


def canonical(value):
    if isinstance(value, str):
        form(re.fullmatch(r"[ !#-\[\]-~]*", value))
        return '"' + value + '"'
    if isinstance(value, bool) or value is None or isinstance(value, float):
        raise Malformed
    if isinstance(value, int):
        form(0 <= value < 2**53)
        return str(value)
    if isinstance(value, list):
        return "[" + ",".join(map(canonical, value)) + "]"
    return "{" + ",".join(canonical(k) + ":" + canonical(v) for k, v in value.items()) + "}"


def parse(text):
    try:
        value = json.loads(text)
    except (ValueError, RecursionError):
        raise Malformed
    form(canonical(value) + "\n" == text)
    return value


def fields(value, *names):
    form(isinstance(value, dict) and list(value) == list(names))
    return [value[name] for name in names]


def natural(value, least, most=2**53):
    form(isinstance(value, int) and least <= value <= most)
    return value


def pairs(value):
    form(isinstance(value, list) and all(isinstance(p, list) and len(p) == 2 for p in value))
    return value


def pauli_string(text, n, longest):  # F4
    form(isinstance(text, str) and re.fullmatch("[IXYZ]+", text))
    form(len(text) % n == 0 and len(text) <= n * longest)
    form(text[:n] != "I" * n and text[-n:] != "I" * n)
    return text


def coefficient(text):  # F3
    form(isinstance(text, str))
    match = re.fullmatch(r"(-?[1-9][0-9]*)(?:/([1-9][0-9]*))?", text)
    form(match)
    p, q = int(match[1]), int(match[2] or 1)
    form(gcd(p, q) == 1 and (match[2] is None or q >= 2))
    return Fraction(p, q)


def terms(value, n, longest):  # F5
    found = [(pauli_string(word, n, longest), coefficient(c)) for word, c in pairs(value)]
    form(all(a[0] < b[0] for a, b in zip(found, found[1:])))
    return found


PRODUCT = {"XY": ("Z", 1), "YZ": ("X", 1), "ZX": ("Y", 1), "YX": ("Z", 3), "ZY": ("X", 3), "XZ": ("Y", 3)}


def multiply(a, b):
    """Letters and the exponent of i."""
    letters, power = [], 0
    for x, y in zip(a, b):
        if x == "I" or y == "I":
            letters.append(x if y == "I" else y)
        elif x == y:
            letters.append("I")
        else:
            letter, e = PRODUCT[x + y]
            letters.append(letter)
            power += e
    return "".join(letters), power % 4


def trim(word, n):
    while word.startswith("I" * n):
        word = word[n:]
    while word.endswith("I" * n):
        word = word[:-n]
    return word


def meetings(h, word, n):
    """E1: for all translates of terms T that anticommute with a string: coefficient, product, exponent of i of T times string."""
    for t, j in h:
        for at in range(n - len(t), len(word), n):
            left, right = max(0, -at), max(0, at + len(t) - len(word))
            padded = "I" * left + word + "I" * right
            start = at + left
            placed = "I" * start + t + "I" * (len(padded) - start - len(t))
            product, power = multiply(placed, padded)
            if power % 2 == 1:
                yield j, trim(product, n), power


def row(h, output, n, k, p, scale):
    """E2, as coefficients modulo p by candidate."""
    found = {}
    for j, parent, power in meetings(h, output, n):
        if len(parent) <= n * k:
            sign = 1 if power == 1 else -1
            found[parent] = found.get(parent, 0) + sign * int(j * scale)
    return {word: value % p for word, value in found.items() if value % p}


def is_prime(p):
    return p > 1 and all(p % d for d in range(2, int(p**0.5) + 1))


class Independence:
    """Gaussian elimination modulo p."""

    def __init__(self, p):
        self.p, self.pivots = p, {}

    def add(self, vector):
        p, vector = self.p, dict(vector)
        for pivot, other in self.pivots.items():
            factor = vector.get(pivot, 0)
            if factor:
                for word, value in other.items():
                    vector[word] = (vector.get(word, 0) - factor * value) % p
        vector = {word: value for word, value in vector.items() if value}
        if not vector:
            return False
        pivot = min(vector)
        inverse = pow(vector[pivot], -1, p)
        self.pivots[pivot] = {word: value * inverse % p for word, value in vector.items()}
        return True


def outputs(n, m):
    """U2: outputs of range m in rising order."""
    for number in range(4 ** (n * (m - 1)), 4 ** (n * m)):
        word = "".join("IXZY"[number >> (2 * s) & 3] for s in range(n * m))
        if word[:n] != "I" * n:
            yield word


def check(text):
    form(re.fullmatch(r"[\n -~]*", text))
    top = fields(parse(text), "certificate", "version", "kind", "tool", "model", "claim", "charges", "evidence")
    what, version, kind, tool, model, claim, charges, evidence = top
    form(what == "conserved quantities of a spin chain" and version == 1 and kind == "exhaustive")
    form(isinstance(tool, str) and re.fullmatch(r"[A-Za-z0-9][A-Za-z0-9 .+-]{0,99}", tool))

    n, r, h = fields(model, "cell", "range", "terms")
    natural(n, 1), natural(r, 1)
    h = terms(h, n, r)
    form(h)
    k, dimensions, rings, statement, assumes = fields(claim, "range", "dimensions", "rings", "statement", "assumes")
    natural(k, 1), natural(rings, 1)
    form(isinstance(dimensions, list) and isinstance(statement, str) and isinstance(assumes, list))
    for d in dimensions:
        natural(d, 0)
    for a in assumes:
        form(isinstance(a, str))
    form(isinstance(charges, list))
    listed = []
    for charge in charges:
        own, q = fields(charge, "range", "terms")
        listed.append((natural(own, 1, k), terms(q, n, own)))
    p, sweeps, pivots = fields(evidence, "prime", "sweeps", "pivots")
    natural(p, 3, 2**26 - 1)
    for m, u in pairs(sweeps):
        natural(m, 1, k + r - 1), natural(u, 1)
    form(isinstance(pivots, list))
    for pivot in pivots:
        pauli_string(pivot, n, k + r - 1)

    rule(max(len(word) for word, _ in h) == n * r and rings == 2 * k + 2 * r - 3 and len(dimensions) == k)  # C1
    ranges = [own for own, _ in listed]
    rule(ranges == sorted(ranges))  # C2
    rule(dimensions == [sum(own <= j for own in ranges) for j in range(1, k + 1)])
    rule(
        statement
        == f"On the infinite chain of cells of {n} spin{'s' if n > 1 else ''} 1/2, and on every ring of at least {rings} cells, "
        f"the translation-invariant conserved quantities of range at most {k} cell{'s' if k > 1 else ''} form a space of dimension "
        f"exactly {dimensions[-1]}, and it is spanned by the listed charges."
    )  # C3
    rule(assumes == ASSUMES)  # C4

    for own, q in listed:
        sums = {}
        for word, c in q:
            for j, output, power in meetings(h, word, n):
                sums[output] = sums.get(output, 0) + (-1 if power == 1 else 1) * j * c
        rule(not any(sums.values()))  # L1
        rule(any(len(word) == n * own for word, _ in q))  # L2
    rule(is_prime(p))  # L3
    leading = Independence(p)
    for own, q in listed:
        scale = lcm(*(c.denominator for _, c in q))
        full = {word: int(c * scale) % p for word, c in q if len(word) == n * own}
        rule(leading.add({word: value for word, value in full.items() if value}))

    scale = lcm(*(j.denominator for _, j in h))
    state = {}  # word: (word, factor), or (None, 0) for zero; a word that is not in it represents its class

    def find(word):
        factor = 1
        while word in state:
            word, by = state[word]
            factor = factor * by % p
            if word is None:
                break
        return word, factor

    def reduce(output):  # U1
        classes = {}
        for word, value in row(h, output, n, k, p, scale).items():
            root, factor = find(word)
            if root is not None:
                classes[root] = (classes.get(root, 0) + value * factor) % p
        return {root: value for root, value in classes.items() if value}

    for m, u in sweeps:  # U2, U3
        used = 0
        for output in outputs(n, m):
            left = reduce(output)
            if len(left) == 1:
                state[next(iter(left))] = (None, 0)
                used += 1
            elif len(left) == 2:
                (a, f), (b, g) = left.items()
                state[a] = (b, -g * pow(f, -1, p) % p)
                used += 1
        rule(used == u)
    core = Independence(p)
    for pivot in pivots:
        rule(core.add(reduce(pivot)))  # U4
    candidates = 4 ** (n * k) - 4 ** (n * (k - 1))
    rule(candidates - sum(u for _, u in sweeps) - len(pivots) == dimensions[-1])  # U5
    return hashlib.sha256(text.encode("ascii")).hexdigest()


for line in sys.stdin:
    try:
        print("accepted", check(json.loads(line)), flush=True)
    except Malformed:
        print("malformed", flush=True)
    except Rejected:
        print("rejected", flush=True)
