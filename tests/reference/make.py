"""Writes the reference tables of the `distribution` module, one CSV per function.

    python -m venv /tmp/venv && /tmp/venv/bin/pip install -r requirements.txt
    /tmp/venv/bin/python make.py [FUNCTION ...]

How the truths are made (`truth.py`, `discrete.py`):

- Tails and quantiles of the classical distributions: Arb balls (python-flint) of
  relative radius below 1e-25, the precision raised until they are. Series of
  positive terms with a rigorous bound on what is left out; no continued fraction, no
  saddle-point prefactor. A quantile is verified by a change of sign 1e-23 to either
  side.
- Fisher up to a total of 5000, McNemar up to 10,000 pairs, Mann-Whitney: whole
  numbers.
- Noncentral t: acb.integral, radius below 1e-22; the tails, integrated apart, must
  add up to 1 within 1e-21.
- Studentized range: k = 2 from Student's t; other k by nested trapezoidal sums at 30
  digits with two pairs of steps, the same method as the Rust module and not
  rigorous, hence the rows from scipy's own mpmath values beside them.
- Wilson: mpmath, the closed form.

A sample of the rows of normal, student, f, chi_squared, gamma, beta, binomial,
poisson and hypergeometric is recomputed by another route (mpmath's own
hypergeometric code, or direct sums) and must agree to 1e-15; of noncentral_student
by mpmath quadrature to 1e-14; of fisher_exact by scipy to 1e-10. The normal
quantile is made with mpmath and inverted in Arb. The other tables have no second
route here.

Inputs are the doubles nearest to the printed decimals, and a truth is the value at
that double. `tests/distribution.rs` reads the tables only; it never runs this.
"""

import math
import sys
from fractions import Fraction

import mpmath
import scipy.stats
from flint import arb

import discrete
from truth import (ARB, CHECKED, agree, at_precision, beta_log_odds, beta_tails, f_tails, gamma_log_quantile, gamma_tails,
                   mp, normal_tails, rounded, student_tails, tolerance, write)


# ---------------------------------------------------------------- grids

UPPERS = ["0.9999999999", "0.999", "0.9", "0.5", "0.1", "0.05", "0.01", "0.001", "1e-05", "1e-10", "1e-15",
          "1e-22", "1e-30", "1e-60", "1e-100", "1e-200", "1e-300"]
LOWERS = ["1e-06", "1e-12", "1e-20", "1e-30", "1e-100", "1e-300"]
DFS = [1, 2, 3, 4.5, 7, 17.776474, 30, 100, 1000, 12345.6, 100000, 1000000]
PAIRS = [(1, 1), (1, 10), (1, 1000000), (2, 27), (3, 3), (4, 50734), (7, 189), (2.5, 8.25), (10, 2), (30, 30),
         (100, 1000), (1000, 100), (999, 1), (1000000, 1), (12345, 67890), (100000, 100000), (1000000, 1000),
         (1000000, 1000000)]
SHAPES = [(0.5, 0.5), (0.5, 500000), (1, 1), (1, 30), (2, 3), (13, 4), (14, 3), (82, 182), (5, 100000),
          (100000, 5), (1000, 1000), (123.5, 4567.25), (200000, 800000), (500000, 500000), (1000000, 1000000)]


def quantile_targets():
    for text in UPPERS:
        yield text, True
    for text in LOWERS:
        yield text, False


# One guard for every grid built from approximate quantiles: digits enough to
# tell neighbouring points apart where the spread is a thousandth of the mean.
def digits_for(size):
    return 6 if size < 1000 else 9


def point(compute):
    """An approximate quantile from scipy, or nothing where it fails."""
    try:
        value = float(compute())
    except (ValueError, OverflowError, FloatingPointError):
        return None
    return value if math.isfinite(value) and value != 0 else None


# ---------------------------------------------------------------- tables

