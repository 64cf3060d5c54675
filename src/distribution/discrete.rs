//! Binomial, Poisson and hypergeometric tails, and the tests that are nothing
//! but such a tail.

use super::beta::evaluate;
use super::kernel::{deviance, finite, stirling};
use super::{DistributionError, Tails, gamma};

/// Counts beyond this are not whole numbers in an `f64`.
const MOST_COUNT: u64 = 1 << 53;

/// Refuses counts that an `f64` cannot hold exactly.
fn count(k: u64) -> Result<f64, DistributionError> {
    if k <= MOST_COUNT { Ok(k as f64) } else { Err(DistributionError::TooLarge) }
}

/// Binomial distribution: `lower` = P(X ≤ k), `upper` = P(X ≥ k) for `n` trials
/// with success probability `p`. Both include `k`, so they add up to
/// 1 + P(X = k).
///
/// `0 ≤ p ≤ 1`; for `k > n` the tails are 1 and 0. Errors:
/// [`DistributionError::NotFinite`], [`DistributionError::OutOfDomain`] for `p`
/// outside [0, 1], [`DistributionError::TooLarge`] beyond 2^53. Source: the
/// incomplete beta function (Abramowitz & Stegun 26.5.24), see [`super::beta`].
pub fn binomial(k: u64, n: u64, p: f64) -> Result<Tails, DistributionError> {
    finite(&[p])?;
    if !(0.0..=1.0).contains(&p) {
        return Err(DistributionError::OutOfDomain);
    }
    let (size, at) = (count(n)?, count(k)?);
    // P(X ≥ j) = I_p(j, n − j + 1), with λ = j − (n + 1) p taken in one rounding.
    let from = |j: f64| -> Result<Tails, DistributionError> {
        if j <= 0.0 {
            Ok(Tails { lower: 1.0, upper: 0.0 })
        } else if j > size {
            Ok(Tails { lower: 0.0, upper: 1.0 })
        } else {
            let lambda = (size + 1.0).mul_add(-p, j);
            Ok(evaluate(p, 1.0 - p, j, size - j + 1.0, lambda)?.tails)
        }
    };
    Ok(Tails { lower: from(at + 1.0)?.upper, upper: from(at)?.lower })
}

/// Poisson distribution with the given `mean ≥ 0`: `lower` = P(X ≤ k), `upper` =
/// P(X ≥ k). Both include `k`.
///
/// Errors: [`DistributionError::NotFinite`], [`DistributionError::OutOfDomain`]
/// for a negative mean, [`DistributionError::TooLarge`] beyond 2^53. Source: the
/// incomplete gamma function (Abramowitz & Stegun 26.4.21), see [`super::gamma`].
pub fn poisson(k: u64, mean: f64) -> Result<Tails, DistributionError> {
    finite(&[mean])?;
    if mean < 0.0 {
        return Err(DistributionError::OutOfDomain);
    }
    let at = count(k)?;
    Ok(Tails { lower: gamma(mean, at + 1.0)?.upper, upper: if k == 0 { 1.0 } else { gamma(mean, at)?.lower } })
}

/// Largest population of [`hypergeometric`] and of the exact tests built on it:
/// above it the products of its recurrence are no longer exact.
pub(super) const MOST_POPULATION: u64 = 90_000_000;

/// The margins of a hypergeometric distribution, checked.
#[derive(Clone, Copy)]
pub(super) struct Margins {
    pub marked: f64,
    pub drawn: f64,
    pub population: f64,
    /// The smallest and largest count that the margins allow.
    pub least: f64,
    pub most: f64,
}

impl Margins {
    pub fn new(population: u64, marked: u64, drawn: u64) -> Result<Self, DistributionError> {
        if population > MOST_POPULATION {
            return Err(DistributionError::TooLarge);
        }
        if marked > population || drawn > population {
            return Err(DistributionError::OutOfDomain);
        }
        Ok(Self {
            marked: marked as f64,
            drawn: drawn as f64,
            population: population as f64,
            least: (marked + drawn).saturating_sub(population) as f64,
            most: marked.min(drawn) as f64,
        })
    }

    /// P(X = k + 1) / P(X = k).
    pub fn up(&self, k: f64) -> f64 {
        (self.marked - k) * (self.drawn - k) / ((k + 1.0) * (self.population - self.marked - self.drawn + k + 1.0))
    }

    /// P(X = k − 1) / P(X = k).
    pub fn down(&self, k: f64) -> f64 {
        k * (self.population - self.marked - self.drawn + k) / ((self.marked - k + 1.0) * (self.drawn - k + 1.0))
    }

