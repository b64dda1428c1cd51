// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/oscillator/decimator.h"

#include <cassert>
#include <cmath>
#include <numbers>
#include <numeric>

#include <Eigen/Core>

namespace sinewright::core {

namespace {

constexpr double kRejectionDb = 110.0;
constexpr double kTransition = 0.10; // of the output rate, centred at half of it

/// Kaiser's rules for the window's shape and for the length, from memory.
const double kShape = 0.1102 * (kRejectionDb - 8.7);

std::size_t tapCount(std::size_t factor)
{
    const double transition = 2.0 * std::numbers::pi * kTransition / static_cast<double>(factor);
    const auto half =
        static_cast<std::size_t>(std::ceil((kRejectionDb - 7.95) / (2.285 * transition) / 2.0));
    return 2 * half + 1;
}

std::vector<double> lowPass(std::size_t factor)
{
    if (factor == 1) {
        return {1.0};
    }
    std::vector<double> taps(tapCount(factor));
    const double middle = static_cast<double>(taps.size() - 1) / 2.0;
    for (std::size_t i = 0; i < taps.size(); ++i) {
        const double from = static_cast<double>(i) - middle;
        const double angle = std::numbers::pi * from / static_cast<double>(factor);
        const double sinc = from == 0.0 ? 1.0 : std::sin(angle) / angle;
        const double edge = std::sqrt(1.0 - (from / middle) * (from / middle));
        taps[i] = sinc * std::cyl_bessel_i(0.0, kShape * edge);
    }
    const double sum = std::accumulate(taps.begin(), taps.end(), 0.0);
    for (double& tap : taps) {
        tap /= sum;
    }
    return taps;
}

} // namespace

Decimator::Decimator(std::size_t factor)
    : m_taps(lowPass(factor))
    , m_history(2 * m_taps.size(), 0.0)
{
    assert(factor >= 1);
}

double Decimator::next(std::span<const double> input) noexcept
{
    for (const double sample : input) {
        m_history[m_at] = m_history[m_at + m_taps.size()] = sample;
        m_at = m_at + 1 == m_taps.size() ? 0 : m_at + 1;
    }
    using Stretch = Eigen::Map<const Eigen::VectorXd>;
    const auto length = static_cast<Eigen::Index>(m_taps.size());
    return Stretch(m_taps.data(), length).dot(Stretch(&m_history[m_at], length));
}

} // namespace sinewright::core
