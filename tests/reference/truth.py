"""What the tables share: precision, writing, cross-checks, and the truths of the continuous functions."""

import datetime
import math
import os
import sys
from fractions import Fraction

import flint
import mpmath
import numpy
import scipy
import scipy.stats
import statsmodels
from flint import arb, ctx

HERE = os.path.dirname(os.path.abspath(__file__))
ARB = "Arb via python-flint"
CHECKED = {"rows": 0, "cross": 0}


# ---------------------------------------------------------------- plumbing

def at_precision(compute, digits=60):
    """Values of `compute()` with relative radius < 1e-25, raising the precision."""
    while True:
        ctx.dps = digits
        values = compute()
        worst = max((relative_radius(v) for v in values), default=0.0)
        if worst < 1e-25:
            return values
        digits = digits * 2
        if digits > 8000:
            raise ValueError("precision does not suffice")


def relative_radius(value):
    if value.rad() == 0:
        return 0.0
    middle = abs(value.mid())
    if middle == 0:
        return math.inf
    ratio = value.rad() / middle
    return float(ratio.upper()) if ratio.upper() < 1 else math.inf


def twenty(value):
    """A ball, fraction or mpf as 20 significant digits."""
    if isinstance(value, Fraction):
        ctx.dps = 60
        value = arb(value.numerator) / arb(value.denominator)
    if isinstance(value, arb):
        ctx_digits = ctx.dps
        ctx.dps = max(60, ctx_digits)
        text = value.mid().str(40, radius=False)
        mpmath.mp.dps = 45
        value = mpmath.mpf(text)
    return mpmath.nstr(value, 20, min_fixed=0, max_fixed=0, strip_zeros=True)


def mp(value):
    return mpmath.mpf(value.mid().str(40, radius=False))


def agree(name, row, truth, other, within=1e-15):
    """The cross-check: stops the script where two routes part."""
    truth, other = mp(truth) if isinstance(truth, arb) else mpmath.mpf(truth), mpmath.mpf(other)
    CHECKED["cross"] += 1
    if abs(truth - other) > within * abs(truth):
        raise SystemExit(f"{name} {row}: {mpmath.nstr(truth, 25)} against {mpmath.nstr(other, 25)}")


def shortest(value):
    return repr(value) if isinstance(value, float) else str(value)


def rounded(x, digits=7):
    return float(f"{x:.{digits}g}")


def write(name, columns, rows, note):
    """`rows`: (inputs, truths, tolerance, source)."""
    path = os.path.join(HERE, name + ".csv")
    with open(path, "w", newline="\n") as out:
        out.write(f"# {name}: {note}\n")
        out.write("# script: tests/reference/make.py, which says how each truth is made; 20 significant digits\n")
        out.write(f"# date: {datetime.date.today().isoformat()}\n")
        out.write(
            f"# python {sys.version.split()[0]}, python-flint {flint.__version__}, mpmath {mpmath.__version__}, "
            f"numpy {numpy.__version__}, scipy {scipy.__version__}, statsmodels {statsmodels.__version__}\n"
        )
        out.write(",".join(columns + ["tolerance", "source"]) + "\n")
        for inputs, truths, tolerance, source in rows:
            cells = [shortest(v) for v in inputs]
            cells += [t if isinstance(t, str) else twenty(t) for t in truths]
            out.write(",".join(cells + [f"{tolerance:.0e}", source]) + "\n")
    CHECKED["rows"] += len(rows)
    print(f"{name}: {len(rows)} rows, {os.path.getsize(path)} bytes", flush=True)


def tolerance(truths, near, far):
    """`near` where every tail is above 1e-30, else `far`."""
    return near if all(mp(t) >= mpmath.mpf("1e-30") for t in truths if isinstance(t, arb)) else far


# ---------------------------------------------------------------- truths

def terms_needed(log_product, digits):
    n = 1
    while log_product(n) > -2.31 * digits:
        n *= 2
        if n > 1 << 31:
            return math.inf
    return n


def beta_series(x, y, a, b):
    """I_x(a, b) = x^a y^b / (a B(a, b)) · Σ (a+b)_n x^n / (a+1)_n, all terms positive."""
    small = arb(10) ** (-ctx.dps)
    term, total, n = arb(1), arb(1), 0
    while True:
        ratio = x * (a + b + n) / (a + 1 + n)
        bound = ratio if ratio > x else x
        if n % 8 == 0 and bound < 1:
            rest = term * bound / (1 - bound)
            if rest < small * total:
                total += arb(0, rest.upper())
                break
        term *= ratio
        total += term
        n += 1
    log = a * x.log() + b * y.log() + (a + b).lgamma() - a.lgamma() - b.lgamma()
    return log.exp() / a * total


def beta_tails(x, y, a, b):
    """Both tails at the context's precision, summed on the side with fewer terms."""
    if x == 0:
        return arb(0), arb(1)
    fa, fb = float(a.mid()), float(b.mid())

    def product(p, q, z):
        # The logarithm in balls: z itself may lie below the smallest double.
        log_z = float(z.log().mid())
        return lambda n: (
            n * log_z + math.lgamma(p + q + n) - math.lgamma(p + q) - math.lgamma(p + 1 + n) + math.lgamma(p + 1)
        )

    if terms_needed(product(fa, fb, x), ctx.dps) <= terms_needed(product(fb, fa, y), ctx.dps):
        lower = beta_series(x, y, a, b)
        return lower, 1 - lower
    upper = beta_series(y, x, b, a)
    return 1 - upper, upper


