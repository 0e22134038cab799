"""Reads what the peers printed and writes the tables of it."""

import math
import statistics
import sys
from dataclasses import dataclass

DISTURBED = 1.5  # highest over lowest of one measurement that makes a table unfit to cite


@dataclass
class Run:
    setup: float  # seconds
    solve: float  # seconds
    iterations: int
    fill: float  # entries of the factors over those of the matrix
    residual: float  # true, relative to b
    peak: float = math.nan  # kilobytes of the process, where watched
    whole: float = math.nan  # seconds of the process, where watched

    @property
    def total(self):
        return self.setup + self.solve

    @property
    def step(self):
        return self.solve / self.iterations


def read(path):
    """The runs of each label, in the order in which they were made."""
    runs = {}
    for line in open(path):
        label, setup, solve, iterations, *rest = line.split()
        run = Run(float(setup), float(solve), int(iterations), *map(float, rest))
        runs.setdefault(label, []).append(run)
    return runs


def values(runs, what):
    return [getattr(run, what) for run in runs]


def median(runs, what):
    return statistics.median(values(runs, what))


def span(runs, what, unit=1.0):
    """Lowest and highest."""
    v = values(runs, what)
    return f"{min(v) / unit:.4g} to {max(v) / unit:.4g}"


def ratio(ours, theirs, what):
    """Ours over theirs, of medians."""
    return median(ours, what) / median(theirs, what)


def same(runs, what):
    """The one value that all runs of a label must share."""
    v = set(values(runs, what))
    if len(v) != 1:
        sys.exit(f"runs of one peer differ in {what}: {sorted(v)}")
    return v.pop()


def solved(runs, limit=1.05e-8):
    """Ends where a run is not solved. The limit is a little over the tolerance:
    the peers stop by a residual of their own, dwindle by the true one."""
    for label, of in runs.items():
        if not all(r <= limit for r in values(of, "residual")):
            sys.exit(f"{label} is not solved: residuals {values(of, 'residual')}")


def warn(runs, *what):
    """Says so where the machine was disturbed."""
    for of in runs.values():
        for name in what:
            v = values(of, name)
            if max(v) > DISTURBED * min(v):
                print(f"\nThe machine was disturbed (highest over {DISTURBED:g} times lowest): repeat before citing this.")
                return
