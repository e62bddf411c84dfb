"""SU(2) Clebsch-Gordan coefficients and 6j symbols against SymPy, value by value as signed squares."""
import json
import sys

from sympy import Rational
from sympy.physics.wigner import clebsch_gordan, wigner_6j


def signed_square(value):
    square = value**2
    return -square if value < 0 else square


def expected(line):
    if "sixJ" in line:
        return wigner_6j(*[Rational(n, 2) for n in line["sixJ"]])
    j1, m1, j2, m2, j, m = [Rational(n, 2) for n in line["clebschGordan"]]
    return clebsch_gordan(j1, j2, j, m1, m2, m)


passed = failed = 0
for kind in ("clebschGordan", "sixJ"):
    lines = [line for line in map(json.loads, open(sys.argv[1])) if kind in line]
    wrong = [line for line in lines if signed_square(expected(line)) != Rational(line["square"])]
    if lines and not wrong:
        passed += 1
        print(f"ok  {len(lines)} values of {kind}")
    else:
        failed += 1
        print(f"FAILED  {kind}: {len(wrong)} of {len(lines)} differ, first {wrong[:1]}")
print(f"{passed} passed, {failed} failed")
sys.exit(1 if failed else 0)
