// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/signal/fourier.h"
#include "core/signal/window.h"

#include <cstddef>
#include <span>
#include <vector>

namespace sinewright::core {

/// Power spectrum of stretches of one fixed length.
///
/// @thread  one; keeps its plan, window and buffers from one call to the next.
class Spectrum final
{
public:
    /// Whether the mean under the window is taken out first. In a short stretch the lobe of a DC line would hide the
    /// lowest audible frequencies.
    enum class Dc { Keep, TakeOut };

    /// @param count  samples a stretch, even.
    Spectrum(const CosineWindow& window, std::size_t count, Dc dc = Dc::Keep);

    [[nodiscard]] std::size_t count() const { return m_window.size(); }
    [[nodiscard]] double noiseBandwidthBins() const { return m_noiseBandwidthBins; }

    /// Squared rms of a sine whose line stands in each bin [FS^2], bins 0 .. count / 2.
    ///
    /// A full-scale sine on a bin reads 0.5. Bins 0 and count / 2 are treated like the others, so that DC, where it is
    /// kept, reads twice its power.
    [[nodiscard]] std::span<const double> powerFs2(std::span<const double> samples);

private:
    std::vector<double> m_window; ///< scaled so that a line reads its power
    RealFourier m_fourier;
    Dc m_dc;
    double m_noiseBandwidthBins;
};

} // namespace sinewright::core
