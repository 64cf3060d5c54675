"""The tables of the discrete distributions, the exact tests, the intervals and the integrals."""

import json
import math
import os
from fractions import Fraction

import mpmath
import scipy
import scipy.stats
from flint import acb, arb, ctx

from truth import (ARB, agree, at_precision, beta_log_odds, beta_tails, mp, relative_radius, student_tails, tolerance,
                   write)

P_TARGETS = [0.9, 0.5, 0.1, 0.03, 1e-3, 1e-6, 1e-12, 1e-20, 1e-29, 1e-60, 1e-150, 1e-290]


def sum_outward(first, ratio_up, ratio_down, k, least, most):
    """(P(X ≤ k), P(X ≥ k)) in balls: both directions summed from P(X = k) to the end of the support, or until
    what is left is bounded by a geometric series below the precision."""
    small = arb(10) ** (-ctx.dps)

    def side(ratio, step, end):
        total, term, at = first, first, k
        while at != end:
            r = ratio(at)
            if r < 1:
                rest = term * r / (1 - r)
                if rest < small * total:
                    return total + arb(0, rest.upper())
            term *= r
            at += step
            total += term
        return total

    return side(ratio_down, -1, least), side(ratio_up, 1, most)


def quantiles(distribution, least, most):
    """Counts spread over both tails, from scipy (only as places to look at)."""
    found = {least, most}
    for p in P_TARGETS:
        for value in (distribution.ppf(p), distribution.isf(p)):
            if math.isfinite(value):
                found.add(int(min(max(value, least), most)))
    mean, deviation = distribution.mean(), distribution.std()
    for far in (14, 20, 26, 36):
        for sign in (1, -1):
            found.add(int(min(max(round(mean + sign * far * deviation), least), most)))
    return sorted(found)


def keep(truths):
    return all(mp(t) > mpmath.mpf("1e-300") for t in truths)


def table_binomial():
    rows = []
    for n, p in [(1, 0.3), (10, 0.5), (16, 0.05), (100, 0.01), (180, 0.5), (1000, 0.999), (12345, 0.25),
                 (100000, 0.0001), (1000000, 0.5), (1000000, 0.003)]:
        P = arb(p)
        for k in quantiles(scipy.stats.binom(n, p), 0, n):
            def compute():
                log = ((arb(n) + 1).lgamma() - (arb(k) + 1).lgamma() - (arb(n - k) + 1).lgamma()
                       + k * P.log() + (n - k) * (1 - P).log())
                return sum_outward(log.exp(), lambda j: (n - j) * P / ((j + 1) * (1 - P)),
                                   lambda j: j * (1 - P) / ((n - j + 1) * P), k, 0, n)

            truths = at_precision(compute)
            if not keep(truths):
                continue
            if n <= 1000:
                mpmath.mp.dps = 40
                direct = sum(mpmath.binomial(n, j) * mpmath.mpf(p) ** j * (1 - mpmath.mpf(p)) ** (n - j)
                             for j in range(k + 1))
                agree("binomial", (k, n, p), truths[0], direct)
            rows.append(((k, n, p), truths, tolerance(truths, 1e-12, 1e-11), ARB))
    write("binomial", ["k", "n", "p", "lower", "upper"], rows, "P(X <= k) and P(X >= k)")


def table_poisson():
    rows = []
    for mean in [0.001, 0.7, 3.0, 25.5, 400.0, 12345.6, 1000000.0]:
        M = arb(mean)
        for k in quantiles(scipy.stats.poisson(mean), 0, int(mean + 45 * math.sqrt(mean) + 60)):
            def compute():
                log = k * M.log() - M - (arb(k) + 1).lgamma()
                return sum_outward(log.exp(), lambda j: M / (j + 1), lambda j: j / M, k, 0, None)

            truths = at_precision(compute)
            if not keep(truths):
                continue
            if mean < 1000:
                mpmath.mp.dps = 40
                agree("poisson", (k, mean), truths[0], mpmath.gammainc(k + 1, mpmath.mpf(mean), mpmath.inf,
                                                                       regularized=True))
            rows.append(((k, mean), truths, tolerance(truths, 1e-12, 1e-11), ARB))
    write("poisson", ["k", "mean", "lower", "upper"], rows, "P(X <= k) and P(X >= k)")


