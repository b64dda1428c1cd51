// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/frame.h"
#include "core/measure/reading.h"
#include "core/units.h"

#include <cstdint>
#include <memory>
#include <span>
#include <vector>

namespace sinewright::core {

/// A stretch of one channel on its way to the analyser.
struct Block
{
    std::uint64_t firstFrame =
        0; ///< number of its first sample, counted from the start of the source
    std::uint64_t lostBefore = 0; ///< samples lost right before it; not 0 marks a gap
    std::span<const double>
        samples; ///< 1.0 = full scale; values that are not finite are treated as lost
};

/// How often and from how much signal readings are made.
struct AnalyserConfig
{
    SampleRate rate;
    MeasureSettings settings;
    double quickEveryS = 0.05; ///< [s] at least 10 quick readings a second
    double quickLengthS = 0.1; ///< [s] at least; lengthened to 8 periods of a low tone
    double fullEveryS = 0.5;   ///< [s]
    double fullLengthS = 2.0;  ///< [s]
};

/// Turns a stream of blocks into frames with quick and full readings, spectrum, cycle residual and trim trend.
///
/// Knows no threads, files or clock: time is counted in samples. No reading spans a gap: whatever was collected
/// before one is dropped.
///
/// @thread  one; not synchronised.
class Analyser final
{
public:
    explicit Analyser(const AnalyserConfig& config);
    ~Analyser();
    Analyser(const Analyser&) = delete;
    Analyser& operator=(const Analyser&) = delete;

    /// Takes a block of any length and returns the frames that it completed, oldest first; often none.
    [[nodiscard]] std::vector<std::shared_ptr<const Frame>> feed(const Block& block);

    /// Takes effect from the next reading on; the collected samples stay.
    void setSettings(const MeasureSettings& settings);

    /// Forgets the best so far; see Trend::resetBest().
    void resetBest();

private:
    class Impl;
    std::unique_ptr<Impl> m_impl;
};

} // namespace sinewright::core
