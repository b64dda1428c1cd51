// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/noise_level.h"

#include <algorithm>
#include <cassert>
#include <cmath>

namespace sinewright::core {

double meanFromMedian(std::vector<double>& powers)
{
    if (powers.empty()) {
        return 0.0;
    }
    const auto middle = powers.begin() + static_cast<std::ptrdiff_t>(powers.size() / 2);
    std::nth_element(powers.begin(), middle, powers.end());
    return *middle / std::numbers::ln2;
}

double meanFromMedian(std::span<const double> powers)
{
    constexpr std::size_t kEnough = 4096; // for a median good to 2.3 %
    const std::size_t stride = powers.size() / kEnough + 1;
    std::vector<double> chosen;
    chosen.reserve(powers.size() / stride + 1);
    for (std::size_t index = 0; index < powers.size(); index += stride) {
        chosen.push_back(powers[index]);
    }
    return meanFromMedian(chosen);
}

double chanceRatio(double probability, double independent)
{
    assert(independent > 0.0);
    return independent * (std::pow(probability, -1.0 / independent) - 1.0);
}

} // namespace sinewright::core
