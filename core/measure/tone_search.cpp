// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/tone_search.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>
#include <vector>

#include <Eigen/Core>

namespace sinewright::core {

namespace {

constexpr std::size_t kMedianIndices = 4096; ///< enough for a median good to 2.5 %

double medianPower(const StretchTransform& transform, double lowBins, double highBins)
{
    const double lastIndex = static_cast<double>(transform.size()) - 1.0;
    const auto first = static_cast<std::size_t>(
        std::clamp(std::ceil(lowBins / transform.binsPerIndex()), 0.0, lastIndex));
    const auto last = static_cast<std::size_t>(
        std::clamp(std::floor(highBins / transform.binsPerIndex()), 0.0, lastIndex));
    const std::size_t stride = (last - std::min(first, last)) / kMedianIndices + 1;
    std::vector<double> powers;
    for (std::size_t index = first; index <= last; index += stride) {
        powers.push_back(transform.powers()[index]);
    }
    if (powers.empty()) {
        return 0.0;
    }
    const auto middle = powers.begin() + static_cast<std::ptrdiff_t>(powers.size() / 2);
    std::nth_element(powers.begin(), middle, powers.end());
    return *middle / std::numbers::ln2;
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
    const double noise = medianPower(transform, lowBins, highBins);
    line.prominence = noise > 0.0 ? line.power / noise : std::numeric_limits<double>::infinity();
    return line;
}

} // namespace sinewright::core
