// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <cstdint>

namespace sinewright::audio {

/// When made-up samples are due, so that they come like an interface's. Knows no clock: seconds are counted from the start.
///
/// A little lateness is caught up with, since the pace is counted from the start; after a longer stall, as of a machine
/// put to sleep, the missing frames are given up rather than poured out in one go.
class DemoPace final
{
public:
    explicit DemoPace(double rateHz) : m_rateHz(rateHz) {}

    /// When a block of `frames` that starts now is complete [s].
    [[nodiscard]] double dueS(std::uint64_t frames) const noexcept
    {
        return static_cast<double>(m_frames + frames) / m_rateHz;
    }

    /// Frames to give up before the next block at `nowS` [s]; they count as passed.
    [[nodiscard]] std::uint64_t giveUp(double nowS) noexcept
    {
        const double lateS = nowS - dueS(0);
        if (lateS <= kCatchUpS) {
            return 0;
        }
        const auto lost = static_cast<std::uint64_t>(lateS * m_rateHz);
        m_frames += lost;
        return lost;
    }

    /// A block has been delivered.
    void pass(std::uint64_t frames) noexcept { m_frames += frames; }

private:
    /// Half of what the shortest sensible ring holds; made up again in 10 ms.
    static constexpr double kCatchUpS = 0.25;

    double m_rateHz;
    std::uint64_t m_frames = 0;
};

} // namespace sinewright::audio
