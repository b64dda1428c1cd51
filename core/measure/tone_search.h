// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/line_fit.h"

namespace sinewright::core {

/// The strongest line of a windowed stretch, before any fit.
struct LineCandidate
{
    double bins = 0.0;  ///< place, good to a tenth of a bin
    double power = 0.0; ///< squared magnitude at its highest index
    double prominence =
        0.0; ///< that over the mean power of the noise about the band; infinite without noise
};

/// @param lowestBins          lines below are not looked at.
/// @param lowBins, highBins   the band for the noise, taken from the median there.
[[nodiscard]] LineCandidate strongestLine(const StretchTransform& transform,
                                          double lowestBins,
                                          double lowBins,
                                          double highBins);

} // namespace sinewright::core
