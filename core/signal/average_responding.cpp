// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/average_responding.h"

#include <cmath>
#include <numbers>

namespace sinewright::core {

double averageRespondingRms(std::span<const double> samples)
{
    if (samples.empty()) {
        return 0.0;
    }
    double sum = 0.0;
    for (const double x : samples) {
        sum += std::abs(x);
    }
    return std::numbers::pi / (2.0 * std::numbers::sqrt2) * sum /
           static_cast<double>(samples.size());
}

} // namespace sinewright::core
