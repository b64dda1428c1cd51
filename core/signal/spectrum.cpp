// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/spectrum.h"

#include <cassert>
#include <numbers>

#include <Eigen/Core>

namespace sinewright::core {

Spectrum::Spectrum(const CosineWindow& window, std::size_t count, Dc dc)
    : m_window(windowSamples(window, count))
    , m_fourier(count)
    , m_dc(dc)
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
    const auto size = static_cast<Eigen::Index>(samples.size());
    const Eigen::Map<const Eigen::ArrayXd> signal(samples.data(), size);
    const Eigen::Map<const Eigen::ArrayXd> window(m_window.data(), size);
    // Under the window a tone does not reach the mean, however its periods fall.
    const double mean = m_dc == Dc::TakeOut ? (signal * window).sum() / window.sum() : 0.0;
    Eigen::Map<Eigen::ArrayXd>(m_fourier.input().data(), size) = (signal - mean) * window;
    m_fourier.forward();
    return m_fourier.powers();
}

} // namespace sinewright::core
