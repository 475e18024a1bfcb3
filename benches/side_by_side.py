#!/usr/bin/env python3
"""The exact conditions, from a model file's text to the verdicts, beside other programs in one run.

  side_by_side.py --program target/release/mainspring [--other 'COMMAND --family {family} --n {n}'] [--rounds 5]
                  [--families les,ces,aids,quaids,qes] [--sizes 3,10,64]

For each family and size the two are run in turn, and the medians and their ratio are printed. Ours is what `--timings`
reports: reading the text plus homogeneity, adding-up and symmetry. The other command has to print a JSON object with
`build_s` and `prove_s` in its last line. Without --other only our own figures are printed. Peak memory is that of the
whole process. The models are written here, in the language of model files.
"""
import argparse, json, os, re, resource, shlex, statistics, subprocess, sys, tempfile
from collections import defaultdict


def shares(n, quadratic):
    lines = [f"goods 1..{n}", "prices p[i]", "income m",
             "parameters a0, a[i], b[i], g[i,j]" + (", l[i]" if quadratic else ""),
             "assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0",
             "assume sum over j of (g[i,j]) = 0", "assume g[i,j] = g[j,i]"]
    if quadratic:
        lines.append("assume sum over i of (l[i]) = 0")
    lines.append("let lnP = a0 + sum over k of (a[k]*ln(p[k]))"
                 " + 1/2*sum over k, h of (g[k,h]*ln(p[k])*ln(p[h]))")
    share = "share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*(ln(m) - lnP)"
    if quadratic:
        lines.append("let B = product over k of (p[k]^b[k])")
        share += " + l[i]/B*(ln(m) - lnP)^2"
    return "\n".join(lines + [share]) + "\n"


def ces(n):
    return "\n".join([f"goods 1..{n}", "prices p[i]", "income m", "parameters a[i], s",
                      "assume a[i] > 0, s > 0, s != 1", "let D = sum over k of (a[k]*p[k]^(1-s))",
                      "demand[i] = a[i]*m*p[i]^(-s)/D"]) + "\n"


def les(n):
    return "\n".join([f"goods 1..{n}", "prices p[i]", "income m", "parameters c[i], b[i]",
                      "assume sum over i of (b[i]) = 1",
                      "demand[i] = c[i] + b[i]*(m - sum over j of (p[j]*c[j]))/p[i]"]) + "\n"


def times(a, b):
    product = defaultdict(int)
    for u, c in a.items():
        for v, d in b.items():
            product[tuple(sorted(u + v))] += c * d
    return product


def plus(*terms):
    total = defaultdict(int)
    for sign, poly in terms:
        for u, c in poly.items():
            total[u] += sign * c
    return {u: c for u, c in total.items() if c}


def written(poly):
    out = []
    for u, c in sorted(poly.items()):
        factors = ([str(abs(c))] if abs(c) != 1 or not u else []) + list(u)
        out.append(("- " if c < 0 else "+ ") + "*".join(factors))
    return " ".join(out).removeprefix("+ ")


def qes(n):
    """The quadratic expenditure system x_i = (A_i + B_i m + C_i m^2)/D, everything multiplied out."""
    goods = range(1, n + 1)
    form = lambda letter, power=1: {tuple(sorted([f"{letter}[{j}]"] + [f"p[{j}]"] * power)): 1 for j in goods}
    Q, E, G, H = form("f", 2), form("e"), form("g"), form("h")
    D = times(Q, E)
    lines = [f"goods 1..{n}", "prices p[i]", "income m", "parameters e[i], f[i], g[i], h[i]"]
    for i in goods:
        slope = plus((2, times({(f"f[{i}]", f"p[{i}]"): 1}, E)), (-1, times(Q, {(f"e[{i}]",): 1})))
        tilt = plus((1, times({(f"h[{i}]",): 1}, E)), (-1, times(H, {(f"e[{i}]",): 1})))
        A = plus((1, times({(f"g[{i}]",): 1}, D)), (-1, times(slope, G)), (-1, times(tilt, times(G, G))))
        B = plus((1, slope), (2, times(tilt, G)))
        C = plus((-1, tilt))
        numerator = plus((1, A), (1, times(B, {("m",): 1})), (1, times(C, {("m", "m"): 1})))
        lines.append(f"demand[{i}] = ({written(numerator)})/({written(D)})")
    return "\n".join(lines) + "\n"


FAMILIES = {"les": les, "ces": ces, "aids": lambda n: shares(n, False), "quaids": lambda n: shares(n, True), "qes": qes}


def ours(program, model):
    command = [program, "vet", model, "--only", "homogeneity,adding-up,symmetry", "--timings"]
    child = subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True)
    out, err = child.communicate()
    if any(len(re.findall(rf"^{c}\s+proven", out, re.M)) != 1 for c in ("homogeneity", "adding-up", "symmetry")):
        sys.exit(f"not proven: {model}\n{out}{err}")
    parts = dict(re.findall(r": ([\w-]+): ([\d.]+) ms", err))
    return sum(float(parts[k]) for k in ("read", "homogeneity", "adding-up", "symmetry")) / 1000


def other(command, family, n):
    words = shlex.split(command.format(family=family, n=n))
    row = json.loads(subprocess.run(words, capture_output=True, text=True, check=True).stdout.splitlines()[-1])
    return row["build_s"] + row["prove_s"]


def main():
    options = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    options.add_argument("--program", default="target/release/mainspring")
    options.add_argument("--other")
    options.add_argument("--rounds", type=int, default=5)
    options.add_argument("--families", default="les,ces,aids,quaids")
    options.add_argument("--sizes", default="3,10,64")
    chosen = options.parse_args()
    print(f"{'family':8} {'n':>3} {'ours ms':>10} {'other ms':>10} {'ours/other':>10} {'peak MiB':>9}")
    with tempfile.TemporaryDirectory() as folder:
        for family in chosen.families.split(","):
            for n in map(int, chosen.sizes.split(",")):
                model = os.path.join(folder, f"{family}{n}.demand")
                with open(model, "w") as file:
                    file.write(FAMILIES[family](n))
                mine, theirs = [], []
                for _ in range(chosen.rounds):
                    mine.append(ours(chosen.program, model))
                    if chosen.other:
                        theirs.append(other(chosen.other, family, n))
                peak = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss / 1024
                a, b = statistics.median(mine), statistics.median(theirs) if theirs else None
                tail = f"{b * 1000:10.2f} {a / b:10.2f}" if b else f"{'-':>10} {'-':>10}"
                print(f"{family:8} {n:3} {a * 1000:10.2f} {tail} {peak:9.0f}", flush=True)


if __name__ == "__main__":
    main()
