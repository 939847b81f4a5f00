"""Prints code quantities by the library structuralcodes (fib) as CSV, for the test that compares them with ours.

Written for structuralcodes 0.7.2, which needs Python 3.10 or later. Values of the UK National Annex are passed in by hand.
"""

import csv
import sys

import structuralcodes
from structuralcodes.codes import ec2_2004

GAMMA_C, GAMMA_S, ALPHA_CT = 1.5, 1.15, 1.0


def main() -> None:
    out = csv.writer(sys.stdout, lineterminator="\n")
    out.writerow(["quantity", "input", "value"])
    out.writerow(["version", "", structuralcodes.__version__])
    for half in range(40, 101):
        fck = half / 2.0
        fctm = ec2_2004.fctm(fck)
        fctk = ec2_2004.fctk_5(fctm)
        fctd = ec2_2004.fctd(fctk, ALPHA_CT, GAMMA_C)
        for name, value in (("fctm", fctm), ("fctk_5", fctk), ("fctd", fctd)):
            out.writerow([name, fck, repr(float(value))])
    for fyk in (400.0, 450.0, 500.0, 550.0, 600.0):
        out.writerow(["fyd", fyk, repr(float(ec2_2004.fyd(fyk, GAMMA_S)))])


if __name__ == "__main__":
    main()
