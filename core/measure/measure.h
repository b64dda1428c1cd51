// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/reading.h"
#include "core/units.h"

#include <cstddef>
#include <span>

namespace sinewright::core {

inline constexpr std::size_t kLongestReading = std::size_t{1}
                                               << 24; ///< samples that measure() takes at the most

/// One reading from one stretch of one channel.
///
/// The live window, the command line and the tests all come here, so that a stretch measured offline gives the very
/// figures that were shown live.
///
/// @param samples   1.0 = full scale, finite; at most kLongestReading values (the caller's duty).
/// @param rate      44.1 .. 192 kHz is what it is tested for; any positive rate works.
/// @param settings  as documented there; the band's upper edge is limited to half the rate.
/// @return          Status and figures; `startS` is 0, for the caller to fill in.
/// @thread          any; pure but for FFTW's plan cache, which is locked.   @realtime  no: allocates.
[[nodiscard]] Reading
measure(std::span<const double> samples, SampleRate rate, const MeasureSettings& settings);

} // namespace sinewright::core
