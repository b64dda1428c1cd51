// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/reading.h"

#include <deque>
#include <optional>
#include <vector>

namespace sinewright::core {

/// One moment of the trim trend.
struct TrendPoint
{
    double timeS = 0.0;             ///< [s] from the start of the source, middle of the reading
    std::optional<double> thdRatio; ///< empty where the reading had none
    std::optional<double> thdnRatio;
    std::optional<double> levelDbfs;
    bool afterGap =
        false; ///< samples were lost before this point: do not join it to the one before
};

/// The best steady full reading so far.
struct BestReading
{
    double timeS = 0.0; ///< [s] middle of the reading
    double thdRatio = 0.0;
    std::optional<double> thdnRatio;
    std::optional<double> levelDbfs;
    std::optional<double> levelVrms;
    std::optional<double> frequencyHz;
};

/// What the trend looks like at one moment; immutable once handed out.
struct TrendSnapshot
{
    std::vector<TrendPoint> points; ///< ascending in time, spanning at most the trend's length
    std::optional<BestReading> best;
};

/// THD, THD+N and level against time, with the best so far.
///
/// @thread  one; not synchronised.
class Trend final
{
public:
    static constexpr double kSpanS = 180.0; ///< [s] how much is kept: the last three minutes

    /// [s] Points nearer than this to the one before are left out: a snapshot stays below 4500 points, small enough to
    /// be copied for every frame.
    static constexpr double kLeastSpacingS = 0.04;

    /// Adds a quick reading. A reading without a tone becomes a point without figures: a hole in the line.
    void addQuick(const Reading& reading, bool afterGap);

    /// Takes a full reading into account for the best so far: only one with status Ok, a THD, and neither an unsteady
    /// level nor an unsteady frequency can become the best.
    void addFull(const Reading& reading);

    /// Forgets the best so far; the next steady full reading that began after `fromS` starts anew.
    void resetBest(double fromS);

    [[nodiscard]] TrendSnapshot snapshot() const;

private:
    std::deque<TrendPoint> m_points;
    std::optional<BestReading> m_best;
    double m_bestFromS = 0.0;
    bool m_isGapPending = false; ///< a gap not yet marked, its first point having been left out
};

} // namespace sinewright::core
