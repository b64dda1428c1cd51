// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/reading.h"
#include "core/trim/trend.h"
#include "core/units.h"

#include <array>
#include <cstdint>
#include <memory>
#include <optional>
#include <vector>

namespace sinewright::core {

/// Power spectrum of the newest stretch, one value a bin from 0 Hz to half the sample rate.
struct SpectrumView
{
    double binHz = 0.0;              ///< [Hz] spacing of the bins
    double noiseBandwidthBins = 1.0; ///< equivalent noise bandwidth of the window [bins]
    std::vector<float> levelDbfs; ///< a sine's line reads its level in dBFS; floored at kFloorDbfs
    static constexpr float kFloorDbfs = -240.0F;
};

/// The residual averaged in phase over one cycle of the fundamental, and the averaged cycle itself.
struct CycleView
{
    static constexpr int kPoints = 256;
    std::array<float, kPoints>
        residual{}; ///< relative to the fundamental's amplitude; index 0 at its rising zero crossing
    std::array<float, kPoints> cycle{}; ///< averaged cycle, 1 = the fundamental's amplitude
};

/// Everything the window shows of one moment. Immutable behind std::shared_ptr<const Frame>.
struct Frame
{
    std::uint64_t serial = 0; ///< counts frames of one source from 1
    SampleRate rate;
    double timeS = 0.0;  ///< [s] end of the newest sample used, from the start of the source
    double peakFs = 0.0; ///< largest absolute sample since the last frame, for the level meter
    double rmsFs = 0.0;  ///< rms since the last frame
    Reading quick;       ///< the newest quick reading
    std::optional<Reading>
        full; ///< the newest full reading; empty until there is one since the start or the last gap
    bool isFullNew = false;                       ///< the full reading was made with this frame
    std::shared_ptr<const SpectrumView> spectrum; ///< null until enough samples came
    std::shared_ptr<const CycleView> cycle;       ///< null without a tone
    std::shared_ptr<const TrendSnapshot> trend;   ///< never null
    std::uint64_t framesLost = 0;                 ///< sample frames lost so far
    std::uint64_t gaps = 0;                       ///< stretches in which they were lost
};

} // namespace sinewright::core
