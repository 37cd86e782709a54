#!/usr/bin/env python3
"""Checks the exact certificates of results, with Python's standard library alone.

usage: check_exact.py RESULT.json ...

Written from the section "Certificates" of src/lib/nonlocality/README.md, not from the program: kinds
deterministic-strategy, linear-programme and npa-exact (its bound; the feasible side is in doubles
and left out). Prints one JSON line per file; exit 0 when every printed side that it can judge is
proved, else 1.
"""
import itertools
import json
import re
import sys
from fractions import Fraction

MOST_STRATEGIES = 200_000  # enumerated again, to prove the upper side too
RATIONAL = re.compile(r"[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?(/[1-9]\d*)?", re.IGNORECASE)
FRACTION = re.compile(r"-?\d+(/[1-9]\d*)?")


class Refused(Exception):
    pass


def require(condition, reason):
    if not condition:
        raise Refused(reason)


def coefficient(text):
    require(RATIONAL.fullmatch(str(text).strip()), f"{text} is not rational")
    parts = [Fraction(part) for part in str(text).strip().split("/")]
    return parts[0] / parts[1] if len(parts) == 2 else parts[0]


def fraction(text):
    require(isinstance(text, str) and FRACTION.fullmatch(text), f"{text} is no fraction")
    return Fraction(text)


def whole(value):
    if isinstance(value, int) and not isinstance(value, bool):
        return value
    require(isinstance(value, str) and re.fullmatch(r"-?\d+", value), f"{value} is not whole")
    return int(value)


# Forms: {frozenset of (party, input, output): coefficient}, the constant under the empty set.


def collins_gisin(outputs, terms):
    """The same form without the last output of any input."""
    form = {}
    for weight, events in terms:
        partial = [(weight, frozenset())]
        parties = [party for party, _, _ in events]
        require(len(set(parties)) == len(parties), "a party occurs twice in a term")
        for party, x, a in events:
            last = outputs[party][x] - 1
            require(0 <= a <= last, "an event is outside the scenario")
            if a < last:
                partial = [(c, e | {(party, x, a)}) for c, e in partial]
            else:
                rest = [(-c, e | {(party, x, b)}) for c, e in partial for b in range(last)]
                partial += rest
        for c, e in partial:
            form[e] = form.get(e, 0) + c
    return form


def add(form, other, weight):
    for key, value in other.items():
        form[key] = form.get(key, 0) + weight * value


def read_terms(terms):
    return [(coefficient(c), [tuple(event) for event in events]) for c, events in terms]


def maximised(problem):
    """Terms of g: f for max, -f for min."""
    sign = -1 if problem["sense"] == "min" else 1
    return [(sign * c, events) for c, events in read_terms(problem["terms"])]


def constraint_forms(problem):
    """(relation, form - value) of every constraint."""
    found = []
    for constraint in problem["constraints"]:
        terms = read_terms(constraint["terms"]) + [(-coefficient(constraint["value"]), [])]
        found.append((constraint["relation"], collins_gisin(problem["outputs"], terms)))
    return found


def events_of_key(key):
    """"a,b|x,y", with - for a party that is left out."""
    a, x = (side.split(",") for side in key.split("|"))
    require(len(a) == len(x), f"{key} is no key")
    return [(p, int(x[p]), int(a[p])) for p in range(len(a)) if (a[p], x[p]) != ("-", "-")]


# The kinds. Each returns the sides of max g that it proves: (lower, upper), None for none.


def check_strategy(problem, certificate):
    require(not problem["constraints"], "a strategy alone proves nothing under constraints")
    outputs, terms = problem["outputs"], maximised(problem)
    strategy = certificate["strategy"]
    require([len(row) for row in strategy] == [len(row) for row in outputs], "wrong shape")
    for row, counts in zip(strategy, outputs):
        require(all(type(a) is int and 0 <= a < n for a, n in zip(row, counts)), "no such output")

    def value_of(s):
        return sum((c for c, events in terms if all(s[p][x] == a for p, x, a in events)), Fraction(0))

    value = value_of(strategy)
    require(fraction(certificate["value"]) == value, f"the strategy reaches {value}")
    count = 1
    for n in itertools.chain(*outputs):
        count *= n
    if count > MOST_STRATEGIES:
        return value, None
    answers = [list(itertools.product(*map(range, counts))) for counts in outputs]
    upper = max(value_of(s) for s in itertools.product(*answers))
    require(upper == value, f"another strategy reaches {upper}")
    return value, upper


