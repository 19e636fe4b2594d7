"""What every recording script shares: inputs that come again, and one JSON object on stdout."""

import json
import platform
import random
import sys


def draws(seed):
    """Python's Mersenne Twister, whose random() is the same in every version."""
    return random.Random(seed)


def rounded(value, digits=6):
    """A number as a table would hold it, so that the last bit of a machine's logarithm does not change the input."""
    return float(f"{value:.{digits}g}")


def normal(source):
    """Nearly standard normal: twelve uniforms less six, added one by one, since versions of Python differ in what sum() rounds."""
    total = -6.0
    for _ in range(12):
        total += source.random()
    return total


def record(about, sources, remade, cases):
    """
    Prints what is to be kept.

    remade: relative and absolute difference within which another machine, or another version of the packages, makes the
    same numbers again, and why it is not smaller.
    """
    packages = {name: module.__version__ for name, module in sys.modules.items() if name in ("numpy", "scipy", "mpmath", "uncertainties")}
    head = {"about": about, "sources": sources, "with": {"python": platform.python_version(), **packages}, "remade": remade}
    lines = [f"{json.dumps(key)}: {json.dumps(value, ensure_ascii=False)}" for key, value in head.items()]
    body = ",\n  ".join(json.dumps(case, ensure_ascii=False) for case in cases)
    sys.stdout.write("{\n " + ",\n ".join(lines) + ',\n "cases": [\n  ' + body + "\n ]\n}\n")
