// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "audio/source.h"

#include <string>
#include <vector>

#include <tl/expected.hpp>

namespace sinewright::app {

/// Why a stretch could not be had.
struct CaptureFailure
{
    bool isInterrupted =
        false;          ///< samples were lost each time it was tried; else it gave nothing at all
    std::string detail; ///< one line
};

/// Throws away what comes first while the interface settles, and collects `seconds` of `channel` without a gap. When
/// samples are lost on the way it starts again, kCaptureTries times at the most.
///
/// @param source   open, not started; stopped again on return.
/// @param format   what open() said.
/// @param channel  1 .. format.channels.
/// @param seconds  [s] > 0.
/// @return         1.0 = full scale.
/// @thread  any one; blocks for as long as it takes, and gives up when nothing comes for kCapturePatienceS.
[[nodiscard]] tl::expected<std::vector<double>, CaptureFailure> captureStretch(
    audio::Source& source, const audio::StreamFormat& format, int channel, double seconds);

inline constexpr int kCaptureTries = 4;
inline constexpr double kCaptureSettleS = 0.3;
inline constexpr double kCapturePatienceS = 5.0;

/// One channel of interleaved 32-bit samples, in double precision, appended to `samples`.
void appendChannel(const std::vector<float>& interleaved,
                   int channels,
                   int channel,
                   std::vector<double>& samples);

} // namespace sinewright::app
