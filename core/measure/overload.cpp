// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/overload.h"

#include <algorithm>
#include <bit>
#include <cassert>
#include <cmath>
#include <cstdint>
#include <numbers>

#include <Eigen/Core>

namespace sinewright::core {

namespace {

constexpr int kFinestBits = 23; ///< a 24-bit converter's step is 2^-23
constexpr double kCoarsestStep =
    1.0 / 128.0; ///< an 8-bit converter's; coarser is a quiet signal, not a converter
constexpr std::size_t kTooManyAtFullScale = 2;
constexpr std::size_t kTooManyAtTop = 2;

double quantisingStep(std::span<const double> samples)
{
    const double scale = std::ldexp(1.0, kFinestBits);
    std::uint64_t bits = 0;
    for (const double x : samples) {
        const double scaled = std::abs(x) * scale;
        const auto whole = static_cast<std::uint64_t>(std::min(scaled, std::ldexp(1.0, 62)));
        if (static_cast<double>(whole) != scaled) {
            return 0.0;
        }
        bits |= whole;
    }
    return bits == 0 ? 0.0 : std::ldexp(1.0, std::countr_zero(bits) - kFinestBits);
}

/// Length of the run of samples at or beyond a bound, from one whose sample has just been seen.
class RunCounter
{
public:
    void see(bool belongs)
    {
        m_run = belongs ? m_run + 1 : 0;
        m_longest = std::max(m_longest, m_run);
    }
    [[nodiscard]] std::size_t longest() const { return m_longest; }

private:
    std::size_t m_run = 0;
    std::size_t m_longest = 0;
};

} // namespace

SampleStatistics sampleStatistics(std::span<const double> samples)
{
    assert(!samples.empty());
    SampleStatistics statistics;
    const Eigen::Map<const Eigen::ArrayXd> all(samples.data(),
                                               static_cast<Eigen::Index>(samples.size()));
    statistics.mean = all.mean();
    const double top = all.maxCoeff();
    const double bottom = all.minCoeff();
    statistics.peak = std::max(std::abs(top), std::abs(bottom));
    statistics.step = quantisingStep(samples);
    // An integer converter's highest code lies one step below full scale.
    const double step = std::min(statistics.step, kCoarsestStep);
    const double fullScale =
        step > 0.0 ? 1.0 - 1.5 * step : 1.0 - std::ldexp(1.0, -kFinestBits - 1);
    const double high = std::min(top, fullScale);
    const double low = std::max(bottom, -fullScale);
    RunCounter atTop;
    RunCounter atBottom;
    RunCounter atFullScale;
    bool isRunning = false;
    for (const double x : samples) {
        const bool isExtreme = x >= high || x <= low;
        if (isExtreme || isRunning) {
            atTop.see(x == top);
            atBottom.see(x == bottom);
            atFullScale.see(std::abs(x) >= fullScale);
        }
        isRunning = isExtreme;
    }
    statistics.longestAtTop = atTop.longest();
    statistics.longestAtBottom = atBottom.longest();
    statistics.longestAtFullScale = atFullScale.longest();
    return statistics;
}

bool isAtFullScale(const SampleStatistics& statistics)
{
    return statistics.longestAtFullScale >= kTooManyAtFullScale;
}

bool isFlatTopped(const SampleStatistics& statistics, double amplitude, double samplesPerPeriod)
{
    const double share = std::clamp(statistics.step / amplitude, 0.0, 2.0);
    const double dwell = std::acos(1.0 - share) / std::numbers::pi * samplesPerPeriod;
    const auto honest =
        static_cast<std::size_t>(std::floor(dwell)) + 1; // samples that fall into that time at most
    return std::max(statistics.longestAtTop, statistics.longestAtBottom) >= honest + kTooManyAtTop;
}

} // namespace sinewright::core