def log_choose(n, k):
    return (arb(n) + 1).lgamma() - (arb(k) + 1).lgamma() - (arb(n - k) + 1).lgamma()


def hypergeometric_tails(k, population, marked, drawn):
    least, most = max(0, marked + drawn - population), min(marked, drawn)
    log = log_choose(marked, k) + log_choose(population - marked, drawn - k) - log_choose(population, drawn)
    return sum_outward(
        log.exp(),
        lambda j: arb((marked - j) * (drawn - j)) / ((j + 1) * (population - marked - drawn + j + 1)),
        lambda j: arb(j * (population - marked - drawn + j)) / ((marked - j + 1) * (drawn - j + 1)),
        k, least, most)


MARGINS = [(8, 4, 4), (30, 17, 12), (88, 16, 15), (60, 59, 7), (400, 200, 130), (5000, 1755, 2500),
           (100000, 50000, 40000), (100000, 99, 5000), (1000000, 500000, 500000), (1000000, 300000, 1234)]


def table_hypergeometric():
    rows = []
    for population, marked, drawn in MARGINS:
        least, most = max(0, marked + drawn - population), min(marked, drawn)
        for k in quantiles(scipy.stats.hypergeom(population, marked, drawn), least, most):
            truths = at_precision(lambda: hypergeometric_tails(k, population, marked, drawn))
            if not keep(truths):
                continue
            if population <= 400:
                whole = math.comb(population, drawn)
                below = sum(math.comb(marked, j) * math.comb(population - marked, drawn - j)
                            for j in range(least, k + 1))
                mpmath.mp.dps = 40
                agree("hypergeometric", (k, population, marked, drawn), truths[0], mpmath.mpf(below) / whole)
            rows.append(((k, population, marked, drawn), truths, tolerance(truths, 1e-12, 1e-11), ARB))
    write("hypergeometric", ["k", "population", "marked", "drawn", "lower", "upper"], rows,
          "P(X <= k) and P(X >= k)")


def fisher_truth(a, b, c, d):
    """Whole numbers up to a total of 5000, balls beyond; tables within a factor 1 + 1e-7 count as equally probable."""
    population, marked, drawn = a + b + c + d, a + b, a + c
    least, most = max(0, marked + drawn - population), min(marked, drawn)
    if population <= 5000:
        weights = [math.comb(marked, j) * math.comb(population - marked, drawn - j) for j in range(least, most + 1)]
        whole = math.comb(population, drawn)
        own = weights[a - least]
        both = sum(w for w in weights if w * 10**7 <= own * (10**7 + 1))
        return [Fraction(sum(weights[: a - least + 1]), whole), Fraction(sum(weights[a - least:]), whole),
                Fraction(both, whole)]

    def compute():
        lower, upper = hypergeometric_tails(a, population, marked, drawn)

        def log(j):
            return log_choose(marked, j) + log_choose(population - marked, drawn - j) - log_choose(population, drawn)

        limit = log(a) + arb("1.0000001").log()
        # Where the other tail begins: the probabilities fall away from the mode.
        mode = (marked + 1) * (drawn + 1) // (population + 2)
        if a == mode:
            return [lower, upper, arb(1)]
        if a < mode:
            low, high = mode, most + 1
            while low < high:
                middle = (low + high) // 2
                low, high = (low, middle) if log(middle) <= limit else (middle + 1, high)
            other = hypergeometric_tails(low, population, marked, drawn)[1] if low <= most else arb(0)
            return [lower, upper, lower + other]
        low, high = least - 1, mode
        while low < high:
            middle = (low + high + 1) // 2
            low, high = (middle, high) if log(middle) <= limit else (low, middle - 1)
        other = hypergeometric_tails(low, population, marked, drawn)[0] if low >= least else arb(0)
        return [lower, upper, upper + other]

    return at_precision(compute)


