"""Checks what the program says of one system with SymPy: exact derivatives, values to 40 digits at rational points.

Reads a JSON object from standard input: prices, income, utility, quantities (formulas), points (lists of name and
rational), and, where there are any, expenditure and indirect_utility. Prints a JSON object with the largest relative
failure of each condition over the points.
"""
import json
import re
import sys

import sympy as sp


def read(text):
    text = re.sub(r"(\w+)\[(\w+)\]", r"\1_\2", text).replace("^", "**")
    names = set(re.findall(r"[A-Za-z_]\w*", text)) - {"ln", "exp", "sqrt", "pi"}
    known = {name: symbol(name) for name in names}
    known.update(ln=sp.log, exp=sp.exp, sqrt=sp.sqrt, pi=sp.pi)
    return sp.sympify(text, locals=known)


def symbol(name):
    return sp.Symbol(re.sub(r"\[(\w+)\]", r"_\1", name), real=True)


def main():
    job = json.load(sys.stdin)
    p = [symbol(name) for name in job["prices"]]
    m, u = symbol(job["income"]), symbol(job["utility"])
    x = [read(formula) for formula in job["quantities"]]
    n = len(p)
    slutsky = [[sp.diff(x[i], p[j]) + x[j] * sp.diff(x[i], m) for j in range(n)] for i in range(n)]
    tests = {
        "adding_up": [(sum(p[i] * x[i] for i in range(n)), m)],
        "homogeneity": [(sum(q * sp.diff(x[i], q) for q in p + [m]), 0) for i in range(n)],
        "symmetry": [(slutsky[i][j], slutsky[j][i]) for i in range(n) for j in range(i)],
    }
    e, v = (read(job[key]) if job.get(key) else None for key in ("expenditure", "indirect_utility"))
    if v is not None:
        tests["roy"] = [(sp.diff(v, p[i]), -x[i] * sp.diff(v, m)) for i in range(n)]
    if e is not None and v is not None:
        tests["inverse"] = [(e.subs(u, v), m)]
        tests["shephard"] = [(sp.diff(e, p[i]).subs(u, v), x[i]) for i in range(n)]
    worst = {key: 0.0 for key in tests}
    for point in job["points"]:
        at = {symbol(name): sp.Rational(value) for name, value in point}
        for key, pairs in tests.items():
            for left, right in pairs:
                a, b = (sp.N(sp.sympify(side).subs(at), 40) for side in (left, right))
                worst[key] = max(worst[key], float(abs(a - b) / (1 + abs(a) + abs(b))))
    print(json.dumps(worst))


if __name__ == "__main__":
    main()