def table_normal():
    rows = []
    for z in [0.0, 1e-10, 0.001, 0.1, 0.5, 1.0, 1.5, 1.6448536, 1.96, 1.959963984540054, 2.5, 3.0, 4.0, 5.0, 6.5,
              8.0, 9.5, 11.4, 14.0, 18.3, 21.27, 25.0, 30.1, 33.3, 36.0, 37.0471]:
        for sign in (1, -1):
            value = sign * z
            lower, upper = at_precision(lambda: normal_tails(arb(value)))
            agree("normal", value, upper, mpmath.ncdf(-mpmath.mpf(value)))
            rows.append(((value,), (lower, upper), 1e-15 * 4, ARB))
    write("normal", ["z", "lower", "upper"], rows, "standard normal tails")


def table_normal_quantile():
    rows = []
    for text in UPPERS + ["0.025", "0.975", "0.005", "0.2", "0.25", "1e-250", "0.4999", "0.50001"]:
        p = float(text)
        mpmath.mp.dps = 400
        z = mpmath.sqrt(2) * mpmath.erfinv(1 - 2 * mpmath.mpf(p)) if p > 1e-290 else None
        if z is None:
            z = mpmath.findroot(lambda v: mpmath.log(mpmath.erfc(v / mpmath.sqrt(2)) / 2) - mpmath.log(mpmath.mpf(p)),
                                37.0)
        mpmath.mp.dps = 45
        z = +z
        check = at_precision(lambda: [normal_tails(arb(mpmath.nstr(z, 42)))[1]])[0]
        if p != 0.5:
            agree("normal_quantile", p, check, mpmath.mpf(p), 1e-20)
        rows.append(((p,), (z,), 1e-14, "mpmath; inverted in Arb"))
    write("normal_quantile", ["upper", "z"], rows, "z with the upper tail given")


def table_student():
    rows = []
    for df in DFS:
        seen = set()
        for text in UPPERS:
            t = point(lambda: scipy.stats.t.isf(float(text), df))
            if t is None or abs(t) > 1e300:
                # The Cauchy-like tail t ~ p^(−1/df), where scipy gives up.
                t = float(text) ** (-1 / df) if df < 100 else None
            if t is None or not math.isfinite(t):
                continue
            t = rounded(t, digits_for(df))
            if t in seen:
                continue
            seen.add(t)
            lower, upper = at_precision(lambda: student_tails(t, df))
            if len(seen) % 3 == 0 and df < 2000 and mp(upper) > mpmath.mpf("1e-60"):
                mpmath.mp.dps = 30
                x = mpmath.mpf(df) / (mpmath.mpf(df) + mpmath.mpf(t) ** 2)
                half = mpmath.betainc(mpmath.mpf(df) / 2, 0.5, 0, x, regularized=True) / 2
                agree("student", (t, df), upper if t > 0 else lower, half)
            rows.append(((t, float(df)), (lower, upper), tolerance((lower, upper), 1e-12, 1e-11), ARB))
    for t, df in [(-1.860813, 17.776474), (-4.062128, 9.0), (1.915268, 55.309433), (0.9051358093, 22.0), (0.0, 5.0),
                  (1e-08, 12.0), (1e30, 1.0), (-12.62059, 326.0), (12.946, 136.87)]:
        lower, upper = at_precision(lambda: student_tails(t, df))
        rows.append(((t, df), (lower, upper), 1e-12, ARB))
    write("student", ["t", "df", "lower", "upper"], rows, "Student t tails")


def table_f():
    rows = []
    for df1, df2 in PAIRS:
        seen = set()
        for text, upper_side in quantile_targets():
            p = float(text)
            x = point(lambda: scipy.stats.f.isf(p, df1, df2) if upper_side else scipy.stats.f.ppf(p, df1, df2))
            if x is None:
                continue
            x = rounded(x, digits_for(max(df1, df2)))
            if x in seen or x <= 0:
                continue
            seen.add(x)
            lower, upper = at_precision(lambda: f_tails(x, df1, df2))
            if min(mp(lower), mp(upper)) < mpmath.mpf("1e-305"):
                continue
            if len(seen) % 3 == 0 and max(df1, df2) < 2000 and mp(upper) > mpmath.mpf("1e-60"):
                mpmath.mp.dps = 40
                y = mpmath.mpf(df2) / (mpmath.mpf(df2) + mpmath.mpf(df1) * mpmath.mpf(x))
                agree("f", (x, df1, df2), upper,
                      mpmath.betainc(mpmath.mpf(df2) / 2, mpmath.mpf(df1) / 2, 0, y, regularized=True))
            rows.append(((x, float(df1), float(df2)), (lower, upper), tolerance((lower, upper), 1e-12, 1e-11), ARB))
    write("f", ["x", "df1", "df2", "lower", "upper"], rows, "F tails")


