// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/signal/window.h"

#include "core/units.h"

#include <algorithm>
#include <cassert>
#include <cmath>
#include <numbers>

namespace sinewright::core {

namespace {

constexpr double kPi = std::numbers::pi;

/// Below this distance [bins] from the kernel's middle its power series is used: its next term is then 1e-12.
constexpr double kSeriesBelowBins = 1e-3;

/// Sum of exp(-2 pi i y t / N) over N samples about the middle.
double dirichlet(double y, double count)
{
    if (std::abs(y) < kSeriesBelowBins) {
        const double u = kPi * y;
        return count * (1.0 - u * u * (1.0 - 1.0 / (count * count)) / 6.0);
    }
    return std::sin(kPi * y) / std::sin(kPi * y / count);
}

double dirichletSlope(double y, double count)
{
    if (std::abs(y) < kSeriesBelowBins) {
        return -count * kPi * kPi * y * (1.0 - 1.0 / (count * count)) / 3.0;
    }
    const double narrow = std::sin(kPi * y / count);
    return (kPi * std::cos(kPi * y) -
            std::sin(kPi * y) / narrow * std::cos(kPi * y / count) * kPi / count) /
           narrow;
}

/// Transform of the endless-rate window at x bins, 1 in the middle.
double longTransform(const CosineWindow& window, double x)
{
    const auto sinc = [](double y) {
        return y == 0.0 ? 1.0 : std::sin(kPi * y) / (kPi * y);
    };
    double sum = window.terms[0] * sinc(x);
    for (std::size_t j = 1; j < window.terms.size(); ++j) {
        const auto shift = static_cast<double>(j);
        sum += window.terms[j] / 2.0 * (sinc(x - shift) + sinc(x + shift));
    }
    return sum / window.terms[0];
}

/// Largest magnitude of the transform beyond the main lobe.
double highestSidelobe(const CosineWindow& window)
{
    constexpr int kStepsPerBin = 512;
    constexpr int kSearchBins =
        60; // the highest sidelobe of every published set lies within a few lobes
    const auto at = [&window](int step) {
        return std::abs(longTransform(window, static_cast<double>(step) / kStepsPerBin));
    };
    const int first = static_cast<int>(window.terms.size()) *
                      kStepsPerBin; // first null of a minimum-sidelobe set
    double highest = 0.0;
    for (int step = first; step < kSearchBins * kStepsPerBin; ++step) {
        highest = std::max(highest, at(step));
    }
    return highest;
}

} // namespace

WindowFigures windowFigures(const CosineWindow& window)
{
    double squares = window.terms[0] * window.terms[0];
    double peak = window.terms[0];
    for (const double term : window.terms.subspan(1)) {
        squares += term * term / 2.0;
        peak += term;
    }
    WindowFigures figures;
    figures.noiseBandwidthBins = squares / (window.terms[0] * window.terms[0]);
    figures.coherentGain = window.terms[0] / peak;
    figures.scallopDb = -decibelsFromRatio(std::abs(longTransform(window, 0.5)));
    figures.sidelobeDb = decibelsFromRatio(highestSidelobe(window));
    return figures;
}

std::vector<double> windowSamples(const CosineWindow& window, std::size_t count)
{
    std::vector<double> samples(count);
    const auto terms = window.terms;
    for (std::size_t n = 0; n < (count + 1) / 2; ++n) {
        const double t = static_cast<double>(n) - (static_cast<double>(count) - 1.0) / 2.0;
        const double c = std::cos(2.0 * kPi * t / static_cast<double>(count));
        // Clenshaw's recurrence for the sum of a_j cos(j x).
        double next = 0.0;
        double afterNext = 0.0;
        for (std::size_t j = terms.size() - 1; j > 0; --j) {
            const double here = 2.0 * c * next - afterNext + terms[j];
            afterNext = next;
            next = here;
        }
        samples[n] = c * next - afterNext + terms[0];
        samples[count - 1 - n] = samples[n];
    }
    return samples;
}

WindowTransform::WindowTransform(const CosineWindow& window, std::size_t count) : m_count(count)
{
    assert(!window.terms.empty() && count > 0);
    const std::size_t last = window.terms.size() - 1;
    m_terms.assign(2 * last + 1, 0.0);
    m_terms[last] = window.terms[0];
    for (std::size_t j = 1; j <= last; ++j) {
        m_terms[last - j] = m_terms[last + j] = window.terms[j] / 2.0;
    }
}

double WindowTransform::value(double bins) const
{
    const auto count = static_cast<double>(m_count);
    const std::size_t middle = m_terms.size() / 2;
    const auto last = static_cast<double>(middle);
    double sum = 0.0;
    for (std::size_t j = 0; j < m_terms.size(); ++j) {
        sum += m_terms[j] * dirichlet(bins - static_cast<double>(j) + last, count);
    }
    return sum;
}

double WindowTransform::slope(double bins) const
{
    const auto count = static_cast<double>(m_count);
    const std::size_t middle = m_terms.size() / 2;
    const auto last = static_cast<double>(middle);
    double sum = 0.0;
    for (std::size_t j = 0; j < m_terms.size(); ++j) {
        sum += m_terms[j] * dirichletSlope(bins - static_cast<double>(j) + last, count);
    }
    return sum;
}

} // namespace sinewright::core
