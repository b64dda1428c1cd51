// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstddef>
#include <numbers>
#include <span>
#include <vector>

namespace sinewright::core {

/// Mean of exponentially distributed powers, as a spectrum of noise has them, from their median: a few lines among
/// them do not move it. 0 for none.
///
/// @param powers  put into another order.
/// @source  the median of an exponential distribution is ln 2 times its mean.
[[nodiscard]] double meanFromMedian(std::vector<double>& powers);

/// The same of a stretch of a spectrum, from some 4000 of its powers where there are more.
[[nodiscard]] double meanFromMedian(std::span<const double> powers);

/// A median of n exponential powers scatters like a mean of so many times n.
/// @source  the median's variance is 1 / (4 n p^2), p being the density there, 1 / (2 mean).
inline constexpr double kMedianEfficiency = std::numbers::ln2 * std::numbers::ln2;

/// How far above a mean of n independent noise powers a further one may stand by chance.
///
/// @param probability  of standing higher, for one power.
/// @param independent  n > 0.
/// @source  derived here: with the mean m of n exponential powers, a further one exceeds T m with probability
///          (1 + T / n)^-n.
[[nodiscard]] double chanceRatio(double probability, double independent);

} // namespace sinewright::core