def table_fisher_exact():
    rows = []
    tables = [(3, 1, 1, 3), (2, 15, 10, 3), (0, 16, 15, 57), (7, 27, 1, 33), (0, 0, 5, 9), (0, 5, 0, 9), (1, 0, 0, 1),
              (5, 5, 5, 5), (10, 0, 0, 10), (4, 16, 9, 11), (1, 24, 5, 20), (56, 14, 48, 32), (45, 105, 15, 135),
              (120, 380, 160, 340), (557, 1198, 1278, 1493), (30, 174, 21, 184), (1, 999, 9, 991),
              (0, 2500, 7, 2493), (1000, 1500, 1200, 1300)]
    rows = [(t, fisher_truth(*t), 1e-12, "whole numbers") for t in tables]
    for population, marked, drawn in MARGINS:
        least, most = max(0, marked + drawn - population), min(marked, drawn)
        for k in quantiles(scipy.stats.hypergeom(population, marked, drawn), least, most):
            t = (k, marked - k, drawn - k, population - marked - drawn + k)
            truths = fisher_truth(*t)
            if min(float(v) if isinstance(v, Fraction) else float(v.mid()) for v in truths) < 1e-300:
                continue
            if population <= 400:
                mpmath.mp.dps = 40
                p = scipy.stats.fisher_exact([t[:2], t[2:]])[1]
                agree("fisher_exact", t, mpmath.mpf(truths[2].numerator) / truths[2].denominator, p, 1e-10)
            rows.append((t, truths, 1e-12, "whole numbers" if population <= 5000 else ARB))
    write("fisher_exact", ["a", "b", "c", "d", "less", "greater", "two_sided"], rows,
          "Fisher's exact test of a 2x2 table")


def table_mcnemar_exact():
    rows = []
    for b, c in [(0, 0), (1, 0), (3, 3), (6, 16), (16, 6), (121, 59), (150, 86), (0, 40), (10, 25), (480, 520),
                 (3000, 3400), (0, 90), (40, 400), (499000, 501000)]:
        n = b + c
        if n <= 10000:
            tail = Fraction(sum(math.comb(n, j) for j in range(min(b, c) + 1)), 2**n)
            truth = min(Fraction(1), 2 * tail)
        else:
            truth = at_precision(lambda: [2 * beta_tails(arb("0.5"), arb("0.5"), arb(max(b, c)), arb(min(b, c) + 1))[0]])[0]
        rows.append(((b, c), (truth,), 1e-13 if n <= 10000 else 1e-12, "whole numbers" if n <= 10000 else ARB))
    write("mcnemar_exact", ["b", "c", "two_sided"], rows, "McNemar's exact two-sided p")


