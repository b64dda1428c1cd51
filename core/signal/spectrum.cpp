// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/spectrum.h"

#include <cassert>
#include <complex>
#include <numbers>

namespace sinewright::core {

Spectrum::Spectrum(const CosineWindow& window, std::size_t count)
    : m_window(windowSamples(window, count))
    , m_fourier(count)
    , m_power(count / 2 + 1)
    , m_noiseBandwidthBins(windowFigures(window).noiseBandwidthBins)
{
    assert(count % 2 == 0);
    double sum = 0.0;
    for (const double w : m_window) {
        sum += w;
    }
    // A sine of amplitude A stands with A / 2 times the sum of the window; its rms is A / sqrt 2.
    const double scale = std::numbers::sqrt2 / sum;
    for (double& w : m_window) {
        w *= scale;
    }
}

std::span<const double> Spectrum::powerFs2(std::span<const double> samples)
{
    assert(samples.size() == m_window.size());
    const auto input = m_fourier.input();
    for (std::size_t n = 0; n < samples.size(); ++n) {
        input[n] = samples[n] * m_window[n];
    }
    m_fourier.forward();
    const auto bins = m_fourier.output();
    for (std::size_t m = 0; m < bins.size(); ++m) {
        m_power[m] = std::norm(bins[m]);
    }
    return m_power;
}

} // namespace sinewright::core
