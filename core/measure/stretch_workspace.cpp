// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/measure/stretch_workspace.h"

#include <algorithm>
#include <utility>

#include <Eigen/Core>

namespace sinewright::core {

StretchWorkspace::StretchWorkspace(std::size_t samples)
    : m_samples(samples)
    , m_fourier(goodTransformLength(samples))
    , m_taperEdge(taperEdge(samples))
    , m_taperPower(taperPower(m_taperEdge, samples))
{
    // The padding is written once and never touched again.
    std::ranges::fill(m_fourier.input(), 0.0);
}

StretchWorkspace::Window& StretchWorkspace::window(int terms)
{
    auto& window = m_windows[static_cast<std::size_t>(terms)];
    if (window.samples.empty()) {
        window.samples = windowSamples(minimumSidelobeWindow(terms), m_samples);
        const Eigen::Map<const Eigen::ArrayXd> w(window.samples.data(),
                                                 static_cast<Eigen::Index>(m_samples));
        // A projection on the lobe weighs the samples by w^2; the amplitude's two parts then have together 4 times the
        // sample's power by the sum of w^4 over the square of the sum of w^2.
        const double squares = w.square().sum();
        window.phasorNoise = 4.0 * w.square().square().sum() / (squares * squares);
    }
    return window;
}

StretchTransform StretchWorkspace::windowed(std::span<const double> stretch, double mean, int terms)
{
    const auto& weights = window(terms).samples;
    const auto size = static_cast<Eigen::Index>(m_samples);
    Eigen::Map<Eigen::ArrayXd>(m_fourier.input().data(), size) =
        (Eigen::Map<const Eigen::ArrayXd>(stretch.data(), size) - mean) *
        Eigen::Map<const Eigen::ArrayXd>(weights.data(), size);
    m_fourier.forward();
    return {m_fourier, minimumSidelobeWindow(terms), m_samples};
}

ResidualSpectrum StretchWorkspace::residual(std::span<const double> stretch,
                                            const ToneBlocks& tone,
                                            const Envelope& envelope,
                                            std::vector<double> lines,
                                            double gapBins)
{
    const auto left = m_fourier.input().first(m_samples);
    tone.subtract(stretch, envelope, left);
    applyTaper(m_taperEdge, left);
    m_fourier.forward();
    return {m_fourier, m_samples, m_taperPower, std::move(lines), gapBins};
}

double StretchWorkspace::phasorNoise(int terms)
{
    return window(terms).phasorNoise;
}

} // namespace sinewright::core