def table_chi_squared():
    rows = []
    for df in DFS:
        seen = set()
        for text, upper_side in quantile_targets():
            p = float(text)
            x = point(lambda: scipy.stats.chi2.isf(p, df) if upper_side else scipy.stats.chi2.ppf(p, df))
            if x is None:
                continue
            x = rounded(x, digits_for(df))
            if x in seen or x <= 0:
                continue
            seen.add(x)
            lower, upper = at_precision(lambda: gamma_tails(arb(x) / 2, arb(df) / 2))
            if min(mp(lower), mp(upper)) < mpmath.mpf("1e-305"):
                continue
            if len(seen) % 3 == 0 and df < 2000:
                mpmath.mp.dps = 30
                agree("chi_squared", (x, df), upper,
                      mpmath.gammainc(mpmath.mpf(df) / 2, mpmath.mpf(x) / 2, mpmath.inf, regularized=True))
            rows.append(((x, float(df)), (lower, upper), tolerance((lower, upper), 1e-12, 1e-11), ARB))
    write("chi_squared", ["x", "df", "lower", "upper"], rows, "chi-squared tails")


def table_gamma():
    rows = []
    for a in [0.05, 0.5, 1.0, 3.7, 25.0, 400.5, 54321.0, 1000000.0]:
        seen = set()
        for text, upper_side in quantile_targets():
            p = float(text)
            x = point(lambda: scipy.stats.gamma.isf(p, a) if upper_side else scipy.stats.gamma.ppf(p, a))
            if x is None or x < 1e-280:
                continue
            x = rounded(x, digits_for(a))
            if x in seen or x <= 0:
                continue
            seen.add(x)
            lower, upper = at_precision(lambda: gamma_tails(arb(x), arb(a)))
            if min(mp(lower), mp(upper)) < mpmath.mpf("1e-305"):
                continue
            if len(seen) % 3 == 0 and a < 1000:
                mpmath.mp.dps = 30
                agree("gamma", (x, a), upper,
                      mpmath.gammainc(mpmath.mpf(a), mpmath.mpf(x), mpmath.inf, regularized=True))
            rows.append(((x, a), (lower, upper), tolerance((lower, upper), 1e-12, 1e-11), ARB))
    write("gamma", ["x", "a", "lower", "upper"], rows, "regularised incomplete gamma function")


def table_beta():
    """The pair (x, y): x is the double given, y = 1 − x rounded, exact to 1e-16; the truth takes y = 1 − x
    where x ≤ 1/2 and x = 1 − y where y < 1/2, the smaller one being the exact one."""
    rows = []
    for a, b in SHAPES:
        seen = set()
        for text, upper_side in quantile_targets():
            p = float(text)
            x = point(lambda: scipy.stats.beta.isf(p, a, b) if upper_side else scipy.stats.beta.ppf(p, a, b))
            y = point(lambda: scipy.stats.beta.ppf(p, b, a) if upper_side else scipy.stats.beta.isf(p, b, a))
            if x is None or y is None or min(x, y) < 1e-300:
                continue
            if x <= 0.5:
                x = rounded(x, digits_for(a + b))
                y = 1 - x
            else:
                y = rounded(y, digits_for(a + b))
                x = 1 - y
            if (x, y) in seen:
                continue
            seen.add((x, y))

            def compute():
                X = arb(x) if x <= 0.5 else 1 - arb(y)
                return beta_tails(X, 1 - X if x <= 0.5 else arb(y), arb(a), arb(b))

            lower, upper = at_precision(compute)
            if min(mp(lower), mp(upper)) < mpmath.mpf("1e-305"):
                continue
            if len(seen) % 3 == 0 and a + b < 3000 and mp(lower) > mpmath.mpf("1e-60"):
                mpmath.mp.dps = 40
                X = mpmath.mpf(x) if x <= 0.5 else 1 - mpmath.mpf(y)
                agree("beta", (x, a, b), lower, mpmath.betainc(a, b, 0, X, regularized=True))
            rows.append(((x, y, float(a), float(b)), (lower, upper), tolerance((lower, upper), 2e-12, 1e-11), ARB))
    write("beta", ["x", "y", "a", "b", "lower", "upper"], rows, "regularised incomplete beta function")


