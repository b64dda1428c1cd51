// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/residual_spectrum.h"
#include "core/units.h"

#include <optional>

namespace sinewright::core {

/// The strongest mains line of a stretch.
struct HumLine
{
    double frequencyHz = 0.0;
    double amplitude = 0.0; ///< 1.0 = full scale
    double familyHz = 50.0; ///< 50 or 60
};

/// Looks for lines at 50 n and 60 n Hz, n = 1 .. 6, up to 0.2 % beside their nominal place.
///
/// A line counts when it stands 10 dB above the median density on either side of it and so high that plain noise would raise one
/// of all the places looked at in one stretch of ten thousand. Lines within the resolution of the fundamental or of any
/// multiple of it are not hum.
///
/// @param resolutionHz  one over the stretch's length [Hz].
/// @return  The strongest line of the family that holds it; empty when none counts or the stretch is too short to
///          tell.
[[nodiscard]] std::optional<HumLine> findHum(const ResidualSpectrum& spectrum, double resolutionHz);

} // namespace sinewright::core
