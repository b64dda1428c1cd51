// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/measure/line_fit.h"
#include "core/measure/residual_spectrum.h"
#include "core/measure/tone_blocks.h"
#include "core/signal/fourier.h"

#include <array>
#include <cstddef>
#include <span>
#include <vector>

namespace sinewright::core {

/// Plan, windows and buffers for stretches of one length.
///
/// Both transforms of a reading share one set of buffers: a new one takes the place of the last.
class StretchWorkspace final
{
public:
    static constexpr int kFewestTerms = 2;
    static constexpr int kMostTerms = 9; ///< sidelobes of -234 dB

    explicit StretchWorkspace(std::size_t samples);

    [[nodiscard]] std::size_t samples() const { return m_samples; }

    /// Transform of the stretch less its mean, through the minimum-sidelobe window of so many terms.
    [[nodiscard]] StretchTransform
    windowed(std::span<const double> stretch, double mean, int terms);

    /// Spectrum of what is left once the tone is taken out.
    [[nodiscard]] ResidualSpectrum residual(std::span<const double> stretch,
                                            const ToneBlocks& tone,
                                            const Envelope& envelope,
                                            std::vector<double> lines,
                                            double gapBins);

    /// Noise power of a line's phasor over that of one sample, for lines projected on their lobes.
    [[nodiscard]] double phasorNoise(int terms);

private:
    struct Window
    {
        std::vector<double> samples;
        double phasorNoise = 0.0;
    };
    Window& window(int terms);

    std::size_t m_samples;
    RealFourier m_fourier;
    std::array<Window, kMostTerms + 1> m_windows; ///< by number of terms, made when first needed
    std::vector<double> m_taperEdge;
    double m_taperPower;
};

} // namespace sinewright::core