def table_student_quantile():
    rows = []
    for df in DFS:
        for text in [u for u in UPPERS if u != "0.5"] + ["0.4999", "0.025", "0.975"]:
            p = float(text)
            small = Fraction(p) if p < 0.5 else 1 - Fraction(p)
            exact = mpmath.mpf(2 * small.numerator) / small.denominator
            if math.log10(float(small)) / df < -300:
                continue
            mpmath.mp.dps = 60
            exact = mpmath.mpf(2 * small.numerator) / small.denominator
            if exact < 0.5:
                w = beta_log_odds(0.5, df / 2, exact, True)
            else:
                w = beta_log_odds(0.5, df / 2, 1 - exact, False)
            t = mpmath.exp(w / 2) * mpmath.sqrt(mpmath.mpf(df))
            rows.append(((p, float(df)), (t if p < 0.5 else -t,), 1e-12, ARB))
    write("student_quantile", ["upper", "df", "t"], rows, "t with the upper tail given")


def exact_tail(text, upper_side):
    """The smaller of the two tails that the double `upper` stands for: (mpf, is it the upper)."""
    mpmath.mp.dps = 60
    p = Fraction(float(text))
    if not upper_side:
        p = 1 - p
    small = min(p, 1 - p)
    return mpmath.mpf(small.numerator) / small.denominator, p <= Fraction(1, 2)


QUANTILE_UPPERS = UPPERS + ["0.025", "0.975", "0.99", "0.0001"]


def table_f_quantile():
    rows = []
    for df1, df2 in PAIRS:
        for text in QUANTILE_UPPERS:
            wanted, upper = exact_tail(text, True)
            if math.log10(float(wanted)) * -2 / df2 > 290:
                continue
            w = beta_log_odds(df1 / 2, df2 / 2, wanted, upper)
            x = mpmath.exp(w) * mpmath.mpf(df2) / mpmath.mpf(df1)
            rows.append(((float(text), float(df1), float(df2)), (x,), 1e-12, ARB))
    write("f_quantile", ["upper", "df1", "df2", "x"], rows, "F with the upper tail given")


def table_chi_squared_quantile():
    rows = []
    for df in DFS:
        for text in QUANTILE_UPPERS:
            wanted, upper = exact_tail(text, True)
            x = 2 * mpmath.exp(gamma_log_quantile(df / 2, wanted, upper))
            rows.append(((float(text), float(df)), (x,), 1e-12, ARB))
    write("chi_squared_quantile", ["upper", "df", "x"], rows, "chi-squared with the upper tail given")


def table_beta_quantile():
    rows = []
    for a, b in SHAPES:
        for text in QUANTILE_UPPERS:
            wanted, lower = exact_tail(text, True)
            if math.log10(float(wanted)) / (a if lower else b) < -290:
                continue
            w = beta_log_odds(a, b, wanted, not lower)
            x = 1 / (1 + mpmath.exp(-w))
            rows.append(((float(text), float(a), float(b)), (x,), 1e-12, ARB))
    write("beta_quantile", ["lower", "a", "b", "x"], rows, "x with the lower tail given")


if __name__ == "__main__":
    tables = {name[6:]: fn for part in (globals(), vars(discrete)) for name, fn in part.items()
              if name.startswith("table_")}
    for wanted in sys.argv[1:] or tables:
        tables[wanted]()
    print(f"{CHECKED['rows']} rows, {CHECKED['cross']} cross-checks with mpmath")