def check_programme(problem, certificate):
    outputs, terms = problem["outputs"], maximised(problem)
    table = {key: fraction(text) for key, text in certificate["primal"].items()}
    require(all(p >= 0 for p in table.values()), "a negative probability")
    marginals, totals, inputs_seen = {}, {}, list(itertools.product(*(range(len(r)) for r in outputs)))
    for key, p in table.items():
        events = events_of_key(key)
        require([e[0] for e in events] == list(range(len(outputs))), f"{key} is no key")
        collins_gisin(outputs, [(1, events)])  # within the scenario
        inputs = tuple(e[1] for e in events)
        for size in range(len(events) + 1):
            for part in itertools.combinations(events, size):
                sums = marginals.setdefault(part, {})
                sums[inputs] = sums.get(inputs, 0) + p
        totals[inputs] = totals.get(inputs, 0) + p
    require(all(totals.get(x) == 1 for x in inputs_seen), "the behaviour is not normalised")
    for part, sums in marginals.items():
        compatible = [x for x in inputs_seen if all(x[p] == y for p, y, _ in part)]
        require(len({sums.get(x, 0) for x in compatible}) == 1, "the behaviour is signalling")

    def at(form):
        return sum(c * next(iter(marginals.get(tuple(sorted(e)), {0: 0}).values())) for e, c in form.items())

    constraints = constraint_forms(problem)
    for relation, form in constraints:
        value = at(form)
        require(value >= 0 or relation == "<=", "the behaviour violates a constraint")
        require(value <= 0 or relation == ">=", "the behaviour violates a constraint")
    form = collins_gisin(outputs, terms)
    lower = at(form)
    for key, text in certificate["dual"].items():
        weight = fraction(text)
        require(weight >= 0, f"the multiplier of {key} is negative")
        named = re.fullmatch(r"constraint (\d+) (>=|<=)", key)
        if named:
            relation, row = constraints[int(named[1])]
            require(relation in ("=", named[2]), f"{key} is not what the problem says")
            add(form, row, weight if named[2] == ">=" else -weight)
        else:
            add(form, collins_gisin(outputs, [(1, events_of_key(key))]), weight)
    upper = sum(c for e, c in form.items() if not e or c > 0)
    if certificate["value"] is not None:
        require(lower == upper == fraction(certificate["value"]), f"sides {lower} and {upper}")
    return lower, upper


def reduce(word):
    kept = []
    for letter in map(tuple, word):
        if kept and kept[-1][0] == letter[0]:
            if kept[-1] != letter:
                return None
        else:
            kept.append(letter)
    return tuple(kept)


def moment(left, right):
    """The name of <left^dagger right>, the same for its adjoint; None for 0."""
    product = tuple(reduce(list(reversed(u)) + list(v)) for u, v in zip(left, right))
    if None in product:
        return None
    return min(product, tuple(tuple(reversed(word)) for word in product))


def belongs(word, level):
    counts = [len(letters) for letters in word]
    if level == "1+AB":
        return len(counts) == 2 and max(counts) <= 1
    if isinstance(level, int):
        return sum(counts) <= level
    if "perParty" in level:
        return max(counts) <= level["perParty"]
    products = [[p.count(chr(65 + k)) for k in range(len(counts))] for p in level["products"]]
    return counts in products or not any(counts)


def read_monomials(problem, certificate):
    outputs = problem["outputs"]
    words = [tuple(tuple(map(tuple, w)) for w in word) for word in certificate["monomials"]]
    listed = set(words)
    require(len(listed) == len(words), "a monomial occurs twice")
    require(tuple(() for _ in outputs) in listed, "the identity is missing")
    for word in words:
        require(len(word) == len(outputs), "a monomial is of other parties")
        for party, letters in enumerate(word):
            require(reduce(letters) == letters, "a monomial is not reduced")
            require(all(0 <= a < outputs[party][x] - 1 for x, a in letters), "no such operator")
        require(belongs(word, problem["level"]), "a monomial is not of the level")
        shorter = [word[:p] + (w[1:],) + word[p + 1 :] for p, w in enumerate(word) if w]
        require(not shorter or any(other in listed for other in shorter), "the list is not closed")
    return words