def table_mann_whitney_exact():
    """Gaussian binomial coefficients in whole numbers, by products and exact quotients of polynomials."""
    rows = []
    for n1, n2 in [(1, 1), (1, 7), (3, 4), (5, 4), (10, 5), (8, 8), (12, 20), (25, 25), (40, 33), (3, 200), (80, 100)]:
        size = n1 * n2
        counts = [1] + [0] * size
        for i in range(1, n1 + 1):
            for v in range(size, n2 + i - 1, -1):
                counts[v] -= counts[v - n2 - i]
            for v in range(i, size + 1):
                counts[v] += counts[v - i]
        whole = math.comb(n1 + n2, n1)
        assert sum(counts) == whole and counts == counts[::-1]
        deviation = math.sqrt(size * (n1 + n2 + 1) / 12)
        places = {0, 1, size, size // 2, (size + 1) // 2}
        for far in (0.5, 1, 1.5, 2, 3, 4, 6, 8):
            places |= {max(0, int(size / 2 - far * deviation)), min(size, int(size / 2 + far * deviation))}
        for u in sorted(p for p in places if 0 <= p <= size):
            truths = [Fraction(sum(counts[: u + 1]), whole), Fraction(sum(counts[u:]), whole)]
            rows.append(((u, n1, n2), truths, 1e-13, "whole numbers"))
    write("mann_whitney_exact", ["u", "n1", "n2", "lower", "upper"], rows, "P(U <= u) and P(U >= u) without ties")


PROPORTIONS = [(0, 5), (5, 5), (1, 2), (13, 16), (81, 263), (0, 1000), (1, 1000), (999, 1000), (56, 70), (48, 80),
               (250, 12345), (50000, 100000), (3, 1000000), (999990, 1000000), (400000, 1000000)]
LEVELS = [0.95, 0.9, 0.99, 0.999]


def table_clopper_pearson():
    rows = []
    for x, n in PROPORTIONS:
        for level in LEVELS:
            mpmath.mp.dps = 60
            side = (1 - Fraction(level)) / 2
            wanted = mpmath.mpf(side.numerator) / side.denominator
            lower = mpmath.mpf(0) if x == 0 else 1 / (1 + mpmath.exp(-beta_log_odds(x, n - x + 1, wanted, False)))
            upper = mpmath.mpf(1) if x == n else 1 / (1 + mpmath.exp(-beta_log_odds(x + 1, n - x, wanted, True)))
            rows.append(((x, n, level), (lower, upper), 1e-12, ARB))
    write("clopper_pearson", ["x", "n", "level", "lower", "upper"], rows, "exact interval of a proportion")


def table_wilson():
    rows = []
    for x, n in PROPORTIONS:
        for level in LEVELS:
            mpmath.mp.dps = 60
            z = mpmath.sqrt(2) * mpmath.erfinv(mpmath.mpf(level))
            p = mpmath.mpf(x) / n
            middle, half = p + z**2 / (2 * n), z * mpmath.sqrt(p * (1 - p) / n + z**2 / (4 * mpmath.mpf(n) ** 2))
            limits = [(middle - half) / (1 + z**2 / n), (middle + half) / (1 + z**2 / n)]
            limits = [mpmath.mpf(0) if x == 0 else limits[0], mpmath.mpf(1) if x == n else limits[1]]
            rows.append(((x, n, level), limits, 1e-13, "mpmath closed form"))
    write("wilson", ["x", "n", "level", "lower", "upper"], rows, "score interval of a proportion")


# ---------------------------------------------------------------- integrals

def noncentral_truth(t, df, delta):
    """Rigorous integration (acb.integral) of Φ over the chi density, on panels around the mode."""
    ctx.dps = 50
    T, D, N = arb(t), arb(delta), arb(df)
    root = arb(2).sqrt()
    constant = N / 2 * N.log() - (N / 2).lgamma() - (N / 2 - 1) * arb(2).log()

    def tail(sign):
        def integrand(v, _):
            s = v.exp()
            return (constant + N * v - s * s * N / 2).exp() * (sign * (s * T - D) / root).erfc() / 2

        # In v = ln s the integrand is entire: no branch cut, no pole.
        deviation = 1 / math.sqrt(2 * df)
        low, high = -70 / df - 14 * deviation, math.log(1 + 26 * deviation)
        edges = sorted({low, high, 0.0} | {j * deviation for j in (-16, -8, -4, -2, -1, 1, 2, 4, 8, 16)
                                           if low < j * deviation < high}
                       | {float(j) for j in range(-90, 4) if low < j < high})
        total = acb(0)
        for left, right in zip(edges, edges[1:]):
            total += acb.integral(integrand, acb(left), acb(right), rel_tol=arb(10) ** -30, abs_tol=arb(10) ** -40)
        if relative_radius(total.real) > 1e-22 and total.real > arb("1e-10"):
            raise SystemExit(f"noncentral_student {(t, df, delta)}: {total}")
        return total.real

    tails = [tail(-1), tail(1)]
    # The tails are integrated apart; what the ends of the range cut off would show here.
    if abs(mp(tails[0]) + mp(tails[1]) - 1) > mpmath.mpf("1e-21"):
        raise SystemExit(f"noncentral_student {(t, df, delta)}: {tails}")
    return tails


def table_noncentral_student():
    rows = []
    for df in [1, 4, 10, 24, 125.5312, 1000, 1000000]:
        for delta in [0.0, 0.5, 1.5, 2.8, 3.24, 5.0, -2.0, 12.0, 40.0]:
            for far in [-5, -2, -0.5, 0, 1.97, 4]:
                t = round(delta * (1 + 0.75 / df) + far * math.sqrt(1 + delta**2 / (2 * df)), 4)
                lower, upper = noncentral_truth(t, df, delta)
                if min(mp(lower), mp(upper)) < mpmath.mpf("1e-9"):
                    continue
                if len(rows) % 12 == 0 and df < 200:
                    mpmath.mp.dps = 25
                    d, n = mpmath.mpf(delta), mpmath.mpf(df)
                    c = 2 * (n / 2) ** (n / 2) / mpmath.gamma(n / 2)
                    w = 1 / math.sqrt(2 * df)
                    other = mpmath.quad(lambda s: c * s ** (n - 1) * mpmath.exp(-n * s * s / 2) * mpmath.ncdf(t * s - d),
                                        [0] + [max(0.01, 1 + j * w) for j in (-6, -2, 0, 2, 6, 14) if 1 + j * w > 0.01])
                    agree("noncentral_student", (t, df, delta), lower, other, 1e-14)
                rows.append(((t, float(df), delta), (lower, upper), 1e-11, ARB))
    write("noncentral_student", ["t", "df", "delta", "lower", "upper"], rows, "noncentral t tails above 1e-9")


def range_truth(q, k, df):
    """Nested trapezoidal sums in balls, in s = e^v and z, with two pairs of steps that must agree to 1e-15
    (heuristic, hence the comparison with scipy's own mpmath values in the table)."""

    def run(h_outer, h_inner):
        ctx.dps = 30
        N, Q, root = arb(df), arb(q), arb(2).sqrt()
        zs = [arb(j) * arb(h_inner) for j in range(int(-11 / h_inner), int(11 / h_inner))]
        base = []
        for z in zs:
            below = (-z / root).erfc() / 2
            weight = (-z * z / 2).exp() * k * below ** (k - 1)
            if weight > arb("1e-40"):
                base.append((z, below, weight))
        scale = arb(h_inner) / (2 * arb.pi()).sqrt()
        constant = (N / 2 * N.log() - (N / 2).lgamma() - (N / 2 - 1) * arb(2).log())
        total, largest = arb(0), 0.0
        for direction in (1, -1):
            j = 0 if direction == 1 else 1
            while True:
                v = arb(direction * j) * arb(h_outer)
                s = v.exp()
                w = Q * s
                inner = arb(0)
                for z, below, weight in base:
                    # Products, because the power of a ball that touches 0 is not finite.
                    share, power = 1 - ((w - z) / root).erfc() / 2 / below, arb(1)
                    for _ in range(k - 1):
                        power *= share
                    inner += weight * (1 - power)
                term = (constant + N * v - N / 2 * s * s).exp() * inner * scale
                total += term
                value = float(term.mid())
                largest = max(largest, value)
                if not value >= 1e-24 * largest:
                    break
                j += 1
        return total * arb(h_outer)

    width = 1 / math.sqrt(2 * df + q * q / 2)
    fine = run(min(0.06, 0.4 * width), 0.2)
    coarse = run(min(0.075, 0.5 * width), 0.26)
    mpmath.mp.dps = 40
    if abs(mp(fine) / mp(coarse) - 1) > 1e-15:
        raise SystemExit(f"studentized_range {(q, k, df)}: {fine} {coarse}")
    return fine


def table_studentized_range():
    rows = []
    for df in [1, 4, 27, 1000]:
        for q in [0.3, 2.0, 4.2, 9.0, 15.0]:
            upper = 2 * student_tails(arb(q) / arb(2).sqrt(), df)[1]
            upper = at_precision(lambda: [2 * student_tails(arb(q) / arb(2).sqrt(), df)[1]])[0]
            if mp(upper) > mpmath.mpf("1e-12"):
                rows.append(((q, 2, float(df)), (1 - upper, upper), 1e-11, "Student t for k = 2"))
    for k in [3, 4, 10]:
        for df in [2, 10, 120]:
            for q in [0.8, 2.5, 3.6, 6.0, 10.0]:
                upper = range_truth(q, k, df)
                if mp(upper) > mpmath.mpf("1e-12"):
                    rows.append(((q, k, float(df)), (1 - upper, upper), 1e-11, ARB))
    path = os.path.join(os.path.dirname(scipy.stats.__file__), "tests", "data", "studentized_range_mpmath_ref.json")
    with open(path) as given:
        data = json.load(given)
    for case in data["cdf_data"]:
        source = case["src_case"]
        if source["v"] < 1 or source["k"] > 1000 or source["k"] != int(source["k"]):
            continue
        value = mpmath.mpf(case["mp_result"])
        # A cdf in double precision: its complement is not a truth for the upper tail.
        if value < 1e-10:
            continue
        rows.append(((float(source["q"]), int(source["k"]), float(source["v"])), (value, ""), 1e-11,
                     "scipy studentized_range_mpmath_ref.json"))
    write("studentized_range", ["q", "k", "df", "lower", "upper"], rows, "studentized range tails")