    /// The most probable count.
    pub fn mode(&self) -> f64 {
        ((self.marked + 1.0) * (self.drawn + 1.0) / (self.population + 2.0)).floor().clamp(self.least, self.most)
    }

    /// P(X = k), by Loader's quotient of three binomial probabilities.
    pub fn probability(&self, k: f64) -> f64 {
        let p = self.drawn / self.population;
        let q = (self.population - self.drawn) / self.population;
        if p <= 0.0 || q <= 0.0 {
            return 1.0;
        }
        let others = self.population - self.marked;
        let log = log_binomial(k, self.marked, self.drawn, self.population)
            + log_binomial(self.drawn - k, others, self.drawn, self.population)
            - log_binomial(self.drawn, self.population, self.drawn, self.population);
        log.exp()
    }

    /// Sum of P(X = j)/P(X = k) over j from `k` outward, `k` included, up or down.
    /// Only to be asked in the direction in which the probabilities fall.
    pub fn outward(&self, k: f64, up: bool) -> f64 {
        let mut at = k;
        let mut term = 1.0;
        let mut sum = 1.0;
        // Bounded by the support, hence by MOST_POPULATION; past the mode the
        // ratios fall, so that it ends after some forty standard deviations.
        loop {
            if up {
                if at >= self.most {
                    return sum;
                }
                term *= self.up(at);
                at += 1.0;
            } else {
                if at <= self.least {
                    return sum;
                }
                term *= self.down(at);
                at -= 1.0;
            }
            sum += term;
            if term <= 1e-18 * sum {
                return sum;
            }
        }
    }
}

/// ln of the binomial probability of `k` out of `n` at `p = drawn/population`,
/// as a deviance (Loader 2000).
fn log_binomial(k: f64, n: f64, drawn: f64, population: f64) -> f64 {
    let p = drawn / population;
    let q = (population - drawn) / population;
    if n == 0.0 {
        return 0.0;
    }
    if k == 0.0 {
        return n * (-p).ln_1p();
    }
    if k == n {
        return n * (-q).ln_1p();
    }
    // k·ln(k/(np)) − (k − np) = np·… written with u = np/k − 1, whose numerator
    // is exact in whole numbers.
    let gap = (n * drawn - k * population) / population;
    let rest = n - k;
    let exponent = k * deviance(gap / k, n * p / k) + rest * deviance(-gap / rest, n * q / rest);
    0.5 * (n / (std::f64::consts::TAU * k * rest)).ln() + stirling(n) - stirling(k) - stirling(rest) - exponent
}

/// Hypergeometric distribution: of `population` units `marked` are of the first
/// kind; `drawn` are taken; `lower` = P(X ≤ k), `upper` = P(X ≥ k), where X counts
/// those of the first kind. Both include `k`.
///
/// For the 2×2 table `[a, b; c, d]` with fixed margins: `k = a`, `population =
/// a+b+c+d`, `marked = a+b`, `drawn = a+c`. Errors:
/// [`DistributionError::OutOfDomain`] where `marked` or `drawn` exceeds the
/// population or `k` is impossible, [`DistributionError::TooLarge`] beyond a
/// population of 9e7. Source: probability after Loader (2000), summed by the
/// ratio of neighbours away from the mode.
pub fn hypergeometric(k: u64, population: u64, marked: u64, drawn: u64) -> Result<Tails, DistributionError> {
    let margins = Margins::new(population, marked, drawn)?;
    let at = count(k)?;
    if at < margins.least || at > margins.most {
        return Err(DistributionError::OutOfDomain);
    }
    let own = margins.probability(at);
    let (lower, upper) = if at <= margins.mode() {
        let lower = own * margins.outward(at, false);
        (lower, 1.0 - (lower - own))
    } else {
        let upper = own * margins.outward(at, true);
        (1.0 - (upper - own), upper)
    };
    Ok(Tails { lower: lower.clamp(0.0, 1.0), upper: upper.clamp(0.0, 1.0) })
}

/// McNemar's exact two-sided p-value for discordant counts `b` and `c`: twice the
/// smaller tail of the binomial distribution with probability one half, at most 1.
///
/// Without discordant pairs the p-value is 1. Errors:
/// [`DistributionError::TooLarge`] beyond 2^53 pairs. Source: McNemar (1947),
/// in its exact binomial form; see [`binomial`].
pub fn mcnemar_exact(b: u64, c: u64) -> Result<f64, DistributionError> {
    let n = b.checked_add(c).ok_or(DistributionError::TooLarge)?;
    if b == c {
        return Ok(1.0);
    }
    Ok((2.0 * binomial(b.min(c), n, 0.5)?.lower).min(1.0))
}
