"""Curvature from outside: eigenvalues of the Slutsky matrix by NumPy at points, and Z3 on whether some point of the
domain has a negative characteristic coefficient.

Reads a JSON object: prices, income, quantities (formulas), facts (formulas that are positive), points (lists of name and
rational), rational (whether to ask Z3). Prints a JSON object: for each point the least quantity and the largest
eigenvalue, relative to the size of the matrix; and what Z3 answers ("sat", "unsat", "unknown", or null).
"""
import json
import sys

import numpy
import sympy as sp

from check import read, symbol


def slutsky(job):
    p = [symbol(name) for name in job["prices"]]
    m = symbol(job["income"])
    x = [read(formula) for formula in job["quantities"]]
    n = len(p)
    entry = lambda i, j: sp.diff(x[i], p[j]) + x[j] * sp.diff(x[i], m)
    return p, m, x, sp.Matrix(n, n, lambda i, j: (entry(i, j) + entry(j, i)) / 2)


def at_points(job, x, matrix):
    found = []
    for point in job["points"]:
        values = {symbol(name): sp.Rational(value) for name, value in point}
        number = lambda e: float(sp.N(e.subs(values), 30))
        a = numpy.array([[number(e) for e in row] for row in matrix.tolist()])
        size = max(numpy.abs(a).max(), 1e-300)
        found.append([min(number(e) for e in x), float(numpy.linalg.eigvalsh(a).max() / size)])
    return found


def by_z3(job, p, m, x, matrix):
    import z3

    # homogeneity: one price is 1, and adding-up lets its good be left out
    one = {p[-1]: 1}
    n = len(p) - 1
    minus = -matrix[:n, :n].subs(one)
    coefficients = [sum(minus.extract(list(s), list(s)).det() for s in subsets(n, k)) for k in range(1, n + 1)]
    symbols = sorted(set().union(*(e.free_symbols for e in coefficients + [v.subs(one) for v in x])), key=str)
    unknowns = {s: z3.Real(str(s)) for s in symbols}

    def sign(e):
        top, bottom = sp.fraction(sp.together(e.subs(one)))
        return formula(sp.expand(top * bottom), unknowns)

    solver = z3.Solver()
    solver.set("timeout", 20_000)
    for s in symbols:
        if s in p or s == m:
            solver.add(unknowns[s] > 0)
    solver.add(*[sign(e) > 0 for e in x], *[sign(read(f)) > 0 for f in job["facts"]])
    solver.add(z3.Or([sign(c) < 0 for c in coefficients]))
    return str(solver.check())


def subsets(n, k):
    from itertools import combinations

    return combinations(range(n), k)


def formula(polynomial, unknowns):
    total = 0
    for powers, coefficient in sp.Poly(polynomial, *unknowns).terms():
        term = int(sp.numer(coefficient)) / z3_number(int(sp.denom(coefficient)))
        for name, power in zip(unknowns.values(), powers):
            for _ in range(power):
                term = term * name
        total = total + term
    return total


def z3_number(n):
    import z3

    return z3.RealVal(n)


def main():
    job = json.load(sys.stdin)
    p, m, x, matrix = slutsky(job)
    answer = by_z3(job, p, m, x, matrix) if job["rational"] else None
    json.dump({"points": at_points(job, x, matrix), "z3": answer}, sys.stdout)


main()