def gamma_tails(x, a):
    small = arb(10) ** (-ctx.dps)
    term, total, at = arb(1), arb(1), a
    n = 0
    while True:
        at += 1
        ratio = x / at
        if n % 8 == 0 and ratio < 1:
            rest = term * ratio / (1 - ratio)
            if rest < small * total:
                total += arb(0, rest.upper())
                break
        term *= ratio
        total += term
        n += 1
    lower = (a * x.log() - x - (a + 1).lgamma()).exp() * total
    return lower, 1 - lower


def normal_tails(z):
    root = arb(2).sqrt()
    return (-z / root).erfc() / 2, (z / root).erfc() / 2


def odds_pair(odds):
    return odds / (1 + odds), 1 / (1 + odds)


def student_tails(t, df):
    x, y = odds_pair(arb(t) ** 2 / arb(df))
    half = beta_tails(x, y, arb("0.5"), arb(df) / 2)[1] / 2
    return (1 - half, half) if t >= 0 else (half, 1 - half)


def f_tails(value, df1, df2):
    x, y = odds_pair(arb(value) * arb(df1) / arb(df2))
    return beta_tails(x, y, arb(df1) / 2, arb(df2) / 2)


def solve(tails, density, start, wanted, upper):
    """Root in w of ln tail(w) = ln wanted, verified by a sign change 1e-23 to either side."""
    mpmath.mp.dps = 60
    digits, w, low, high, reach = 30, mpmath.mpf(start), None, None, mpmath.mpf(1)

    def value(w):
        # The working precision covers the tail that is the complement of a sum.
        d = digits + int(-min(0, mpmath.log10(wanted))) + 10
        ctx.dps = d
        tail = tails(arb(str(w)))[1 if upper else 0]
        if not tail > 0:
            ctx.dps = 3 * d
            tail = tails(arb(str(w)))[1 if upper else 0]
        if not tail > 0:
            return None, None
        slope = density(arb(str(w))) / tail * (-1 if upper else 1)
        return mp(tail.log() - arb(str(wanted)).log()), mp(slope)

    for _ in range(300):
        g, slope = value(w)
        if g is None:
            g, slope = mpmath.mpf(-1e9), mpmath.mpf(0)
        if (g < 0) == (not upper):
            low = w if low is None else max(low, w)
        else:
            high = w if high is None else min(high, w)
        step = -g / slope if slope != 0 else (-mpmath.inf if upper else mpmath.inf)
        if abs(step) <= mpmath.mpf(10) ** -26 * max(abs(w), 1):
            w += step
            if digits == 45:
                for side in (-1, 1):
                    g, _ = value(w + side * mpmath.mpf(10) ** -23 * max(abs(w), 1))
                    if (g < 0) != ((side < 0) == (not upper)):
                        raise ValueError("no sign change")
                return w
            digits = 45
            continue
        if abs(step) > reach:
            step = reach if step > 0 else -reach
            reach *= 2
        new = w + step
        if low is not None and high is not None and not (low < new < high):
            new = (low + high) / 2
        w = new
    raise ValueError("root not found")


def beta_log_odds(a, b, wanted, upper):
    """ln(x/y) at which the tail is `wanted`, both exact (strings or numbers)."""

    def pair(w):
        e = w.exp()
        return e / (1 + e), 1 / (1 + e)

    def density(w):
        x, y = pair(w)
        A, B = arb(a), arb(b)
        return (A * x.log() + B * y.log() + (A + B).lgamma() - A.lgamma() - B.lgamma()).exp()

    z = scipy.stats.norm.isf(float(wanted)) if float(wanted) > 0 else 38.0
    start = math.log(a / b) + (z if upper else -z) * math.sqrt(1 / a + 1 / b)
    # In the far tail of a small parameter the log tail is linear in w.
    if upper and b < 5 and float(wanted) < 1e-3:
        start = max(start, -math.log(float(wanted)) / b * 0.5)
    if not upper and a < 5 and float(wanted) < 1e-3:
        start = min(start, math.log(float(wanted)) / a * 0.5)
    # scipy's F quantile, where it has one, is nearer still.
    near = (scipy.stats.f.isf if upper else scipy.stats.f.ppf)(float(wanted), 2 * a, 2 * b)
    if math.isfinite(near) and near > 0:
        start = math.log(near) + math.log(a / b)
    return solve(lambda w: beta_tails(*pair(w), arb(a), arb(b)), density, start, wanted, upper)


def gamma_log_quantile(a, wanted, upper):
    def density(w):
        A = arb(a)
        return (A * w - w.exp() - A.lgamma()).exp()

    z = scipy.stats.norm.isf(float(wanted))
    root = 1 - 1 / (9 * a) + (z if upper else -z) / math.sqrt(9 * a)
    start = math.log(a) + 3 * math.log(root) if root > 0.1 else (math.log(float(wanted)) + math.lgamma(a + 1)) / a
    return solve(lambda w: gamma_tails(w.exp(), arb(a)), density, start, wanted, upper)
