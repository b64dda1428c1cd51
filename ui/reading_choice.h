// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"

namespace sinewright::ui {

/// Which of a frame's readings the figures are taken from.
struct ShownReading
{
    const core::Reading* reading =
        nullptr; ///< never null once made from a frame; lives as long as the frame
    bool isFull = false;
};

/// The full reading while the tone is steady; the quick one while the hand is on the trimmer, since a full reading
/// over a moving tone tells about no moment at all.
[[nodiscard]] ShownReading shownReading(const core::Frame& frame);

[[nodiscard]] bool hasWarning(const core::Reading& reading, core::Warning warning);

/// The input is at full scale now: seen by the newest quick reading.
[[nodiscard]] bool isOverloaded(const core::Frame& frame);

} // namespace sinewright::ui
