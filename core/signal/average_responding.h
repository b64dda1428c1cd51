// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <span>

namespace sinewright::core {

/// What an average-responding meter calibrated in rms of a sine shows: pi / (2 sqrt 2) times the mean of |x|.
///
/// @return  0 for no samples.   @source  the mean of |sin| is 2 / pi, its rms 1 / sqrt 2.
[[nodiscard]] double averageRespondingRms(std::span<const double> samples);

} // namespace sinewright::core