def is_positive(rows):
    """Positive semidefinite, by elimination without fractions (Bareiss); rows of the lower triangle."""
    before = 1
    for k, row in enumerate(rows):
        pivot, below = row[k], rows[k + 1 :]
        if pivot < 0 or (pivot == 0 and any(other[k] for other in below)):
            return False
        if pivot == 0:
            continue
        column = [other[k] for other in below]
        for i, other in enumerate(below):
            for j in range(i + 1):
                at = k + 1 + j
                other[at] = (other[at] * pivot - column[i] * column[j]) // before
        before = pivot
    return True


def check_moments(problem, certificate):
    words = read_monomials(problem, certificate)
    scale, shift = whole(certificate["denominator"]), whole(certificate["shift"])
    require(scale > 0 and shift >= 0, "the denominator or the shift is negative")
    entries = [whole(entry) for entry in certificate["multiplier"]]
    require(len(entries) == len(words) * (len(words) + 1) // 2, "the multiplier has the wrong size")
    identity = tuple(() for _ in problem["outputs"])
    sums, rows, at = {}, [], iter(entries)
    for i, u in enumerate(words):
        rows.append([])
        for j in range(i + 1):
            entry, name = next(at), moment(u, words[j])
            rows[i].append(entry + (shift if i == j else 0))
            if name is not None:
                sums[name] = sums.get(name, 0) + (entry if i == j else 2 * entry)

    def add_form(form, weight):
        for events, c in form.items():
            word = list(identity)
            for party, x, a in events:
                word[party] = ((x, a),)
            name = moment(identity, word)
            require(name in sums, "the monomials lack a moment")
            sums[name] += weight * c

    add_form(collins_gisin(problem["outputs"], maximised(problem)), Fraction(scale))
    for key, value in certificate["rowMultipliers"].items():
        require(problem["nonNegative"] and whole(value) >= 0, f"the multiplier of P({key})")
        add_form(collins_gisin(problem["outputs"], [(1, events_of_key(key))]), whole(value))
    constraints, weights = constraint_forms(problem), certificate["constraintMultipliers"]
    require(len(weights) <= len(constraints), "a multiplier of no constraint")
    for (relation, form), weight in zip(constraints, map(whole, weights)):
        require(relation == "=" or weight >= 0, "the multiplier of a constraint is negative")
        add_form(form, -weight if relation == "<=" else weight)
    total = sums.pop(identity) + sum(map(abs, sums.values())) + len(words) * shift
    bound = Fraction(total) / scale
    require(bound <= fraction(certificate["bound"]), f"the multiplier proves {bound}")
    require(is_positive(rows), "the multiplier is not positive semidefinite")
    return None, bound


KINDS = {
    ("local", "deterministic-strategy"): check_strategy,
    ("no-signalling", "linear-programme"): check_programme,
    ("npa", "npa-exact"): check_moments,
}


def check(result):
    require(result["status"] == "done", "the result is not done")
    problem, certificate = result["problem"], result["certificate"]
    kind = (problem["quantity"], certificate["kind"])
    require(kind in KINDS, f"no exact check for {kind}")
    lower, upper = KINDS[kind](problem, certificate)
    if problem["sense"] == "min":
        lower, upper = (None if s is None else -s for s in (upper, lower))
    printed = [None if result[s] is None else Fraction(result[s]) for s in ("lower", "upper")]
    require(None in (lower, printed[0]) or printed[0] <= lower, f"proved is only >= {lower}")
    require(None in (upper, printed[1]) or printed[1] >= upper, f"proved is only <= {upper}")
    if result["exact"] is not None:
        for side in (lower, upper):
            require(side in (None, fraction(result["exact"])), f"the exact value is {side}")
    return lower, upper


def main(paths):
    good = bool(paths)
    for path in paths:
        try:
            with open(path, encoding="utf-8") as file:
                lower, upper = check(json.load(file))
            sides = {n: None if s is None else str(s) for n, s in (("lower", lower), ("upper", upper))}
            print(json.dumps({"checked": True, **sides}))
        except (Refused, ValueError, KeyError, IndexError, TypeError, AttributeError, OverflowError) as error:
            good = False
            print(json.dumps({"checked": False, "reason": str(error) or type(error).__name__}))
    return 0 if good else 1


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
