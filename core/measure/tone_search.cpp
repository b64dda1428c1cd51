// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/tone_search.h"

#include "core/signal/noise_level.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include <Eigen/Core>

namespace sinewright::core {

namespace {

/// Mean power of the noise about a band.
double noisePower(const StretchTransform& transform, double lowBins, double highBins)
{
    const auto indexAt = [&transform](double bins) {
        const double index = std::round(bins / transform.binsPerIndex());
        return static_cast<std::size_t>(
            std::clamp(index, 0.0, static_cast<double>(transform.size()) - 1.0));
    };
    const std::size_t first = indexAt(lowBins);
    const std::size_t last = std::max(first, indexAt(highBins));
    return meanFromMedian(transform.powers().subspan(first, last - first + 1));
}

} // namespace

LineCandidate
strongestLine(const StretchTransform& transform, double lowestBins, double lowBins, double highBins)
{
    const auto first =
        static_cast<std::size_t>(std::max(1.0, std::ceil(lowestBins / transform.binsPerIndex())));
    LineCandidate line;
    if (first + 2 >= transform.size()) {
        return line;
    }
    const auto searched = transform.powers().subspan(first, transform.size() - 1 - first);
    Eigen::Index highest = 0;
    line.power = Eigen::Map<const Eigen::ArrayXd>(searched.data(),
                                                  static_cast<Eigen::Index>(searched.size()))
                     .maxCoeff(&highest);
    const std::size_t best = first + static_cast<std::size_t>(highest);
    if (!(line.power > 0.0)) {
        return line;
    }
    // Parabola through the logarithms of three neighbours: all the windows used here are close to a bell.
    const auto level = [&transform](std::size_t index) {
        return std::log(std::max(transform.powers()[index], std::numeric_limits<double>::min()));
    };
    const double before = level(best - 1);
    const double here = level(best);
    const double after = level(best + 1);
    const double curvature = before - 2.0 * here + after;
    const double offset =
        curvature < 0.0 ? std::clamp((before - after) / (2.0 * curvature), -0.5, 0.5) : 0.0;
    line.bins = transform.position(best) + offset * transform.binsPerIndex();
    const double noise = noisePower(transform, lowBins, highBins);
    line.prominence = noise > 0.0 ? line.power / noise : std::numeric_limits<double>::infinity();
    return line;
}

} // namespace sinewright::core
