#!/usr/bin/env python3
"""Makes worst-case.json: choices of one option per line with linear worst-case
demands, and their optima by an integer-programming solver.

    apt-get install coinor-cbc glpk-utils
    python3 make.py > worst-case.json

All figures are whole numbers, so that sums are exact in the solvers, here and
in Go. Each instance is

    least    sum of costs
    so that  low <= sum of (mean - half),  sum of (mean + half) <= high   for each demand
             one option in each line

and an option is [cost, mean, half, mean, half, ...], a pair for each demand.
CBC's optimum is recorded; small instances are solved by GLPK as well, and the
choices of both are added up again here.
"""
import json
import math
import os
import random
import re
import subprocess
import sys
import tempfile

# lines, options, demands, how tight (below 1: half widths must come down),
# and whether GLPK is asked too.
SHAPES = [
    (12, 10, 1, 0.7, True), (12, 10, 1, 1.0, True), (12, 10, 1, 1.6, True),
    (12, 10, 2, 0.7, True), (12, 10, 2, 1.0, True), (12, 10, 2, 1.6, True),
    (12, 10, 3, 0.7, True), (12, 10, 3, 1.0, True), (12, 10, 3, 1.6, True),
    (12, 10, 3, 0.25, True), (16, 6, 3, 0.9, True), (8, 30, 2, 0.8, True),
    (20, 40, 1, 0.5, False), (20, 40, 1, 1.0, False), (20, 40, 1, 2.0, False),
    (20, 40, 2, 0.5, False), (20, 40, 2, 1.0, False), (20, 40, 2, 2.0, False),
    (20, 40, 3, 0.5, False), (20, 40, 3, 0.8, False), (20, 40, 3, 1.0, False),
    (20, 40, 3, 1.3, False), (20, 40, 3, 2.0, False), (30, 20, 2, 1.0, False),
    (30, 20, 3, 1.0, False), (40, 10, 2, 0.8, False), (40, 10, 3, 1.2, False),
    (12, 10, 2, 0.03, True), (20, 40, 3, 0.03, False),
]


def instance(seed, lines, options, demands, tight):
    """Grades from wide and cheap to narrow and dear, each with a shift of its mean."""
    r = random.Random(seed)
    out = []
    for _ in range(lines):
        weights = [r.gauss(0, 1) for _ in range(demands)]
        price = 5 + 35 * r.random()
        line = []
        for j in range(options):
            spread = math.exp(-3 * j / (options - 1) * (0.8 + 0.4 * r.random()))
            option = [int(price * spread ** -0.7) + r.randrange(3)]
            shift = 0.3 * spread * r.gauss(0, 1)
            for w in weights:
                option += [round(1000 * shift * w), round(1000 * spread * abs(w))]
            line.append(option)
        out.append(line)
    limits = []
    for q in range(demands):
        mean = sum(line[options // 2][1 + 2 * q] for line in out)
        half = int(tight * sum(line[options // 2][2 + 2 * q] for line in out))
        limits.append([mean - half, mean + half])
    return out, limits


def write(path, lines, limits):
    """The instance in the LP format that both solvers read."""
    def total(figure):
        return " ".join(f"{figure(o):+d} x{i}_{j}" for i, l in enumerate(lines) for j, o in enumerate(l))
    with open(path, "w") as f:
        f.write("Minimize\n cost: " + total(lambda o: o[0]) + "\nSubject To\n")
        for i, l in enumerate(lines):
            f.write(f" line{i}: " + " + ".join(f"x{i}_{j}" for j in range(len(l))) + " = 1\n")
        for q, (low, high) in enumerate(limits):
            f.write(f" low{q}: " + total(lambda o: o[1 + 2 * q] - o[2 + 2 * q]) + f" >= {low}\n")
            f.write(f" high{q}: " + total(lambda o: o[1 + 2 * q] + o[2 + 2 * q]) + f" <= {high}\n")
        f.write("Binary\n")
        for i, l in enumerate(lines):
            f.write("".join(f" x{i}_{j}\n" for j in range(len(l))))
        f.write("End\n")


def cost(lines, limits, choice):
    """The cost of a choice that a solver found, its demands checked in whole numbers."""
    chosen = [l[choice[i]] for i, l in enumerate(lines)]
    for q, (low, high) in enumerate(limits):
        assert sum(o[1 + 2 * q] - o[2 + 2 * q] for o in chosen) >= low
        assert sum(o[1 + 2 * q] + o[2 + 2 * q] for o in chosen) <= high
    return sum(o[0] for o in chosen)


def cbc(folder, lines, limits):
    solution = os.path.join(folder, "cbc.txt")
    subprocess.run(["cbc", os.path.join(folder, "p.lp"), "ratioGap", "0", "allowableGap", "0",
                    "solve", "solution", solution, "quit"], check=True, stdout=subprocess.DEVNULL)
    text = open(solution).read()
    if text.startswith("Infeasible") or text.startswith("Integer infeasible"):
        return None
    assert text.startswith("Optimal - objective value"), text[:80]
    choice = {int(i): int(j) for i, j, x in re.findall(r"x(\d+)_(\d+)\s+(\S+)", text) if float(x) > 0.5}
    return cost(lines, limits, choice)


def glpk(folder, lines, limits):
    solution = os.path.join(folder, "glpk.txt")
    subprocess.run(["glpsol", "--lp", os.path.join(folder, "p.lp"), "--cuts", "-w", solution],
                   check=True, stdout=subprocess.DEVNULL)
    text = open(solution).read()
    status = re.search(r"^s mip \d+ \d+ (\w)", text, re.M).group(1)
    if status == "n":
        return None
    assert status == "o", status
    lp = open(os.path.join(folder, "p.lp")).read()
    names = list(dict.fromkeys(re.findall(r"x\d+_\d+", lp)))  # columns in the order of their first use
    values = [float(v) for v in re.findall(r"^j \d+ (\S+)", text, re.M)]
    choice = {int(n[1:].split("_")[0]): int(n.split("_")[1]) for n, v in zip(names, values) if v > 0.5}
    return cost(lines, limits, choice)


def version(command, pattern):
    done = subprocess.run(command, capture_output=True, text=True)
    return re.search(pattern, done.stdout + done.stderr).group(1)


def main():
    print("{")
    print(' "made_by": "make.py",')
    solvers = version(["cbc", "quit"], r"Version: (\S+)"), version(["glpsol", "--version"], r"(\d+\.\d+)")
    print(' "solver": "CBC %s; where glpk is true, GLPK %s agrees",' % solvers)
    print(' "instances": [')
    for seed, (lines, options, demands, tight, both) in enumerate(SHAPES):
        made, limits = instance(seed, lines, options, demands, tight)
        with tempfile.TemporaryDirectory() as folder:
            write(os.path.join(folder, "p.lp"), made, limits)
            optimum = cbc(folder, made, limits)
            if both:
                assert glpk(folder, made, limits) == optimum
        print(f"{lines}x{options}, {demands} demands, {tight}: {optimum}", file=sys.stderr, flush=True)
        one = {"name": f"{lines}x{options}, {demands} demands, half widths x {tight}", "glpk": both,
               "optimum": optimum, "limits": limits, "lines": made}
        print("  " + json.dumps(one, separators=(",", ":")) + ("," if seed + 1 < len(SHAPES) else ""))
    print(" ]\n}")


if __name__ == "__main__":
    main()
