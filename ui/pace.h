// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

namespace sinewright::ui {

/// Draws every new frame while drawing is cheap, every other one once it is not.
class Pace final
{
public:
    static constexpr double kCostlyMs = 8.0; ///< drawing one frame longer than this halves the rate

    /// To be asked once for every new frame. @param lastDrawMs  what drawing all plots in view took last.
    [[nodiscard]] bool isDue(double lastDrawMs)
    {
        m_skipsNext = lastDrawMs > kCostlyMs && !m_skipsNext;
        return !m_skipsNext;
    }

private:
    bool m_skipsNext = false;
};

} // namespace sinewright::ui
