// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstddef>
#include <span>

namespace sinewright::core {

/// What can be told of a stretch without a transform.
struct SampleStatistics
{
    double mean = 0.0;
    double peak = 0.0; ///< largest absolute sample
    double step =
        0.0; ///< quantising step when every sample is a multiple of one, 24 bits or coarser; else 0
    std::size_t longestAtFullScale =
        0;                           ///< consecutive samples at or within half a step of full scale
    std::size_t longestAtTop = 0;    ///< consecutive samples equal to the largest one
    std::size_t longestAtBottom = 0; ///< the same for the smallest
};

/// @param samples  not empty, finite, 1.0 = full scale.
[[nodiscard]] SampleStatistics sampleStatistics(std::span<const double> samples);

/// True when full scale was reached on two or more consecutive samples.
[[nodiscard]] bool isAtFullScale(const SampleStatistics& statistics);

/// True when the extreme samples stay equal for at least two samples longer than a sine of this amplitude and length of
/// period dwells within one quantising step of its peak.
///
/// A slow or quiet tone of a coarse converter dwells long and is no overload.
[[nodiscard]] bool
isFlatTopped(const SampleStatistics& statistics, double amplitude, double samplesPerPeriod);

} // namespace sinewright::core
